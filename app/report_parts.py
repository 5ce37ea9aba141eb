"""What a report is made of: headings with paragraphs, tables and figures, each saying which items of a reporting list it covers."""

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from types import MappingProxyType

import plotly.graph_objects as go

from app.look import Look
from app.paper import Sheet

BLANK = re.compile(r"\[to fill in: [^\]]+\]")
# What a report of such an experiment has to state, after SAMPL, ARRIVE 2.0, APA JARS-Quant and ICH E9, in our own words.
ITEMS: Mapping[int, str] = MappingProxyType(
    {
        1: "question, hypotheses, primary response, what was planned",
        2: "both factors, their levels and units, control, why these levels",
        3: "the experimental unit and what was averaged",
        4: "randomisation, blocks, plots within plots",
        5: "n in each cell and in all, planned and analysed, how decided",
        6: "rules of inclusion and exclusion, and when they were set",
        7: "every row left out, with its reason",
        8: "missing values: how many, where, how handled",
        9: "values beyond a detection limit",
        10: "outlying values: rule, which, effect on the answers",
        11: "the response, its unit, its scale and that of the means",
        12: "the model in words and notation",
        13: "type of sums of squares, degrees of freedom",
        14: "assumptions: how checked, what was seen, what was done",
        15: "the interaction: test, result, how it shaped the rest",
        16: "for each term: mean square, F, both degrees of freedom, exact p",
        17: "for each cell: n, mean, standard deviation, median and quartiles",
        18: "estimated means with intervals, and their weights",
        19: "effects in units with intervals; standardised size named",
        20: "components of variance",
        21: "comparisons: family, how many, method, adjusted p and interval, planned or not",
        22: "simple effects, and the test that they differ",
        23: "level of significance, one-sided or two-sided",
        24: "fit, and whether another route confirms it",
        25: "other defensible analyses, and whether the answers changed",
        26: "results for every response measured; independent repeats",
        27: "exact p-values and sensible digits",
        28: "figures: what points and bars are, n, unit",
        29: "blinding and order of measurement",
        30: "software, versions, settings, data and script",
        31: "deviations from the plan",
        32: "limits that no analysis repairs",
    }
)


def to_fill_in(what: str) -> str:
    """Return the mark of something that only the user knows."""
    return f"[to fill in: {what}]"


@dataclass(frozen=True)
class Text:
    """A paragraph, and the items that it covers."""

    text: str
    items: tuple[int, ...] = ()


@dataclass(frozen=True, eq=False)
class Rows:
    """A table with its caption, and the items that it covers."""

    sheet: Sheet
    caption: str
    items: tuple[int, ...] = ()


@dataclass(frozen=True, eq=False)
class Picture:
    """A figure with its caption and description, and the items that it covers."""

    figure: Callable[[Look], go.Figure]
    caption: str
    alt: str
    items: tuple[int, ...] = ()


Block = Text | Rows | Picture


@dataclass(frozen=True, eq=False)
class Part:
    """One heading with what stands below it."""

    heading: str
    blocks: tuple[Block, ...]


def where_stated(parts: tuple[Part, ...]) -> dict[int, list[str]]:
    """Return the headings below which each item is covered."""
    found: dict[int, list[str]] = {item: [] for item in ITEMS}
    for part in parts:
        for block in part.blocks:
            for item in block.items:
                if part.heading not in found[item]:
                    found[item].append(part.heading)
    return found


def left_blank(parts: tuple[Part, ...]) -> set[int]:
    """Return the items for which the user has something to fill in."""
    texts = (block for part in parts for block in part.blocks if isinstance(block, Text))
    return {item for text in texts if BLANK.search(text.text) for item in text.items}
