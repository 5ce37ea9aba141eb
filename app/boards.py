"""The story of a study as boards: each one claim, the figure or table that shows it, a line of evidence and the notes behind it."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import partial

import pandas as pd
import plotly.graph_objects as go

from analysis import verdicts
from analysis.answers import Answer
from analysis.families import within_name
from analysis.findings import Findings
from app import speaker, tabled
from app.figures import interaction
from app.look import Look

DEPENDS = frozenset({verdicts.LARGER, verdicts.DIFFERS})  # verdicts of the interaction that send the reader inside the slices


@dataclass(frozen=True, eq=False)
class Board:
    """One claim and what shows it: a figure drawn in any look, or a table of text as it is told."""

    kind: str
    claim: str  # one sentence
    evidence: str  # one line
    notes: str  # for the speaker: model, numbers, method, caveats
    alt: str  # what the figure or table shows, for someone who does not see it
    figure: Callable[[Look], go.Figure] | None = None
    table: pd.DataFrame | None = None

    def __repr__(self) -> str:
        return f"Board({self.kind}: {self.claim!r})"


def story(findings: Findings) -> tuple[Board, ...]:
    """Return the boards of a study in the order in which they are told."""
    return question_board(findings), interaction_board(findings), answers_board(findings), comparisons_board(findings)


def question_board(findings: Findings) -> Board:
    """Tell what was asked and how the experiment was laid out."""
    first, *_ = findings.answers
    return Board(
        "question",
        first.question,
        speaker.design_line(findings),
        speaker.notes(findings, speaker.design_notes(findings)),
        tabled.counts_alt(findings),
        table=tabled.counts(findings),
    )


def interaction_board(findings: Findings) -> Board:
    """Tell whether the effect of one factor depends on the other."""
    first, *_ = findings.answers
    return Board(
        "interaction",
        first.sentence,
        f"{speaker.short_statistic(first)} · {speaker.bars_line(findings)}",
        speaker.notes(findings, [first.statistic, interaction.interaction_caption(findings), *tabled.read_cells(findings)]),
        interaction.interaction_alt(findings),
        figure=partial(interaction.interaction, findings),
    )


def answers_board(findings: Findings) -> Board:
    """Tell the three answers side by side, under the one that no other board has for its claim."""
    told = compared(findings)
    claim = next(answer for answer in findings.answers[1:] if answer is not told)
    return Board(
        "answers",
        claim.sentence,
        speaker.model_line(findings),
        speaker.notes(findings, [answer.statistic for answer in findings.answers]),
        tabled.answers_alt(findings),
        table=tabled.answers(findings),
    )


def comparisons_board(findings: Findings) -> Board:
    """Tell which levels differ and by how much: inside the slices where the effect depends, on average otherwise."""
    families = families_told(findings)
    table = tabled.comparisons(findings, families)
    return Board(
        "comparisons",
        compared(findings).sentence,
        speaker.family_line(findings, families),
        speaker.notes(findings, speaker.family_notes(findings, families, table)),
        tabled.comparisons_alt(findings, table),
        table=table,
    )


def depends(findings: Findings) -> bool:
    """Return whether factors are to be read inside the levels of the other."""
    return findings.answers[0].verdict in DEPENDS


def compared(findings: Findings) -> Answer:
    """Return the answer that the comparisons belong to.

    With an interaction it is the factor along the axis of the figure, so that figure and comparisons run the same way; else the factor
    that is the clearer of the two.
    """
    _, row, column = findings.answers
    if depends(findings):
        return column
    return min((column, row), key=lambda answer: 1.0 if answer.p is None else answer.p)


def families_told(findings: Findings) -> tuple[str, ...]:
    """Return the families of comparisons that the story shows."""
    row, column = findings.study.factors
    wanted: tuple[str, ...]
    if depends(findings):
        wanted = (within_name(column, row),)
    else:
        first = compared(findings).term
        wanted = (first, row if first == column else column)
    return tuple(name for name in wanted if findings.comparisons[name] is not None)
