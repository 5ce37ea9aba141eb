"""The results of a report: what was seen in each cell, the tables, the answers in sentences, comparisons, doubts and limits."""

from collections.abc import Iterator, Sequence
from functools import partial

import pandas as pd

from analysis.findings import Findings
from analysis.rounding import NOT_KNOWN, measured, p_number, p_value, percent, significant
from app import answer_words, checks_told, closing_boards, factor_boards, original, records, sheets, words
from app.board import OWN_WORDS, Board
from app.paper import Sheet
from app.report_parts import Block, Part, Picture, Rows, Text, to_fill_in

SIMPLE = "F tests of each factor inside every level of the other, with the pooled error; that they differ is tested by the interaction."
NO_SIMPLE = "No simple effects are told apart, since the interaction that would test their difference is not shown."
SECOND_ROUTE = "The sums of squares were confirmed by a second computation by least squares."


def results(findings: Findings, told: Sequence[Board]) -> tuple[Part, ...]:
    """Return the parts of the results."""
    return (
        Part("What was seen", (_cells(findings), *_pictures(told, "raw"))),
        Part("Does one factor depend on the other", (*_interaction(findings, told),)),
        Part("What each factor does", (*_factors(findings, told),)),
        Part("How far to believe it", (*_belief(findings),)),
        Part("Limits", (*_limits(findings),)),
        *_own(told),
    )


def _cells(findings: Findings) -> Rows:
    row, column = findings.study.factors
    numbers = findings.five_numbers
    rows = []
    for cell, five in zip(records.lines(findings.cells), records.lines(numbers), strict=True):
        spread = cell.sd if pd.notna(cell.sd) else cell.se
        write = partial(measured, spread=spread) if findings.observed.scale.is_identity else significant
        three = [write(value) for value in (five.median, five.lower_quartile, five.upper_quartile)]
        median = f"{three[0]} ({three[1]} to {three[2]})" if cell.n else words.EMPTY
        rows.append((cell.row, cell.column, str(cell.n), measured(cell.mean, spread), words.spread(cell.sd, cell.se) or NOT_KNOWN, median))
    label = words.response_label(findings)
    sheet = Sheet(
        "Every cell", (row, column, "n", "mean", "sd", f"median (quartiles), {original.label(findings)}"), rows, frozenset({0, 1})
    )
    return Rows(
        sheet, f"What was seen in each cell: number of {words.units_word(findings)}, mean and standard deviation of {label}.", (17, 5)
    )


def _pictures(told: Sequence[Board], *kinds: str) -> Iterator[Picture]:
    for board in told:
        if board.kind in kinds and board.figure is not None:
            yield Picture(board.figure, f"{board.claim} {board.caption}", board.alt, (28,))


def _interaction(findings: Findings, told: Sequence[Board]) -> Iterator[Block]:
    first, *_ = findings.answers
    shaped = "inside the levels of the other" if factor_boards.depends(findings) else "on average over the other"
    yield Text(f"{first.sentence} {first.statistic}. Each factor is therefore read {shaped}.", (15, 19))
    yield Rows(sheets.anova(findings, findings.used_table), f"Analysis of variance. {answer_words.table_used(findings)}", (16, 13, 24))
    yield from _pictures(told, "interaction")
    explained = f"{percent(findings.fit['r2'])} of the variation (adjusted {percent(findings.fit['adjusted_r2'])})"
    sigma = significant(findings.fit["sigma"])
    yield Text(f"The model explains {explained}; the residual standard deviation is {sigma}. {SECOND_ROUTE}", (24,))
    yield Text("There is one component of variance, the residual; no factor is random.", (20,))


def _factors(findings: Findings, told: Sequence[Board]) -> Iterator[Block]:
    for answer in findings.answers[1:]:
        yield Text(f"{answer.sentence} {answer.statistic}.", (19,))
    estimates = f"Estimates of every combination with {words.intervals(findings)}, and their equal-weight margins."
    yield Rows(sheets.cell_means(findings), estimates, (18,))
    yield Rows(means(findings), f"{answer_words.margins(findings)} Standard errors use the residual mean square.", (18,))
    if factor_boards.depends(findings):
        yield Rows(
            simple_effects(findings),
            "F tests of each factor inside every level of the other, with the pooled error; that they differ is tested by the interaction.",
            (22,),
        )
    else:
        yield Text("No simple effects are told apart, since the interaction that would test their difference is not shown.", (22,))
    for board in told:
        if board.kind in ("compared", "slices") and board.table is not None and len(board.table):
            yield Text(f"{board.claim} {board.evidence}.", (21, 19))
            yield Rows(_sheet(board), f"{board.claim} {board.caption}", (21,))
            yield from _pictures([board], board.kind)
    yield Text(to_fill_in("results for every other response measured, and how often the experiment was repeated independently"), (26,))


def _sheet(board: Board) -> Sheet:
    table = board.table if board.table is not None else pd.DataFrame()
    rows = table.astype(str).to_numpy().tolist()
    numeric = {k for k in range(1, len(table.columns)) if all(row[k][:1].isdigit() or row[k][:1] in "−<–" for row in rows)}
    return Sheet(board.alt, [str(name) for name in table.columns], rows, frozenset(range(len(table.columns))) - numeric)


def means(findings: Findings) -> Sheet:
    """Return the equal-weight means of both factors with standard error, interval and plain mean."""
    rows = []
    for factor, frame in findings.marginal_means.items():
        for mean in records.lines(frame):
            ends = original.with_interval(findings, mean, "mean") if mean.estimable else words.NOT_ESTIMABLE
            se = NOT_KNOWN if pd.isna(mean.se) else significant(mean.se, 2)
            rows.append((factor, str(mean.level), ends, se, measured(mean.raw_mean, mean.se), str(mean.n)))
    heads = ("factor", "level", f"equal-weight mean ({percent(findings.study.confidence)} interval)", "s.e.", "plain mean", "n")
    return Sheet("Means of both factors", heads, rows, frozenset({0, 1}))


def simple_effects(findings: Findings) -> Sheet:
    """Return the F tests inside the levels of the other factor."""
    rows = [
        (str(e.factor), str(e.within), words.statistic(e.f, e.df, e.residual_df), p_number(e.p), p_number(e.p_adjusted))
        for e in records.lines(findings.simple_effects)
    ]
    return Sheet("Simple effects", ("factor", "within", "test", "p", "p by Holm"), rows, frozenset({0, 1}))


def _belief(findings: Findings) -> Iterator[Block]:
    yield Text(" ".join((*checks_told.spread(findings), *checks_told.shape(findings))), (14,))
    yield Text(" ".join(checks_told.carriers(findings)[:2]) + " " + _without(findings), (10,))
    table = closing_boards.analyses(findings)
    told = Sheet("Other analyses", [str(name) for name in table.columns], table.astype(str).to_numpy().tolist())
    yield Rows(told, f"p of every question by each defensible analysis; “{closing_boards.OTHERWISE.strip()}” answers otherwise.", (25,))
    yield Text(findings.holds_sentence, (25, 24))
    doubts = list(findings.doubts["sentence"])
    yield Text("Open doubts: " + " ".join(doubts) if doubts else "No doubt was raised by the checks.", (14, 32))


def _without(findings: Findings) -> str:
    """Tell the answers without the most influential observation."""
    lines = [line for line in records.lines(findings.holds) if str(line.analysis).startswith("without row")]
    told = "; ".join(f"{line.term} {p_value(line.p)}" for line in lines)
    return f"{str(lines[0].analysis).capitalize()}: {told}." if lines else ""


def _limits(findings: Findings) -> Iterator[Text]:
    notes = " ".join(findings.notes)
    yield Text(notes or "The layout is complete: every combination holds observations.", (32,))
    yield Text(to_fill_in("whatever was done otherwise than planned"), (31,))
    yield Text(to_fill_in("limits of the experiment that no analysis repairs"), (32,))


def _own(told: Sequence[Board]) -> tuple[Part, ...]:
    """Return the claims in the user's own words and the user's notes, each beside the program's sentence."""
    texts = [Text(f"{board.claim} ({OWN_WORDS}; the program’s sentence: {board.replaced})") for board in told if board.replaced]
    texts += [Text(f"On “{board.claim}”: {board.note}") for board in told if board.note]
    return (Part("Words and notes of the authors", tuple(texts)),) if texts else ()
