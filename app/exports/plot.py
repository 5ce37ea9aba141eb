"""Where the lines, bars, points and names of the interaction figure stand on a slide; nothing here draws."""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from analysis.findings import Findings
from app import words
from app.exports import fit
from app.exports.master import BODY, SMALLEST
from app.figures import placing
from app.figures.scene import Scene
from app.look import SLIDE

POINTS_SHOWN = 20  # up to so many observations in each cell are drawn one by one
_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
_TICKS_WANTED = 5
_NAMES_WIDE = 3.0  # inches that the names of the lines may take
_NAME_LINES = 2
_FEW = 4
_AIR = 0.12  # inches between a text and what it stands beside
_ROW = fit.height(1, SMALLEST)


@dataclass(frozen=True)
class Line:
    """One level of the row factor: its look, its estimates with their intervals, its observations."""

    level: str
    name: str  # the level, shortened where it has to be
    hue: str  # of marks, six hexadecimal digits
    ink: str  # of the name
    marker: str
    dash: str
    places: tuple[float, ...]  # on an axis where the column levels stand at 0, 1, 2 …
    estimates: tuple[float | None, ...]  # analysed scale; None where the model gives none
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

    @property
    def wide(self) -> float:
        """Inches that the widest number takes."""
        return max(fit.width(f"{end:,.{self.decimals}f}", SMALLEST) for end in (self.low, self.high))


@dataclass(frozen=True)
class Plot:
    """Everything that a slide program needs to draw the figure; lengths in inches inside the body of the slide."""

    row_factor: str  # its name as it stands above the names of the lines
    column_factor: str
    response: str
    levels: tuple[str, ...]  # of the column factor
    names: tuple[str, ...]  # the same, shortened where they have to be
    lines: tuple[Line, ...]
    axis: Axis
    end: float  # where the names of the lines begin, on the axis of the places
    heading_height: float  # where the name of their factor stands, on the scale of the estimates
    left: float  # kept free beside the plot
    right: float
    top: float
    bottom: float

    @property
    def shortened(self) -> tuple[tuple[str, str], ...]:
        """Names that read differently on the slide, each with the whole name."""
        pairs = (*zip(self.names, self.levels, strict=True), *((line.name.replace("\n", " "), line.level) for line in self.lines))
        return tuple((short, whole) for short, whole in pairs if short != " ".join(fit.spaced(whole)))


def axis_for(low: float, high: float) -> Axis:
    """Return a scale with round steps that holds both values."""
    rough = (high - low or abs(high) or 1.0) / _TICKS_WANTED
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(factor * power for factor in _STEPS if factor * power >= rough * (1 - 1e-9))
    decimals = next(places for places in range(13) if abs(round(step, places) - step) < 1e-6 * step)
    return Axis(math.floor(low / step + 1e-9) * step, math.ceil(high / step - 1e-9) * step, step, decimals)


def _numbers(values: Iterable[float]) -> tuple[float | None, ...]:
    return tuple(float(value) if math.isfinite(value) else None for value in values)


def _points(scene: Scene, level: str) -> tuple[list[float], list[float]]:
    """Return places and values of the observations of one line, none where cells hold too many.

    They stand left of their mean: not every slide program draws means over points.
    """
    places: list[float] = []
    values: list[float] = []
    if scene.findings.cells["n"].max() > POINTS_SHOWN:
        return places, values
    seen = scene.findings.observations
    offset, step = scene.offsets[scene.rows.index(level)], placing.step(len(scene.rows))
    for place, column in enumerate(scene.columns):
        cell = seen.loc[(seen["row"] == level) & (seen["column"] == column), "value"]
        places += (place + offset - 0.38 * step + placing.spread(len(cell), 0.14 * step)).tolist()
        values += cell.tolist()
    return places, values


def _line(scene: Scene, number: int, name: str, name_height: float) -> Line:
    """Return one line of the figure."""
    level, style, means = scene.rows[number], SLIDE.style_of(number), scene.line_of(scene.rows[number])
    point_places, points = _points(scene, level)
    return Line(
        level,
        name,
        style.hue.lstrip("#"),
        style.ink.lstrip("#"),
        style.marker,
        style.dash,
        tuple((np.arange(len(means)) + scene.offsets[number]).tolist()),
        _numbers(means["estimate"]),
        _numbers(means["estimate"] - means["lower"]),
        _numbers(means["upper"] - means["estimate"]),
        tuple(point_places),
        tuple(points),
        name_height,
    )


def _ends(scene: Scene) -> list[float]:
    """Return the last estimate of each line, the middle of the figure where a line has none."""
    low, high = scene.reach
    last = (scene.line_of(level)["estimate"].dropna() for level in scene.rows)
    return [float(estimates.iloc[-1]) if len(estimates) else (low + high) / 2 for estimates in last]


def _heights(ends: Sequence[float], rows: Sequence[int], axis: Axis, tall: float) -> tuple[float, ...]:
    """Return where the names of the lines stand, and last the name of their factor above them.

    Each stands beside the end of its line, moved as little as keeps the texts apart and inside the plot.
    """
    gap = _ROW * (axis.high - axis.low) / tall
    placed = placing.apart(np.array([*ends, axis.high]), np.array([*rows, 1]) * gap)
    over, under = max(0.0, float(placed.max()) - axis.high), max(0.0, axis.low + gap / 2 - float(placed.min()))
    return tuple((placed - over + under).tolist())


def _line_names(scene: Scene) -> tuple[str, ...]:
    """Return the names of the lines, on two lines of text where there are few."""
    return fit.names(scene.rows, SMALLEST, _NAMES_WIDE / fit.BOLD, 2 if len(scene.rows) <= _FEW else 1)


def plan(findings: Findings) -> Plot:
    """Return where everything of the interaction figure stands on a slide."""
    scene = Scene(findings)
    axis = axis_for(*scene.reach)
    lines = [fit.wrap(name, SMALLEST, _NAMES_WIDE / fit.BOLD) for name in _line_names(scene)]
    heading = fit.shorten(findings.design["row_factor"], SMALLEST, _NAMES_WIDE)
    right = max(fit.width(text, SMALLEST) for text in (heading, *(row for rows in lines for row in rows))) * fit.BOLD + 2 * _AIR
    left = _ROW + axis.wide + 2 * _AIR
    slot = (BODY.wide - left - right) / (scene.label_place + 0.5)
    names = fit.names(scene.columns, SMALLEST, slot * 0.94, _NAME_LINES)
    rows = max(len(fit.wrap(name, SMALLEST, slot * 0.94)) for name in names)
    top, bottom = _AIR, (rows + 1) * _ROW + _AIR
    *heights, heading_height = _heights(_ends(scene), [len(name) for name in lines], axis, BODY.tall - top - bottom)
    return Plot(
        heading,
        findings.design["column_factor"],
        words.response_label(findings),
        scene.columns,
        names,
        tuple(_line(scene, number, "\n".join(name), heights[number]) for number, name in enumerate(lines)),
        axis,
        scene.label_place,
        heading_height,
        left,
        right,
        top,
        bottom,
    )
