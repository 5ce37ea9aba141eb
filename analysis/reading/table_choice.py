"""Which of several tables on a sheet is read, how that is told, and what could have been read instead."""

from collections.abc import Sequence
from dataclasses import replace

from analysis import refusals
from analysis.reading import regions
from analysis.reading.choices import WHOLE, Reading
from analysis.reading.regions import Region
from analysis.reading.sheets import Sheet
from analysis.reading.words import several
from analysis.table import Alternative, Decision

ONE = Decision("table", "One table was found.", ordinary=True)


def chosen(sheet: Sheet, reading: Reading) -> Sheet:
    """The part of a sheet that holds the table asked for, the first of several, or all of it; raises MissingTable."""
    found = regions.find(sheet.values)
    if reading.table is not None and reading.table not in [*(region.name for region in found), WHOLE]:
        raise refusals.MissingTable(reading.table, [region.name for region in found])
    if not found:
        return _told(sheet, ONE)
    name = reading.table or found[0].name
    region = next((region for region in found if region.name == name), None)
    part = sheet if region is None else sheet.part(region.block.rows, region.block.columns)
    return _told(part, _decision(name, found, reading))


def _told(sheet: Sheet, decision: Decision) -> Sheet:
    return replace(sheet, found=replace(sheet.found, decisions=(*sheet.found.decisions, decision)))


def _decision(name: str, found: Sequence[Region], reading: Reading) -> Decision:
    """Tell which of the tables was read; the first is what no request gives, and another one has a header row of its own."""
    others = [region.name for region in found if region.name != name]
    sentence = f"{len(found)} tables stand apart from each other, in {several([region.name for region in found], 8)}; " + (
        "all of it was read as one." if name == WHOLE else f"the one in {name} was read."
    )
    names = [*others, *([] if name == WHOLE else [WHOLE])]
    alternatives = tuple(
        Alternative(
            f"{other}, as one table" if other == WHOLE else f"the table in {other}",
            replace(reading, table=None if other == found[0].name else other, header_row=None),
        )
        for other in names
    )
    return Decision("table", sentence, alternatives)
