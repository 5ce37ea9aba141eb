"""Where an .ods file keeps the marks of its cells, and how they are found."""

from xml.parsers import expat

from analysis.reading import archives
from analysis.reading.archives import local
from analysis.reading.records import Span
from analysis.reading.sheet_marks import Marks

_MOST_REPEATS = 100_000  # of one percent cell; a longer run is empty formatting


def read(data: bytes) -> dict[str, Marks]:
    """Return the marks of every sheet of an .ods file, checked against the zip limit before."""
    reader = _ContentParser()
    xml = archives.part(data, "content.xml")
    if xml:
        archives.parse(xml, reader.parser)
    return reader.sheets


class _ContentParser:
    """Walks through the cells of the sheets and notes their marks."""

    def __init__(self) -> None:
        self.sheets: dict[str, Marks] = {}
        self.marks = Marks()
        self.inside = False
        self.row = self.column = 0
        self.repeats = 1
        self.cell: dict[str, str] = {}
        self.texts: list[str] = []
        self.parser = expat.ParserCreate()
        self.parser.StartElementHandler = self.start
        self.parser.EndElementHandler = self.end

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        """Note where a sheet, a row or a cell begins."""
        name = local(tag)
        plain = {local(key): value for key, value in attributes.items() if local(key) != "value-type" or key.startswith("office")}
        if name == "table":
            self.inside, self.row, self.marks = True, 0, Marks()
            self.sheets[plain.get("name", "")] = self.marks
        elif not self.inside:
            return
        elif name == "table-row":
            self._start_row(plain)
        elif name in ("table-cell", "covered-table-cell"):
            plain["error"] = "yes" if attributes.get("calcext:value-type") == "error" else ""
            self.cell, self.texts = plain, []
        elif name == "p" and self.cell:
            self.parser.CharacterDataHandler = self.texts.append

    def _start_row(self, attributes: dict[str, str]) -> None:
        self.repeats, self.column = _repeats(attributes, "number-rows-repeated"), 0
        if attributes.get("visibility") in ("collapse", "filter") and self.repeats < _MOST_REPEATS:
            self.marks.hidden.extend(range(self.row + 1, self.row + self.repeats + 1))

    def end(self, tag: str) -> None:
        """Sum up a cell or a row that ends."""
        name = local(tag)
        if not self.inside:
            return
        if name == "table":
            self.inside = False
        elif name == "table-row":
            self.row += self.repeats
        elif name in ("table-cell", "covered-table-cell"):
            self._end_cell()
        elif name == "p":
            self.parser.CharacterDataHandler = None

    def _end_cell(self) -> None:
        width = _repeats(self.cell, "number-columns-repeated")
        filled = "value-type" in self.cell or bool("".join(self.texts))
        if filled:
            self.marks.reach(self.row + self.repeats - 1, self.column + width - 1)
        elif "formula" in self.cell:
            self.marks.unsaved.append((self.row, self.column))
        if filled and width * self.repeats <= _MOST_REPEATS:
            self._mark([(self.row + down, self.column + right) for down in range(self.repeats) for right in range(width)])
        down, right = _repeats(self.cell, "number-rows-spanned"), _repeats(self.cell, "number-columns-spanned")
        if down > 1 or right > 1:
            self.marks.spans.append(Span(self.row + 1, self.row + down, self.column, self.column + right - 1))
        self.column += width
        self.cell = {}

    def _mark(self, cells: list[tuple[int, int]]) -> None:
        if self.cell.get("value-type") == "percentage":
            self.marks.percent.update(cells)
        if self.cell["error"]:
            self.marks.errors.update(dict.fromkeys(cells, "".join(self.texts)))


def _repeats(attributes: dict[str, str], name: str) -> int:
    text = attributes.get(name, "1")
    return int(text) if text.isdigit() and 0 < len(text) < 9 else 1
