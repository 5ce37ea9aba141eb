"""The words of Doubt: its headings, what an open doubt looks like, and what can be done about it with one click."""

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from analysis.doubting.signs import AMBER
from analysis.findings import Findings
from app import records

OPEN = "What is open to doubt"
NONE_OPEN = "No check raised a doubt. That is no proof that there is nothing: it is what these checks can see with this many observations."
HOLDS = "Would another reasonable analysis have said otherwise?"
SPREAD = "Do all cells spread alike?"
SHAPE = "Are the residuals shaped like a bell?"
CARRIERS = "Does the answer hang on a few observations?"
WORKING = "Other analyses are being computed"
CHANGED = "Before and after"
GO_BACK = "Back to the scale before"
ENTRY = (
    "Each entry: p; the same difference by every analysis, with its interval, a ratio on the log scale. “otherwise” marks an answer that "
    "is decided differently or points the other way. Rank transforms are left out: for interactions they raise false alarms."
)
MARKS: Mapping[str, str] = MappingProxyType({AMBER: "needs you", "note": "to know"})
TO_LAY_OUT = frozenset({"unit", "order", "block_pattern", "one_observation"})  # doubts that are settled there


@dataclass(frozen=True)
class Offer:
    """A change of the study that a doubt suggests."""

    label: str
    scale: str


def offers(findings: Findings) -> tuple[Offer, ...]:
    """Return the scales worth a look where a doubt speaks of one and the response can take it."""
    kinds = set(findings.doubts["kind"])
    others = {str(line.analysis) for line in records.lines(findings.holds)}
    if findings.study.scale != "none":
        return (Offer("Look at it on the scale as measured", "none"),)
    if not kinds & {"spread_grows_with_mean", "scale", "shape", "spread_by_cell"} or "log scale" not in others:
        return ()
    return (Offer("Look at it on the log scale", "log"), Offer("Look at it on the square-root scale", "sqrt"))
