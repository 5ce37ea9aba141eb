"""Tables of means and their spread are turned down; tables that merely look like them are read."""

import pytest

from analysis import refusals
from analysis.reading.entry import read_table
from tests.analysis.reading.files import read, xlsx

SUMMARIES = {
    "mean and SD": "feed,shade,mean,SD,n\nhay,low,5.2,0.3,6\nhay,high,6.1,0.4,6\nstraw,low,4.4,0.2,6\nstraw,high,4.9,0.5,6\n",
    "mean and SEM of a named response": "N,light,mean yield (g),SEM\n0,low,5.2,0.3\n0,high,6.1,0.4\n50,low,4.4,0.2\n50,high,4.9,0.5\n",
    "two responses": "feed,shade,yield_mean,yield_sd,oil_mean,oil_sd\nhay,low,5,1,7,1\nhay,high,6,1,8,2\nstraw,low,4,1,9,1\n",
    "German": "Futter;Licht;Mittelwert;Standardabweichung\nHeu;hell;5,2;0,3\nHeu;matt;6,1;0,4\nStroh;hell;4,4;0,2\n",
    "plus-minus": "feed,shade,yield\nhay,low,5.2 ± 0.3\nhay,high,6.1 ± 0.4\nstraw,low,4.4 ± 0.2\n",
    "plus-minus with units and letters": "feed,shade,yield\nhay,low,5.2 ± 0.3 a\nhay,high,6.1±0.4 b\nstraw,low,4.4 +/- 0.2 ab\n",
    "a grid of plus-minus": "feed,low,high\nhay,5.2 ± 0.3,6.1 ± 0.4\nstraw,4.4 ± 0.2,4.9 ± 0.5\n",
    "brackets": "feed,shade,yield\nhay,low,5.2 (0.3)\nhay,high,6.1 (0.4)\nstraw,low,4.4 (0.2)\n",
    "spanning header": ",,yield,\nfeed,shade,mean,SD\nhay,low,5.2,0.3\nhay,high,6.1,0.4\nstraw,low,4.4,0.2\n",
}
OBSERVATIONS = {
    "means of the plants of each plot": "block,feed,shade,mean,SD\n1,hay,low,5,1\n2,hay,low,6,1\n1,hay,high,4,1\n2,hay,high,7,1\n",
    "a single value beside other means": "feed,shade,yield,mean temp,sd temp\nhay,low,5.25,20,1\nhay,high,6.5,21,1\nstraw,low,4.5,20,2\n",
    "a grid with means beside it": "feed,low,high,mean,SD\nhay,5.2,6.1,5.65,0.6\nstraw,4.4,4.9,4.65,0.4\n",
    "repeated combinations": "feed,shade,mean,SD\nhay,low,5,1\nhay,low,6,1\nhay,high,4,1\nhay,high,7,1\n",
    "one odd cell": "feed,shade,yield\nhay,low,5.2 ± 0.3\nhay,high,6.1\nstraw,low,4.4\n",
    "a column named like a meaning": "meadow,shade,demeanour\nhay,low,5.2\nhay,high,6.1\nstraw,low,4.4\n",
}


@pytest.mark.parametrize("name", SUMMARIES)
def test_means_with_their_spread_are_turned_down(name: str) -> None:
    with pytest.raises(refusals.SummaryTable, match="not the single observations, which the analysis needs"):
        read(SUMMARIES[name])


def test_means_in_a_workbook_are_turned_down() -> None:
    rows = [["feed", "shade", "mean", "sd"], ["hay", "low", 5.2, 0.3], ["hay", "high", 6.1, 0.4], ["straw", "low", 4.4, 0.2]]
    with pytest.raises(refusals.SummaryTable, match="columns “mean” and “sd”, one row for each combination"):
        read_table(xlsx(rows))


def test_the_cell_and_its_row_are_named() -> None:
    with pytest.raises(refusals.SummaryTable, match=r"“5\.2 ± 0\.3” in column “yield”, row 2"):
        read(SUMMARIES["plus-minus"])


@pytest.mark.parametrize("name", OBSERVATIONS)
def test_observations_are_read(name: str) -> None:
    assert read(OBSERVATIONS[name]).rows > 1
