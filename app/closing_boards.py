"""How a story closes: how far to believe it, by the other defensible analyses and the open doubts, and what to do next."""

from collections.abc import Mapping
from types import MappingProxyType

import pandas as pd

from analysis import verdicts
from analysis.anova import INTERACTION
from analysis.answers import NOT_TESTED
from analysis.doubting.signs import AMBER
from analysis.findings import Findings
from analysis.holding import agreement
from analysis.rounding import NOT_KNOWN, p_number
from app import records, speaker, tabled, words
from app.board import Board

OTHERWISE = " ≠"  # beside the p of an analysis that answers otherwise
STEPS: Mapping[str, str] = MappingProxyType(
    {
        "one_observation": "Check the record of the value that stands out",
        "spread_by_cell": "Read the analyses that allow unequal spread",
        "spread_grows_with_mean": "Look at the answers on the log scale",
        "shape": "Look at the residuals and at the permutation",
        "order": "Ask what changed along the order of the runs",
        "block_pattern": "Ask what differed between the blocks",
        "scale": "Decide on which scale effects should add",
        "unit": "Settle what one independent unit is",
        "answer_depends": "Tell the other answer beside this one",
    }
)
LOOK_AGAIN = "Settle this doubt"


def belief(findings: Findings) -> Board:
    """Tell how far to believe the answers: whether every defensible analysis agrees, and which doubts are open."""
    table = analyses(findings)
    doubts = list(findings.doubts["sentence"])
    otherwise = f"“{OTHERWISE.strip()}”: an analysis that answers otherwise"
    answers = [f"{answer.sentence} {answer.statistic}" for answer in findings.answers]
    return Board(
        "belief",
        "belief",
        belief_claim(findings),
        f"{doubts_line(findings)} · p for each question",
        speaker.notes(findings, [*answers, findings.holds_sentence, otherwise, *(f"Doubt: {sentence}" for sentence in doubts)]),
        f"Table of {len(table)} analyses with their p-values on {tabled.factors_with_levels(findings)}; {tabled.numbers(findings)}. "
        f"{findings.holds_sentence}",
        table=table,
        caption=f"p of each question by each defensible analysis; {otherwise}.",
    )


def belief_claim(findings: Findings) -> str:
    """Say in one sentence whether the answers hold whichever analysis is taken."""
    apart = agreement.dissenting(findings.holds)
    if len(apart) < 2:
        return findings.holds_sentence
    return f"The answers to {agreement.NUMBERS[len(apart)]} of the three questions depend on which defensible analysis is taken."


def analyses(findings: Findings) -> pd.DataFrame:
    """Return the defensible analyses, one row each, with the p of each question; an answer that is another is marked."""
    terms = (INTERACTION, *findings.study.factors)
    told: dict[str, dict[str, str]] = {}
    for line in records.lines(findings.holds):
        mark = OTHERWISE if line.same is False else ""
        told.setdefault(str(line.analysis), {})[str(line.term)] = f"{p_number(line.p)}{mark}"
    rows = [(name, *(found.get(term, NOT_KNOWN) for term in terms)) for name, found in told.items()]
    return pd.DataFrame(rows, columns=["analysis", *terms], dtype=object)


def doubts_line(findings: Findings) -> str:
    """Tell how many doubts are open."""
    amber = int((findings.doubts["level"] == AMBER).sum())
    notes = len(findings.doubts) - amber
    told = [words.counted(amber, "open doubt") if amber else "", words.counted(notes, "remark") if notes else ""]
    return " and ".join(part for part in told if part) or "no doubt was raised"


def next_steps(findings: Findings) -> Board:
    """Tell what to do next: settle doubts, decide what is undecided, repeat."""
    table = pd.DataFrame(steps(findings), columns=["what next", "why"], dtype=object)
    open_doubts = int((findings.doubts["level"] == AMBER).sum())
    told = "; ".join(str(what) for what in table["what next"])
    return Board(
        "next",
        "next",
        next_claim(findings),
        f"{words.counted(open_doubts, 'doubt')} to settle · {words.counted(len(undecided(findings)), 'question')} not decided",
        speaker.notes(findings, [f"{what}: {why}" for what, why in steps(findings)]),
        f"Table of what to do next after the experiment on {tabled.factors_with_levels(findings)}; {tabled.numbers(findings)}: {told}.",
        table=table,
        caption="Drawn from the doubts, the answers and the layout.",
    )


def next_claim(findings: Findings) -> str:
    """Say in one sentence what comes next."""
    if (findings.doubts["level"] == AMBER).any():
        return "Next: settle what is in doubt before this is told any further."
    if undecided(findings):
        return "Next: a larger experiment for what is not decided."
    return "Next: repeat it independently before much is built on it."


def undecided(findings: Findings) -> list[str]:
    """Return the questions without a decision."""
    return [answer.question for answer in findings.answers if answer.verdict in (verdicts.UNDECIDED, NOT_TESTED)]


def steps(findings: Findings) -> list[tuple[str, str]]:
    """Return what to do next with the reason, the most urgent first."""
    amber = findings.doubts[findings.doubts["level"] == AMBER]
    found = [(STEPS.get(doubt.kind, LOOK_AGAIN), str(doubt.sentence)) for doubt in records.lines(amber)]
    empty = findings.design["empty_cells"]
    if empty:
        named = "; ".join(" with ".join(cell) for cell in empty[:4]) + (f" and {len(empty) - 4} more" if len(empty) > 4 else "")
        found.append(("Fill the empty combinations", f"{named}: without them not every mean can be compared."))
    for answer in findings.answers:
        if answer.verdict == verdicts.UNDECIDED:
            found.append((f"Plan more observations: {answer.question}", f"Now: {speaker.short_statistic(answer)}."))
        elif answer.verdict == NOT_TESTED:
            found.append((f"Lay it out so that it can be tested: {answer.question}", answer.statistic))
    if findings.study.matters is None:
        found.append(("Say which difference would matter", "Then “not decided” can be told from “no difference that matters”."))
    return [*found, ("Repeat it independently", "One experiment shows what happened once, under its own conditions.")]
