"""Six files as they come from benches and offices, each untidy in its own way, and the grid of counts that each comes to once mended."""

from collections.abc import Callable
from dataclasses import dataclass
from io import BytesIO
from itertools import product

import openpyxl
from openpyxl.worksheet.worksheet import Worksheet


@dataclass(frozen=True)
class Mess:
    """One untidy file, what has to be mended in it, and what the grid tells then."""

    file: str
    content: Callable[[], bytes]
    instead: tuple[str, ...]  # what the reader should have decided, in the words of the buttons
    level: str  # the key of the button or field that mends a level
    rows: str  # set aside
    told: str  # the heading of the layout
    counts: str  # the grid as it is read out
    name: str | None = None  # what the level is called now, where it is renamed


def seeds() -> bytes:
    """Semicolons, two title lines, thousands written like decimals, one level in two spellings."""
    cells = list(product(("sun", "shade"), ("A", "B", "Ctrl"), range(4)))
    body = [
        f"{light};{'ctrl' if (feed, k) == ('Ctrl', 3) else feed};{1 + i % 3},{100 + 37 * i % 900:03d}"
        for i, (light, feed, k) in enumerate(cells)
    ]
    return "\n".join(["Seed counts, spring", "read by hand", "", "light;feed;seeds per pot", *body, ""]).encode()


def harvest() -> bytes:
    """Windows-1252, tabs, names in two languages, a row of units, totals and means at the foot, a slip of the pen."""
    cells = list(product(("früh", "spät"), ("keine", "halb", "voll"), range(3)))
    body = [f"{sown}\t{'hablb' if i == 4 else feed}\t{10 + i * 0.7:.1f}\t{i + 1}" for i, (sown, feed, _k) in enumerate(cells)]
    heads = ["sowing\tfertiliser\tyield\tplot", "Aussaat\tDüngung\tErtrag\tParzelle", "\t\tkg\t"]
    return "\r\n".join([*heads, *body, "Summe\t\t285.3\t", "Mittel\t\t15.9\t", ""]).encode("cp1252")


def heights() -> bytes:
    """A workbook of two sheets with merged cells and hidden rows, the trial on the second."""
    book = openpyxl.Workbook()
    for sheet, base in ((book.active, 5.0), (book.create_sheet("Main trial"), 20.0)):
        assert isinstance(sheet, Worksheet)
        sheet.append(["variety", "water", "height (cm)"])
        for variety in ("Alba", "Bruna"):
            start = sheet.max_row + 1
            for i, (water, k) in enumerate(list(product(("dry", "moist", "wet"), range(3)))):
                sheet.append([variety if i == 0 else None, water, base + i * 0.5 + k * 0.3])
            sheet.merge_cells(start_row=start, end_row=sheet.max_row, start_column=1, end_column=1)
        for hidden in (5, 14):
            sheet.row_dimensions[hidden].hidden = True
    book.active.title = "Pilot"  # type: ignore[union-attr]
    return _bytes(book)


def yields() -> bytes:
    """A grid whose headings look like measurements, replicates below each other, one cultivar in two spellings."""
    cultivars = ["Alba"] * 3 + ["Bruna"] * 3 + ["Carla", "Carla", "carla"]
    return "\n".join(
        ["cultivar,dry (t),wet (t)", *(f"{c},{10 + i * 0.7:.1f},{12 + i * 0.5:.1f}" for i, c in enumerate(cultivars)), ""]
    ).encode()


def nitrate() -> bytes:
    """No header, values below a detection limit, typing errors among the levels."""
    cells = list(product(("sun", "shade"), ("none", "half", "complete"), range(4)))
    names = {("complete", 0): "Complete", ("complete", 1): "complte"}
    values = ["<0.5" if i in (3, 14) else f"{0.6 + i * 0.11:.2f}" for i in range(len(cells))]
    return "\n".join(
        f"{light},{names.get((feed, k), feed)},{value}" for (light, feed, k), value in zip(cells, values, strict=True)
    ).encode()


def growth() -> bytes:
    """Two tables on one sheet, the one wanted below the other."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert isinstance(sheet, Worksheet)
    for top, base in ((1, 3.0), (24, 7.0)):
        lines = [("line", "dose", "growth")] + [
            (line, dose, round(base + i * 0.37 + k * 0.2, 2))
            for i, (line, dose, k) in enumerate(list(product(("wild", "mutant"), (0, 50, 200), range(3))))
        ]
        for row, line in enumerate(lines, start=top):
            for column, value in enumerate(line, start=1):
                sheet.cell(row, column, value)
    return _bytes(book)


def _bytes(book: openpyxl.Workbook) -> bytes:
    filled = BytesIO()
    book.save(filled)
    return filled.getvalue()


MESSES = (
    Mess(
        "seeds.csv",
        seeds,
        ("point",),
        "column_merge_0",
        "5",
        "2 levels of light × 3 of feed, 23 observations",
        "sun with A: 3; sun with B: 4; sun with Ctrl: 4; shade with A: 4; shade with B: 4; shade with Ctrl: 4",
    ),
    Mess(
        "ernte.txt",
        harvest,
        ("row 2: Aussaat, Düngung, Ertrag, Parzelle",),
        "column_merge_0",
        "4, 6",
        "2 levels of Aussaat × 3 of Düngung, 16 observations",
        "früh with keine: 1; früh with halb: 3; früh with voll: 3; spät with keine: 3; spät with halb: 3; spät with voll: 3",
    ),
    Mess(
        "heights.xlsx",
        heights,
        ("the sheet “Main trial”", "leave them out"),
        "column_0_name",
        "2",
        "2 levels of variety × 3 of water, 15 observations",
        "Alba with very dry: 2; Alba with moist: 2; Alba with wet: 3; Bruna with very dry: 3; Bruna with moist: 2; Bruna with wet: 3",
        "very dry",
    ),
    Mess(
        "yields.csv",
        yields,
        ("a grid",),
        "row_merge_0",
        "3",
        "3 levels of cultivar × 2 of column, 16 observations",
        "Alba with dry (t): 2; Alba with wet (t): 2; Bruna with dry (t): 3; Bruna with wet (t): 3; "
        "Carla with dry (t): 3; Carla with wet (t): 3",
    ),
    Mess(
        "nitrate.csv",
        nitrate,
        ("no header",),
        "column_merge_0",
        "1",
        "2 levels of column 1 × 3 of column 2, 21 observations",
        "sun with none: 2; sun with half: 4; sun with complete: 4; shade with none: 3; shade with half: 4; shade with complete: 4",
    ),
    Mess(
        "two tables.xlsx",
        growth,
        ("the table in rows 24 to 42",),
        "column_2_out",
        "26",
        "2 levels of line × 2 of dose, 11 observations",
        "wild with 0: 2; wild with 50: 3; mutant with 0: 3; mutant with 50: 3",
    ),
)
