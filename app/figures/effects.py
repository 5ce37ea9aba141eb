"""The effects of the model as bars from zero: α of each row level, β of each column level, αβ of each cell."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import plotly.graph_objects as go

from analysis.findings import Findings
from analysis.rounding import measured
from app import words
from app.figures import lettering, ticks
from app.look import Look

SHARES = ((0.0, 0.25), (0.29, 0.54), (0.58, 1.0))  # of the width, for α, β and αβ
SHARES_OF_TWO = ((0.0, 0.48), (0.52, 1.0))  # where the model has no αβ
WIDE = 680  # px of a figure that fills its place, for judging how much lettering fits
UPRIGHT = 4  # letters; names with less room are turned


@dataclass(frozen=True)
class Bar:
    """One effect: where it stands, how wide and long it is, and whose it is."""

    place: float
    wide: float
    effect: float
    colour: str
    told: str
    kind: str  # α, β or αβ


@dataclass(frozen=True)
class Block:
    """One set of effects that adds up to zero: its heading, its share of the width, and a name for each bar or group of bars."""

    kind: str
    heading: str
    share: tuple[float, float]
    names: tuple[str, ...]

    @property
    def step(self) -> float:
        """Share of the width that each name has."""
        return (self.share[1] - self.share[0]) / len(self.names)

    def place(self, index: int) -> float:
        """Return the middle of one name's room."""
        return self.share[0] + (index + 0.5) * self.step


def effects(findings: Findings, look: Look) -> go.Figure:
    """Draw every effect as a bar from zero; bars of a row level carry its hue, in α and in αβ alike."""
    blocks = _blocks(findings)
    bars = _bars(findings, look, blocks)
    drawn = {
        "type": "bar",
        "x": [bar.place for bar in bars],
        "y": [bar.effect for bar in bars],
        "width": [bar.wide for bar in bars],
        "marker": {"color": [bar.colour for bar in bars], "line": {"width": 0}},
        "customdata": [[bar.told, _number(findings, bar.effect), bar.kind] for bar in bars],
        "hovertemplate": "%{customdata[0]}<br>%{customdata[2]} = %{customdata[1]}<extra></extra>",
    }
    return go.Figure([drawn], _ground(findings, look, bars, blocks))


def _blocks(findings: Findings) -> tuple[Block, ...]:
    found = findings.effects
    rows, columns = tuple(found["row"]), tuple(found["column"])
    one, other = (findings.observed.factor(factor).word for factor in findings.study.factors)
    named = [("α", f"α: {one}", rows), ("β", f"β: {other}", columns)]
    if found["interaction"] is not None:
        named.append(("αβ", f"αβ: {one} × {other}", columns))
    shares = SHARES if len(named) == len(SHARES) else SHARES_OF_TWO
    return tuple(Block(kind, heading, share, names) for (kind, heading, names), share in zip(named, shares, strict=True))


def _bars(findings: Findings, look: Look, blocks: Sequence[Block]) -> list[Bar]:
    """Return the bars from left to right: α, β, and αβ grouped by column level."""
    found, (row, column) = findings.effects, findings.study.factors
    hues = [look.style_of(index).hue for index in range(len(found["row"]))]
    one, other, *both = blocks
    bars = [Bar(one.place(k), 0.7 * one.step, found["row"][level], hues[k], _told(row, level), "α") for k, level in enumerate(one.names)]
    bars += [
        Bar(other.place(k), 0.7 * other.step, found["column"][level], look.accent, _told(column, level), "β")
        for k, level in enumerate(other.names)
    ]
    return bars + [bar for block in both for bar in _combined(found["interaction"], block, one.names, hues)]


def _combined(found: Mapping[str, Mapping[str, float]], block: Block, rows: Sequence[str], hues: Sequence[str]) -> list[Bar]:
    wide = 0.86 * block.step / len(rows)
    return [
        Bar(
            block.place(j) + (i - (len(rows) - 1) / 2) * wide, 0.86 * wide, found[r][c], hues[i],
            f"{lettering.plain(r)} · {lettering.plain(c)}", "αβ",
        )
        for j, c in enumerate(block.names)
        for i, r in enumerate(rows)
    ]  # fmt: skip


def _told(factor: str, level: str) -> str:
    return f"{lettering.plain(factor)}: {lettering.plain(level)}"


def _number(findings: Findings, effect: float) -> str:
    return measured(effect, findings.cells["se"].min())


def _ground(findings: Findings, look: Look, bars: Sequence[Bar], blocks: Sequence[Block]) -> dict[str, Any]:
    reach = max(abs(bar.effect) for bar in bars) * 1.08 or 1.0
    letter = (look.width or WIDE) / (look.small * 0.6)  # letters across the whole width
    turned = any(block.step * letter < UPRIGHT for block in blocks)
    names = [lettering.wrapped(n, 16 if turned else int(block.step * letter), 1 if turned else 3) for block in blocks for n in block.names]
    title = {"text": lettering.wrapped(f"effect on {words.response_label(findings)}", int(1.3 * look.height / look.text), 2)}
    axis = {"range": [-reach, reach], **ticks.linear((-reach, reach)), "automargin": False, "title": title}
    below = lettering.widest(names, look.small) + look.small if turned else ticks.below(names, look, title=False)
    return look.layout(
        xaxis={
            "tickvals": [block.place(k) for block in blocks for k in range(len(block.names))],
            "ticktext": names,
            "tickfont": {"size": look.small},
            "tickangle": -90 if turned else 0,
            "automargin": False,
            "showgrid": False,
            "showline": False,
            "range": [-0.01, 1.01],
        },
        yaxis=axis,
        margin={"t": 2.2 * look.text, "l": ticks.left(axis, look), "b": below},
        annotations=[_head(look, block) for block in blocks],
        shapes=[{"type": "line", "xref": "paper", "x0": 0, "x1": 1, "y0": 0, "y1": 0, "line": {"color": look.ink, "width": 1}}],
        bargap=0,
    )


def _head(look: Look, block: Block) -> dict[str, Any]:
    letters = int((block.share[1] - block.share[0]) * (look.width or WIDE) / (look.text * 0.62))
    return {
        "x": sum(block.share) / 2, "y": 1, "yref": "paper", "yanchor": "bottom", "yshift": 4, "showarrow": False,
        "text": f"<b>{lettering.wrapped(block.heading, letters, 1)}</b>", "font": {"size": look.text, "color": look.ink},
    }  # fmt: skip


def effects_caption(findings: Findings) -> str:
    """Say what a bar is, what it is measured from, and which colours are whose."""
    row, column = findings.study.factors
    mean = _number(findings, findings.effects["grand_mean"])
    scale = "" if findings.observed.scale.is_identity else f" On the scale analysed ({words.scale_name(findings.study.scale).lower()})."
    inter = f" αβ: what a combination adds to both, grouped by {column}." if findings.effects["interaction"] is not None else ""
    return (
        f"Bars start at zero, the mean over all combinations ({mean}). α: what each level of {row} adds, in its own colour; "
        f"β: what each level of {column} adds.{inter} Each set adds up to zero.{scale}"
    )


def effects_alt(findings: Findings) -> str:
    """Read the effects of both factors and the largest of the interaction out for someone who does not see the figure."""
    found, (row, column) = findings.effects, findings.study.factors
    told = [f"{factor}: " + "; ".join(f"{level} {_number(findings, effect)}" for level, effect in found[side].items())
            for side, factor in (("row", row), ("column", column))]  # fmt: skip
    if found["interaction"] is not None:
        cells = {(r, c): effect for r, line in found["interaction"].items() for c, effect in line.items()}
        (r, c), largest = max(cells.items(), key=lambda cell: abs(cell[1]))
        told.append(f"largest of the interaction: {r} with {c} {_number(findings, largest)}")
    return f"Effects on {words.response_label(findings)} that sum to zero. {'. '.join(told)}."
