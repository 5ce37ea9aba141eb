"""What each factor does, on average or inside each level of the other, and the comparisons that the user kept: a board each."""

from functools import partial

import pandas as pd

from analysis import verdicts
from analysis.answers import Answer
from analysis.families import within_name
from analysis.findings import Findings
from analysis.rounding import p_value, percent
from analysis.sizes import SMALL_ENOUGH
from analysis.story import Kept
from app import asked_words, asking, records, speaker, tabled, words
from app.asking import Asked
from app.board import Board
from app.figures import differences

DEPENDS = frozenset({verdicts.LARGER, verdicts.DIFFERS})  # verdicts of the interaction that send the reader inside the slices
MOST_SLICES = 6  # more are told in one table
MOST_LINES = 8  # of comparisons that a board draws


def depends(findings: Findings) -> bool:
    """Return whether factors are to be read inside the levels of the other."""
    return findings.answers[0].verdict in DEPENDS


def factors(findings: Findings) -> tuple[Board, ...]:
    """Return a board for each factor, or for each slice of one where its effect depends on the other."""
    if not depends(findings):
        return tuple(on_average(findings, answer) for answer in findings.answers[1:])
    inner, outer, levels = inside_of(findings)
    if len(levels) > MOST_SLICES:
        return (all_slices(findings, inner, outer),)
    return tuple(in_slice(findings, inner, outer, level) for level in levels)


def inside_of(findings: Findings) -> tuple[str, str, list[str]]:
    """Return the factor that is compared, the one inside whose levels, and these.

    It is the factor along the axis of the figure, so that figure and comparisons run the same way, unless the other has fewer slices
    and these are too many.
    """
    row, column = findings.study.factors
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    turned = len(rows) > MOST_SLICES and len(columns) < len(rows)
    return (row, column, columns) if turned else (column, row, rows)


def on_average(findings: Findings, answer: Answer) -> Board:
    """Tell what a factor does, averaged over the other."""
    size = f"{words.family(answer.term, findings.study.factors)}: {speaker.family_size(findings, answer.term)}"
    frame = records.family(findings, answer.term)
    return _compared(
        findings, f"factor / {answer.term}", answer.sentence, f"{speaker.short_statistic(answer)} · {size}", answer.term, frame
    )


def in_slice(findings: Findings, factor: str, other: str, level: str) -> Board:
    """Tell what a factor does inside one level of the other."""
    family = within_name(factor, other)
    frame = records.family(findings, family)
    frame = frame[frame["within"] == level]
    effects = findings.simple_effects
    tested = next(records.lines(effects[(effects["factor"] == factor) & (effects["within"] == level)]))
    test = words.statistic(tested.f, tested.df, tested.residual_df)
    evidence = f"{factor} within {level} {test}, {p_value(tested.p_adjusted)} (Holm over the slices) · {words.sizes_told(frame)}, "
    evidence += f"adjusted: {words.adjusted_by(findings)}"
    claim = slice_claim(findings, factor, other, level, frame, tested.p_adjusted)
    return _compared(findings, f"slice / {family} / {level}", claim, evidence, family, frame)


def slice_claim(findings: Findings, factor: str, other: str, level: str, frame: pd.DataFrame, p: float) -> str:
    """Say what a factor does inside one level of the other; never that it does nothing."""
    compared, outer = findings.observed.factor(factor), findings.observed.factor(other)
    where = f"With {outer.told(level)}"
    known = tabled.largest_first(frame)
    if known.empty or pd.isna(p):
        return f"{where} it cannot be told whether {compared.word} matters."
    if p < 1 - findings.study.confidence:
        return f"{where} {compared.word} matters: {largest(findings, factor, known)}."
    if known["verdict"].isin(SMALL_ENOUGH).all():
        return f"{where} {compared.word} makes no difference that matters."
    return f"{where} a difference between the levels of {compared.word} is not shown, nor that there is none."


def largest(findings: Findings, factor: str, known: pd.DataFrame) -> str:
    """Say the largest difference among levels of a factor with its interval, or where the response is highest and lowest."""
    line, scale = next(records.lines(known)), findings.observed.scale
    compared, response = findings.observed.factor(factor), findings.observed.word
    if not (scale.is_identity or scale.tells_ratios):
        high, low = (line.left, line.right) if (line.difference > 0) != scale.reverses else (line.right, line.left)
        return f"{response} differs most between {compared.told(high)}, where it is higher, and {compared.told(low)}"
    if scale.tells_ratios:
        return f"{response} is {tabled.size(line)} times as high with {compared.told(line.left)} as with {compared.told(line.right)}"
    unit = f" {findings.observed.unit}" if findings.observed.unit else ""
    size = tabled.size(line).replace(" (", f"{unit} (", 1)
    return f"{compared.told(line.left)} minus {compared.told(line.right)} is {size}"


def all_slices(findings: Findings, factor: str, other: str) -> Board:
    """Tell the largest differences inside all slices, where they are too many for a board each."""
    family = within_name(factor, other)
    table = tabled.comparisons(findings, (family,) if findings.comparisons[family] is not None else ())
    answer = next(answer for answer in findings.answers if answer.term == factor)
    evidence = f"{words.family(family, findings.study.factors)}: {speaker.family_size(findings, family)}"
    return Board(
        f"slices / {family}", "slices", answer.sentence, evidence, speaker.notes(findings, speaker.family_notes(findings, table)),
        tabled.comparisons_alt(findings, table), table=table, caption=f"Differences are adjusted: {words.adjusted_by(findings)}.",
    )  # fmt: skip


def kept(findings: Findings, one: Kept) -> Board | None:
    """Tell a question that was asked at Compare and kept; None where the study no longer knows its levels."""
    asked = asked_again(findings, one)
    if asked is None:
        return None
    if asked.family.startswith(asking.TREND):
        return _trend(findings, one, asked)
    frame = asking.compared(findings, asked)
    if frame is None or frame.empty:
        return None
    sentence, statistic, _ = asked_words.answer(findings, asked, frame)
    question = asked_words.question(findings, asked, frame)
    claim = f"{question[:1].upper()}{question[1:]}: {sentence}"
    evidence = " · ".join(part for part in (statistic, asked_words.family_told(findings, asked, frame)) if part)
    return _compared(findings, one.key, claim, evidence, asked.family, frame)


def asked_again(findings: Findings, one: Kept) -> Asked | None:
    """Return the question that was kept, None where its family, slice or cells are not there any longer."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    if any(row not in rows or column not in columns for row, column in one.cells):
        return None
    asked = Asked(one.family, one.within, tuple((rows.index(row), columns.index(column)) for row, column in one.cells))
    return asked if asking.valid(findings, asked) == asked else None


def keepable(findings: Findings, asked: Asked) -> Kept:
    """Return a question as it is kept: its cells by their levels."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    cells = asked.cells if asked.family == asking.CHOSEN else ()
    return Kept(asked.family, asked.within, tuple((rows[i], columns[j]) for i, j in cells))


def _trend(findings: Findings, one: Kept, asked: Asked) -> Board:
    sentence, statistic, _ = asked_words.trend_answer(findings, asked)
    sheet = asked_words.trend(findings, asked)
    table = pd.DataFrame(list(sheet.rows), columns=list(sheet.columns), dtype=object)
    told = "; ".join(f"{row[0]}, {row[1]}: {row[2]}, p {row[-1]}" for row in sheet.rows[:6])
    alt = f"Table on the trend along {asked.family.removeprefix(asking.TREND)} of {tabled.factors_with_levels(findings)}; "
    alt += f"{tabled.numbers(findings)}. {told}."
    caption = "Each line is asked on its own and not adjusted."
    return Board(one.key, "trend", sentence, statistic, speaker.notes(findings, [statistic, caption]), alt, table=table, caption=caption)


def _compared(findings: Findings, key: str, claim: str, evidence: str, family: str, frame: pd.DataFrame) -> Board:
    """Return a board on some comparisons: the largest drawn, all in its table."""
    known = tabled.largest_first(frame)
    table = tabled.compared(findings, known)
    drawn = frame.loc[[index for index in frame.index if index in set(known.index[:MOST_LINES])]]
    few = f", the {MOST_LINES} largest of {len(known)}" if len(known) > MOST_LINES else ""
    bars = f"bars: {percent(findings.study.confidence)} intervals{few}"
    caption = tabled.NOTHING_TO_COMPARE if known.empty else differences.differences_caption(findings, family, drawn)
    figure = partial(differences.differences, findings, family=family, asked=drawn) if len(known) else None
    return Board(
        key, "compared", claim, evidence,
        speaker.notes(findings, [evidence, caption, *speaker.family_notes(findings, table)]),
        tabled.comparisons_alt(findings, table), figure=figure, table=table, drawn=bars, caption=caption,
    )  # fmt: skip
