"""How everything is drawn: the palette, markers and dashes of levels, and the four looks of a figure."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any

# Checked in the tests under simulated colour-vision deficiencies; marker and dash tell levels apart where hue cannot.
HUES = ("#1F5F8B", "#C8741A", "#5B8C3A", "#8A3B6E", "#4F3B22", "#A362C7", "#1B2F78", "#3A938F")
HUES_AT_NIGHT = ("#4381AF", "#C8741A", "#5B8C3A", "#B26093", "#8D775C", "#A362C7", "#5A77C7", "#3A938F")
INKS = ("#1F5F8B", "#AD5C00", "#4E7E2C", "#8A3B6E", "#4F3B22", "#9756BA", "#1B2F78", "#1F7E7A")  # the hues as text, 4.5:1 on paper
DEEP_INKS = ("#185985", "#8D3E00", "#315F02", "#87386B", "#4F3B22", "#78379A", "#1B2F78", "#005F5C")  # 7:1, for a far wall
INKS_AT_NIGHT = ("#6EACDD", "#EA9342", "#81B562", "#E18ABF", "#BAA387", "#CE8CF4", "#84A4F7", "#5DB4AF")
MARKERS = ("circle", "square", "diamond", "triangle-up", "triangle-down", "cross", "x", "pentagon")
DASHES = ("solid", "dash", "dot", "dashdot", "longdash", "longdashdot", "3px,2px", "14px,3px,3px,3px,3px,3px")
SHADES = ("#F5EEE0", "#E2D3C0", "#C8AE92", "#A67C58", "#8A5530", "#7A3E12")  # wood, light to dark, for the grid
SHADES_AT_NIGHT = ("#2C2620", "#43352A", "#654A35", "#8C6443", "#B98559", "#E0A26A")


@dataclass(frozen=True)
class LevelStyle:
    """How one level of a factor is drawn wherever it appears."""

    hue: str  # of marks, at least 3:1 on the ground
    ink: str  # of text, at least 4.5:1 on the ground
    marker: str
    dash: str


@dataclass(frozen=True)
class Look:
    """One way of drawing every figure: for the desk, for a projector, for a slide, for print."""

    name: str
    text: float  # px, of labels and ticks
    small: float  # px, of what may be small
    line: float  # px
    marker: float  # px, of a mean
    point: float  # px, of an observation
    height: int  # px
    width: int | None = None  # px; None fills the place it is given
    paper: str = "#FBFAF6"
    panel: str = "#FFFFFF"
    ink: str = "#23211C"
    quiet: str = "#5A5548"
    rule: str = "#DCD6C6"
    accent: str = "#7A3E12"
    hues: tuple[str, ...] = HUES
    inks: tuple[str, ...] = INKS
    shades: tuple[str, ...] = SHADES
    font: str = '"Source Sans", "Source Sans 3", Arial, "Liberation Sans", sans-serif'

    def style_of(self, index: int) -> LevelStyle:
        """Return how the level with this place is drawn; beyond eight the hues return with hollow markers."""
        place = index % len(self.hues)
        hollow = "-open" if index >= len(self.hues) else ""
        return LevelStyle(self.hues[place], self.inks[place], MARKERS[place] + hollow, DASHES[place])

    def layout(self, **changes: Any) -> dict[str, Any]:
        """Return the ground of a figure: type, colours, margins and axes; changes are set last, part by part."""
        axis = {
            "gridcolor": self.rule,
            "linecolor": self.rule,
            "zeroline": False,
            "ticks": "",
            "tickfont": {"size": self.text, "color": self.ink},
            "title": {"font": {"size": self.text, "color": self.ink}, "standoff": self.text * 0.8},
            "automargin": True,
            "fixedrange": True,
        }
        ground = {
            "template": "none",
            "font": {"family": self.font, "size": self.text, "color": self.ink},
            "paper_bgcolor": self.paper,
            "plot_bgcolor": self.paper,
            "height": self.height,
            "width": self.width,
            "margin": {"l": 8, "r": 12, "t": 12, "b": 8},
            "showlegend": False,
            "xaxis": axis,
            "yaxis": axis,
            "hoverlabel": {
                "bgcolor": self.panel,
                "bordercolor": self.rule,
                "font": {"size": self.text, "color": self.ink, "family": self.font},
            },
            "hovermode": "closest",
            "dragmode": False,
        }
        return _changed(ground, changes)


def _changed(ground: Mapping[str, Any], changes: Mapping[str, Any]) -> dict[str, Any]:
    """Return a ground with changes, those of a part leaving the rest of that part as it was."""
    parts = {name: _changed(ground[name], new) for name, new in changes.items() if isinstance(new, Mapping) and name in ground}
    return {**ground, **changes, **parts}


DESK = Look("desk", text=14, small=12, line=2.4, marker=10, point=6, height=430)
NIGHT = Look(
    "desk at night",
    text=14,
    small=12,
    line=2.4,
    marker=10,
    point=6,
    height=430,
    paper="#1E1B17",
    panel="#2A2620",
    ink="#F1EBDD",
    quiet="#B8B09E",
    rule="#423B31",
    accent="#E0A26A",
    hues=HUES_AT_NIGHT,
    inks=INKS_AT_NIGHT,
    shades=SHADES_AT_NIGHT,
)
PROJECTOR = Look("projector", text=28, small=24, line=4.5, marker=18, point=9, height=560, quiet="#4A463B", inks=DEEP_INKS)
SLIDE = Look(
    "slide", text=24, small=20, line=3.5, marker=15, point=8, height=500, width=1152, paper="#FFFFFF", quiet="#4A463B", inks=DEEP_INKS,
    font='Arial, "Liberation Sans", Helvetica, sans-serif',
)  # fmt: skip
PRINT = Look(
    "print", text=11, small=10, line=1.4, marker=7, point=4, height=420, width=692, paper="#FFFFFF", rule="#E4E0D5", inks=DEEP_INKS,
    font='Arial, "Liberation Sans", Helvetica, sans-serif',
)  # fmt: skip  # 692 px are 183 mm at 96 px to the inch


AT_NIGHT = ("paper", "panel", "ink", "quiet", "rule", "accent", "hues", "inks", "shades")


def at_night(look: Look) -> Look:
    """Return a look in the colours of the dark theme."""
    return replace(look, **{name: getattr(NIGHT, name) for name in AT_NIGHT})


def shade(shades: tuple[str, ...], share: float) -> str:
    """Return the colour at a share between 0 and 1 of the way through a series of shades."""
    place = min(max(share, 0.0), 1.0) * (len(shades) - 1)
    left = min(int(place), len(shades) - 2)
    mixed = (round(a + (b - a) * (place - left)) for a, b in zip(_channels(shades[left]), _channels(shades[left + 1]), strict=True))
    return "#" + "".join(f"{channel:02X}" for channel in mixed)


def contrast(one: str, other: str) -> float:
    """Return the contrast ratio of two colours, 1 to 21. Source: WCAG 2.2, relative luminance and contrast ratio."""
    dark, light = sorted((_luminance(one), _luminance(other)))
    return (light + 0.05) / (dark + 0.05)


def text_on(ground: str) -> str:
    """Return the colour in which text is legible on a ground: ink or paper where they reach 4.5:1, else black or white."""
    return next(
        (c for c in (DESK.ink, DESK.paper) if contrast(c, ground) >= 4.5), max("#000000", "#FFFFFF", key=lambda c: contrast(c, ground))
    )


def _channels(colour: str) -> tuple[int, int, int]:
    return int(colour[1:3], 16), int(colour[3:5], 16), int(colour[5:7], 16)


def _luminance(colour: str) -> float:
    red, green, blue = ((c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4) for c in (v / 255 for v in _channels(colour)))
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue
