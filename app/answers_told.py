"""How an answer stands on the page: decided, no difference that matters, or open; and the fold that says how it is known."""

from analysis import verdicts
from analysis.answers import NOT_TESTED, Answer
from analysis.findings import Findings
from app import how

DECIDED, SMALL, OPEN = "decided", "small", "open"


def standing_of(verdict: str) -> str:
    """Return how a verdict looks: what differs, what is known not to matter, and what is not decided are three things."""
    if verdict in (verdicts.UNDECIDED, NOT_TESTED):
        return OPEN
    return SMALL if verdict in (verdicts.NONE_THAT_MATTERS, verdicts.SMALL) else DECIDED


def standing(findings: Findings, answer: Answer) -> tuple[str, tuple[str, ...]]:
    """Return how an answer looks and the lines of its fold."""
    return standing_of(answer.verdict), how.known(findings, answer)
