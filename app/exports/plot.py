"""Where the lines, bars, points and names of the interaction figure stand on a slide; nothing here draws."""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from analysis.findings import Findings
from analysis.rounding import shortest
from app import original
from app.exports import fit
from app.exports.master import BODY, SMALLEST, Box
from app.figures import placing, ticks
from app.figures.scene import View
from app.look import SLIDE, Look

POINTS_SHOWN = 20  # up to so many observations in each cell are drawn one by one
START = -0.5  # where the axis of the places begins; the levels stand at 0, 1, 2 …
_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
_TICKS_WANTED = 5
_NAMES_WIDE = 3.0  # inches that the names of the lines may take
_NAME_LINES = 2  # of a level along the axis, and of a line where there are few
_FEW = 4
_AIR = 0.12  # inches between a text and what it stands beside
_ROW = fit.height(1, SMALLEST)


@dataclass(frozen=True)
class Line:
    """One level of the factor whose levels are lines: its look, its estimates with their intervals, its observations."""

    level: str
    name: str  # the level, shortened and broken where it has to be; nothing where there is no room for names
    hue: str  # of marks, six hexadecimal digits
    ink: str  # of the name
    marker: str
    dash: str
    places: tuple[float, ...]  # on an axis where the levels of the other factor stand at 0, 1, 2 …
    estimates: tuple[float | None, ...]  # in the units told; None where the model gives none
    below: tuple[float | None, ...]  # from the estimate down to the end of its interval
    above: tuple[float | None, ...]
    point_places: tuple[float, ...]
    points: tuple[float, ...]  # the observations
    name_height: float  # where the name stands, on the scale of the estimates


@dataclass(frozen=True)
class Axis:
    """The scale at the side of the figure."""

    low: float
    high: float
    step: float
    decimals: int
    named: tuple[float, ...] = ()  # the values named where the scale is logarithmic, which a slide program does not choose well itself

    @property
    def is_log(self) -> bool:
        """Whether equal steps are equal ratios."""
        return bool(self.named)

    @property
    def names(self) -> tuple[str, ...]:
        """How the values named are written."""
        return tuple(shortest(value) for value in self.named)

    @property
    def wide(self) -> float:
        """Inches that the widest number takes."""
        ends = (f"{end:,.{self.decimals}f}" for end in (self.low, self.high))
        return max(fit.width(text, SMALLEST) for text in self.names or ends)

    def place(self, value: float) -> float:
        """Return where a value stands along the scale, evenly from place to place."""
        return math.log10(value) if self.is_log else value

    def value(self, place: float) -> float:
        """Return the value at a place."""
        return 10.0**place if self.is_log else place


@dataclass(frozen=True)
class Plot:
    """Everything that a slide program needs to draw the figure; lengths in inches inside the body of the slide."""

    row_factor: str  # whose levels are lines
    column_factor: str  # whose levels run along the axis
    response: str
    heading: str  # the name of the row factor as it stands above the names of the lines
    levels: tuple[str, ...]  # of the column factor
    names: tuple[str, ...]  # the same, shortened where they have to be
    lines: tuple[Line, ...]
    axis: Axis
    end: float  # where the names of the lines begin, on the axis of the places
    heading_height: float  # where the heading stands, on the scale of the estimates
    left: float  # kept free beside the plot
    right: float
    top: float
    bottom: float
    turned: bool  # whether the factors changed sides, so that there are few lines
    body: Box  # the place on the slide

    @property
    def wide(self) -> float:
        """Width of the plot itself."""
        return self.body.wide - self.left - self.right

    @property
    def tall(self) -> float:
        """Height of the plot itself."""
        return self.body.tall - self.top - self.bottom

    @property
    def slot(self) -> float:
        """Width that the name of a level along the axis may take."""
        return _slot(self.wide, self.end)

    @property
    def shortened(self) -> tuple[tuple[str, str], ...]:
        """Names that read differently on the slide, each with the whole name."""
        pairs = (*zip(self.names, self.levels, strict=True), *((line.name.replace("\n", " "), line.level) for line in self.lines))
        return tuple((short, whole) for short, whole in pairs if short and short != " ".join(fit.spaced(whole)))


class Even(View):
    """The scene with its levels at even places, since their names stand below them on a slide."""

    @cached_property
    def offsets(self) -> placing.Positions:
        """How far each line stands from the place of its level."""
        return placing.dodge(len(self.rows))

    @property
    def label_place(self) -> float:
        """Where the names of the lines begin."""
        return len(self.columns) - 1 + len(self.rows) / 2 * placing.step(len(self.rows)) + 0.05


def axis_for(low: float, high: float) -> Axis:
    """Return a scale with round steps that holds both values."""
    rough = (high - low or abs(high) or 1.0) / _TICKS_WANTED
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(factor * power for factor in _STEPS if factor * power >= rough * (1 - 1e-9))
    decimals = next(places for places in range(13) if places == 12 or abs(round(step, places) - step) < 1e-6 * step)
    return Axis(math.floor(low / step + 1e-9) * step, math.ceil(high / step - 1e-9) * step, step, decimals)


def log_axis(low: float, high: float) -> Axis:
    """Return a logarithmic scale between two powers of ten, with round values to name."""
    return Axis(10.0**low, 10.0**high, 1.0, 0, tuple(ticks.logarithmic((low, high))["tickvals"]))


def plan(findings: Findings, look: Look = SLIDE, body: Box = BODY) -> Plot:
    """Return where everything of the interaction figure stands on a slide, in the units that means are told in.

    Rows are lines as everywhere else, unless there are more of them than hues and fewer columns: then the factors change sides.
    """
    rows, columns = (len(findings.design[f"{side}_levels"]) for side in ("row", "column"))
    scene = Even(findings, turned=rows > len(look.hues) and columns < rows)
    row_factor, column_factor = (findings.design[f"{side}_factor"] for side in (scene.line, scene.along))
    axis = log_axis(*scene.reach) if scene.is_log else axis_for(*scene.reach)
    names = _line_names(scene, body)
    heading = fit.shorten(row_factor if names else f"{row_factor}: {len(scene.rows)} levels", SMALLEST, _NAMES_WIDE)
    left = _ROW + axis.wide + 2 * _AIR
    right = max(fit.width(text, SMALLEST) for text in (heading, *"\n".join(names).split("\n"))) * fit.BOLD + 2 * _AIR
    slot = _slot(body.wide - left - right, scene.label_place)
    levels = fit.names(scene.columns, SMALLEST, slot, _NAME_LINES)
    bottom = (max(len(fit.wrap(name, SMALLEST, slot)) for name in levels) + 1) * _ROW + _AIR
    *heights, heading_height = _heights(scene, names, axis, body.tall - _AIR - bottom)
    drawn = tuple(_line(scene, look, k, names[k] if names else "", heights[k] if names else 0.0) for k in range(len(scene.rows)))
    return Plot(
        row_factor, column_factor, original.label(findings), heading, scene.columns, levels, drawn, axis, scene.label_place, heading_height,
        left, right, _AIR, bottom, scene.turned, body,
    )  # fmt: skip


def _slot(wide: float, end: float) -> float:
    return wide / (end - START) * 0.94


def _line_names(scene: View, body: Box) -> tuple[str, ...]:
    """Return the names of the lines, broken where they take two lines of text, or none where they would not stand one below another."""
    room = fit.lines_in(body.tall - 3 * _ROW - 2 * _AIR, SMALLEST) - 1  # the heading takes a line, the names along the axis up to three
    if len(scene.rows) > room:
        return ()
    wide = _NAMES_WIDE / fit.BOLD
    short = fit.names(scene.rows, SMALLEST, wide, _NAME_LINES if len(scene.rows) <= _FEW else 1)
    return tuple("\n".join(fit.wrap(name, SMALLEST, wide)) for name in short)


def _heights(scene: View, names: Sequence[str], axis: Axis, tall: float) -> tuple[float, ...]:
    """Return where the names of the lines stand, and last the heading above them.

    Each stands beside the end of its line, moved as little as keeps the texts apart and inside the plot.
    """
    low, high = axis.place(axis.low), axis.place(axis.high)
    gap = _ROW * (high - low) / tall
    ends = _ends(scene)[: len(names)]
    placed = placing.apart(np.array([*ends, high]), np.array([*(name.count("\n") + 1 for name in names), 1]) * gap)
    over, under = max(0.0, float(placed.max()) - high), max(0.0, low + gap / 2 - float(placed.min()))
    return tuple(axis.value(place) for place in (placed - over + under).tolist())


def _ends(scene: View) -> list[float]:
    """Return the place of the last estimate of each line, the middle of the figure where a line has none."""
    low, high = scene.reach
    last = (scene.line_of(level)["estimate"].dropna() for level in scene.rows)
    return [float(scene.places(estimates.to_numpy(float))[-1]) if len(estimates) else (low + high) / 2 for estimates in last]


def _line(scene: View, look: Look, number: int, name: str, name_height: float) -> Line:
    """Return one line of the figure."""
    level, style, means = scene.rows[number], look.style_of(number), scene.line_of(scene.rows[number])
    point_places, points = _points(scene, level)
    return Line(
        level=level,
        name=name,
        hue=style.hue.lstrip("#"),
        ink=style.ink.lstrip("#"),
        marker=style.marker,
        dash=style.dash,
        places=tuple((np.arange(len(means)) + scene.offsets[number]).tolist()),
        estimates=_numbers(means["estimate"]),
        below=_numbers(means["estimate"] - means["lower"]),
        above=_numbers(means["upper"] - means["estimate"]),
        point_places=tuple(point_places),
        points=tuple(points),
        name_height=name_height,
    )


def _numbers(values: Iterable[float]) -> tuple[float | None, ...]:
    return tuple(float(value) if math.isfinite(value) else None for value in values)


def _points(scene: View, level: str) -> tuple[list[float], list[float]]:
    """Return places and values of the observations of one line, none where cells hold too many.

    They stand left of their mean: not every slide program draws means over points.
    """
    places: list[float] = []
    values: list[float] = []
    if scene.findings.cells["n"].max() > POINTS_SHOWN:
        return places, values
    seen = scene.observations
    offset, step = scene.offsets[scene.rows.index(level)], placing.step(len(scene.rows))
    for place, other in enumerate(scene.columns):
        cell = seen.loc[(seen[scene.line] == level) & (seen[scene.along] == other), "value"]
        places += (place + offset - 0.38 * step + placing.spread(len(cell), 0.14 * step)).tolist()
        values += cell.tolist()
    return places, values
