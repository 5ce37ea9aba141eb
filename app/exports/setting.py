"""How a table of text is set on a slide: its type, its widths, what is shortened and how many rows there is room for."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

import pandas as pd

from app import paper
from app.exports import fit
from app.exports.master import BODY, SMALLEST, Box

PAD_SIDE, PAD_END = 0.12, 0.06  # inches between a text and the edges of its cell
MOST_ROWS = 20  # more never fit a slide; the rest of a long table is not measured
HEAD_LINES, MOST_LINES, EVERY_LINE = 4, 3, 9  # of one cell: in the head, where rows may be left away, where none may
WIDEST_FIELD, TALLEST_FIELD = 2.6, 0.9  # inches of a field in a table of counts
ONE_LINE_ABOVE = 20  # points; larger type is not worth a wrapped line
NARROWEST = 0.95  # inches of a column; more columns than fit are left away

Row = tuple[str, ...]


@dataclass(frozen=True)
class Dress:
    """How one kind of table is set."""

    sizes: tuple[int, ...] = (28, 26, 24, 22, 20, SMALLEST)  # points, the largest at which the whole table fits
    strong: int | None = None  # the column in bold
    tiles: bool = False  # a field for each cell, spread over the slide, numbers in the middle
    every_row: bool = False  # long cells lose words before the table loses rows
    kept: str = "the first {}"  # what the rows at the top are, where not all fit
    body: Box = BODY  # the place on the slide

    def growth(self, column: int) -> float:
        """Return how much wider than plain type a column is set."""
        return fit.BOLD if column == self.strong else 1.0


@dataclass(frozen=True)
class Fitted:
    """A table as it stands on the slide, and what was done to make it fit."""

    points: int
    widths: tuple[float, ...]  # inches
    heights: tuple[float, ...]  # inches, the head first
    rows: tuple[Row, ...]  # the head first
    cut: str  # the rule in words where rows or columns were left away
    shortened: tuple[tuple[str, str], ...]  # what reads differently on the slide, and the whole of it


@dataclass(frozen=True)
class Measure:
    """One size of type in columns of given widths."""

    points: int
    widths: tuple[float, ...]
    dress: Dress

    def room(self, column: int) -> float:
        """Return the inches in which the text of a column is set, as if it were in plain type."""
        return (self.widths[column] - 2 * PAD_SIDE) / self.dress.growth(column) + 1e-6

    def lines(self, row: Row) -> int:
        """Return how many lines a row takes."""
        return max(len(fit.wrap(text, self.points, self.room(k))) for k, text in enumerate(row))

    def height(self, row: Row) -> float:
        """Return how tall a row is, in inches."""
        return fit.height(self.lines(row), self.points) + 2 * PAD_END

    def tall(self, rows: Iterable[Row]) -> float:
        """Return how tall some rows are together."""
        return sum(map(self.height, rows))

    def short(self, row: Row, most: int) -> Row:
        """Return the cells of a row on so many lines at most, those that are too long shortened in their middle."""
        return tuple(fit.shorten(text, self.points, self.room(k), most, from_end=len(text) // 3) for k, text in enumerate(row))

    def holds(self, rows: Sequence[Row]) -> bool:
        """Return whether all rows stand in the body, no word broken, and lists of short entries on one line each where type is large."""
        free = self.dress.every_row or self.dress.tiles or self.points <= ONE_LINE_ABOVE
        lines = EVERY_LINE if free else 1
        fits = all(fit.fits(text, self.points, self.room(k), lines) for row in rows for k, text in enumerate(row))
        return fits and self.tall(rows) <= self.dress.body.tall


def fitted(table: pd.DataFrame, dress: Dress) -> Fitted:
    """Return a table fitted to the body of a slide at the largest type that holds it all, else as much as fits at the smallest.

    Rule: where rows may go, the first ones stay ("the 8 largest of 42"); where they may not, long cells are shortened instead. Columns
    that would get too narrow to read go from the right.
    """
    columns = min(len(table.columns), int(dress.body.wide // NARROWEST))
    kept = table if dress.every_row else table.head(MOST_ROWS)
    everything: list[tuple[object, ...]] = [tuple(table.columns), *kept.itertuples(index=False, name=None)]
    texts = [tuple(map(str, row[:columns])) for row in everything]
    for points in dress.sizes:
        measure = Measure(points, _widths(texts, points, dress), dress)
        rows = _short(texts, measure)
        if columns == len(table.columns) and rows == texts and len(kept) == len(table) and measure.holds(rows):
            break
    found = _cut(rows, texts, measure, table)
    return _spread(found, dress.body) if dress.tiles else found


def is_numeric(column: Iterable[str]) -> bool:
    """Return whether a column reads as numbers, with or without intervals."""
    return all(map(paper.is_number, column))


def _cut(rows: Sequence[Row], texts: Sequence[Row], measure: Measure, table: pd.DataFrame) -> Fitted:
    """Return as many rows as the body holds, with the rule where some are left away."""
    shown = len(rows)
    while shown > 2 and not measure.dress.every_row and measure.tall(rows[:shown]) > measure.dress.body.tall:
        shown -= 1
    columns = len(rows[0])
    rules = (
        f"{columns - 1} of {len(table.columns) - 1} columns" if columns < len(table.columns) else "",
        f"{measure.dress.kept.format(shown - 1)} of {len(table)} rows" if shown - 1 < len(table) else "",
    )
    pairs = dict.fromkeys(
        (a, b) for mine, whole in zip(rows[:shown], texts, strict=False) for a, b in zip(mine, whole, strict=True) if a != b
    )
    heights = tuple(map(measure.height, rows[:shown]))
    return Fitted(measure.points, measure.widths, heights, tuple(rows[:shown]), "; ".join(filter(None, rules)), tuple(pairs))


def _short(texts: Sequence[Row], measure: Measure) -> list[Row]:
    """Return the texts no longer than their cells allow; where every row has to stay, so long that all stand on the slide."""
    head, *rows = texts
    most = EVERY_LINE if measure.dress.every_row else MOST_LINES
    short = [measure.short(head, HEAD_LINES), *(measure.short(row, most) for row in rows)]
    while measure.dress.every_row and most > 1 and measure.tall(short) > measure.dress.body.tall:
        most -= 1
        short = [short[0], *(measure.short(row, most) for row in rows)]
    return _kept_apart(short, texts, measure, most) if measure.dress.tiles else short


def _kept_apart(short: Sequence[Row], texts: Sequence[Row], measure: Measure, most: int) -> list[Row]:
    """Keep names of levels different across the top and down the side of a table of counts, also when they are short."""
    head, *rows = short
    across = fit.names(texts[0][1:], measure.points, min(map(measure.room, range(1, len(head)))), HEAD_LINES)
    down = fit.names([row[0] for row in texts[1:]], measure.points, measure.room(0), most)
    return [(head[0], *across), *((name, *row[1:]) for name, row in zip(down, rows, strict=True))]


def _widths(texts: Sequence[Row], points: int, dress: Dress) -> tuple[float, ...]:
    """Return the widths of the columns: what each needs where that fits.

    Else numbers keep what they need, no column gets less than its widest word, and what is left goes to words in proportion to need.
    """
    columns = list(zip(*texts, strict=True))
    needs = [_needs(column, points, dress.growth(k)) for k, column in enumerate(columns)]
    if dress.tiles:
        return _tile_widths(columns, needs, points, dress)
    if sum(needs) <= dress.body.wide:
        return tuple(needs)
    least = [min(need, _least(column, points, dress, k)) for k, (need, column) in enumerate(zip(needs, columns, strict=True))]
    over = [need - low for need, low in zip(needs, least, strict=True)]
    room = max(0.0, dress.body.wide - sum(least))
    widths = [low + room * more / max(sum(over), 1e-9) for low, more in zip(least, over, strict=True)]
    return tuple(width * min(1.0, dress.body.wide / sum(widths)) for width in widths)


def _needs(column: Sequence[str], points: int, growth: float) -> float:
    """Return the width at which no text of a column has to be wrapped."""
    return max((fit.width(text, points) for text in column), default=0.0) * growth + 2 * PAD_SIDE


def _least(column: Sequence[str], points: int, dress: Dress, place: int) -> float:
    """Return the width at which no number of a column is wrapped and no word broken; words get a quarter of the room at most."""
    head, *rest = column
    if rest and is_numeric(rest):
        return _needs([*rest, *fit.spaced(head)], points, dress.growth(place))
    return min(_needs([word for text in column for word in fit.spaced(text)], points, dress.growth(place)), dress.body.wide / 4)


def _tile_widths(columns: Sequence[Row], needs: Sequence[float], points: int, dress: Dress) -> tuple[float, ...]:
    """Return the widths of a table of counts: its names down the side get up to a third, the fields share the rest alike."""
    corner, *names = columns[0]
    side = min(_needs([*names, *fit.spaced(corner)], points, dress.growth(0)), dress.body.wide / 3)
    fields = len(columns) - 1
    return (side, *[min(max(needs[1:]), (dress.body.wide - side) / fields)] * fields)


def _spread(content: Fitted, body: Box) -> Fitted:
    """Return a table of counts grown towards the edges of the body, its fields of one size."""
    head, *fields = content.widths
    field = max(*fields, min(WIDEST_FIELD, (body.wide - head) / len(fields)))
    room = body.tall / sum(content.heights)
    heights = tuple(max(height, min(TALLEST_FIELD, height * room)) for height in content.heights[1:])
    return replace(content, widths=(head, *[field] * len(fields)), heights=(content.heights[0], *heights))
