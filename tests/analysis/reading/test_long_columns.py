"""Long columns, which are read by patterns, give what short ones give cell by cell."""

import numpy as np
import pytest

from analysis import refusals
from analysis.reading import odd_cells
from analysis.table import Response
from tests.analysis.reading.files import read

RANDOM = np.random.default_rng(11)
NUMBERS = RANDOM.normal(50, 400, 3000).round(3)


def response(cells: list[str]) -> Response:
    """Read cells as the response of a table."""
    return read("feed;shade;y\n" + "".join(f"A;low;{cell}\n" for cell in cells), layout="rows").column("y").as_response()


WAYS = {
    "decimal commas": [f"{number:.3f}".replace(".", ",") for number in NUMBERS],
    "a unit": [f"{number} mg" for number in NUMBERS],
    "a unit on some": [f"{number} mg" if index % 2 else f"{number}" for index, number in enumerate(NUMBERS)],
    "true minus signs": [f"{number}".replace("-", "\u2212") for number in NUMBERS],
    "percent with commas": [f"{number} %".replace(".", ",") for number in NUMBERS],
    "exponents": [f"{number}E+2 mg" for number in NUMBERS],
    "footnotes": [f"{number}*" for number in NUMBERS],
    "marks that either reading fits": [f"{abs(number) + 1:.3f} g" for number in NUMBERS],
    "marks that one number settles": ["1.234.567", *(f"{abs(number) + 1:.3f} g" for number in NUMBERS)],
    "blanks around": [f"  {number}\u00a0" for number in NUMBERS],
    "missing words, limits and text": [cell for number in NUMBERS for cell in (f"{number} mg", "NA", "<0.5 mg", f"lost {number}")][:9000],
    "a large offset": [f"{10**12 + index}.{index % 10} mg" for index in range(3000)],
}


@pytest.mark.parametrize("cells", WAYS.values(), ids=WAYS.keys())
def test_patterns_change_nothing(cells: list[str], monkeypatch: pytest.MonkeyPatch) -> None:
    fast = response(cells)
    monkeypatch.setattr(odd_cells, "_MANY", 10**9)
    careful = response(cells)
    np.testing.assert_array_equal(fast.values, careful.values)
    np.testing.assert_array_equal(fast.offsets, careful.offsets)
    assert (fast.unit, fast.missing, fast.notes, fast.pivot) == (careful.unit, careful.missing, careful.notes, careful.pivot)


def test_mixed_units_are_found_in_long_columns() -> None:
    with pytest.raises(refusals.MixedUnits, match=r"mg \(row 2\) and kg \(row 2502\)"):
        response([f"{number} {'mg' if index < 2500 else 'kg'}" for index, number in enumerate(NUMBERS)])


def test_irregular_lines_in_a_long_file() -> None:
    lines = [f"A,low,{index}" for index in range(5000)]
    lines[100], lines[200], lines[300], lines[400] = "A,low", "", "  ", "A,low,400,,"
    table = read("feed,shade,y\n" + "\n".join(lines))
    assert table.rows == 4998
    assert [entry.row for entry in table.column("y").as_response().missing] == [102]
    assert table.file_rows[[199, 200, 298, 299]].tolist() == [201, 203, 301, 303]
    with pytest.raises(refusals.TooManyFields, match="Row 4002 has 4 filled fields"):
        read("feed,shade,y\n" + "\n".join([*lines[:4000], "A,low,1,5", *lines[4000:]]))
