"""Whether the defensible analyses answer alike, in one sentence."""

import pandas as pd

from analysis.anova import INTERACTION
from analysis.naming import listed

NUMBERS = ("no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve")
MOST_NAMED = 3


def told(holds: pd.DataFrame) -> str:
    """Return the sentence over the table of analyses."""
    count = holds["analysis"].nunique()
    if count < 2:
        return "This layout leaves no other defensible analysis to hold the answers against."
    apart = dissenting(holds)
    if not apart:
        return f"All {_number(count)} analyses agree on every question that they can test."
    return " ".join(_one(term, names, count) for term, names in apart.items())


def dissenting(holds: pd.DataFrame) -> dict[str, tuple[str, ...]]:
    """Return the analyses that answer otherwise, by question."""
    apart: dict[str, tuple[str, ...]] = {}
    for analysis, term, same in zip(holds["analysis"], holds["term"], holds["same"], strict=True):
        if same is False:
            apart[term] = (*apart.get(term, ()), analysis)
    return apart


def _one(term: str, names: tuple[str, ...], count: int) -> str:
    question = "whether one factor changes what the other does" if term == INTERACTION else f"whether {term} matters"
    named = list(names[:MOST_NAMED]) + ([f"{len(names) - MOST_NAMED} more"] if len(names) > MOST_NAMED else [])
    verb = "answers" if len(names) == 1 else "answer"
    return (
        f"The answer to {question} depends on the analysis: of {_number(count)}, {_number(len(names))} {verb} otherwise ({listed(named)})."
    )


def _number(count: int) -> str:
    return NUMBERS[count] if count < len(NUMBERS) else str(count)
