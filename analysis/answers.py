"""The three questions of a two-factor experiment, answered in plain sentences with their numbers."""

from collections.abc import Mapping
from dataclasses import dataclass

import pandas as pd

from analysis import anova, factor_words, interaction_words, verdicts
from analysis.design import Design
from analysis.evidence import Evidence
from analysis.observations import Factor
from analysis.rounding import measured, p_value, percent, percent_number, significant
from analysis.sizes import Size, largest, largest_contrast

NOT_TESTED = "not_tested"


@dataclass(frozen=True)
class Answer:
    """One of the three questions: the sentence first, then the statistic, then the numbers behind it."""

    question: str
    verdict: str  # one of analysis.verdicts, or "not_tested"
    sentence: str
    statistic: str
    term: str
    f: float | None = None
    df1: int | None = None
    df2: int | None = None
    p: float | None = None
    partial_eta2: float | None = None
    partial_eta2_lower: float | None = None
    partial_eta2_upper: float | None = None
    effect: float | None = None  # largest difference (interaction: largest difference of differences), response units or ratio
    effect_lower: float | None = None
    effect_upper: float | None = None


def table_used(layout: Design, tables: Mapping[str, pd.DataFrame]) -> dict[str, str]:
    """Return which table the answers read, and why in one sentence."""
    if not layout.analysed.interaction:
        return {
            "table": "type_2",
            "why": "Without the interaction Type II and Type III ask the same question: each factor after the other.",
        }
    row, column = layout.observed.row.name, layout.observed.column.name
    if not all(anova.is_defined(tables["type_3"], term) for term in (row, column)):
        return {
            "table": "type_2",
            "why": "Some combinations hold no observation, so Type III is not defined for the factors: each is judged after the other.",
        }
    if layout.balanced:
        return {"table": "type_3", "why": "The design is balanced, so all types give the same table."}
    return {"table": "type_3", "why": "Cells are unequal: Type III compares equal-weight means, as if every combination counted the same."}


def three_answers(evidence: Evidence) -> tuple[Answer, ...]:
    """Return the answers: the interaction first, then each factor, read in the light of the first."""
    row, column = evidence.row, evidence.column
    first = interaction_answer(evidence)
    depends = first.verdict in (verdicts.DIFFERS, verdicts.LARGER)
    return first, factor_answer(evidence, row, column, depends), factor_answer(evidence, column, row, depends)


def interaction_answer(evidence: Evidence) -> Answer:
    """Answer whether the effect of one factor depends on the other."""
    question = f"Does what {evidence.column.word} does depend on {evidence.row.word}?"
    tested = evidence.tested(anova.INTERACTION)
    if tested is None:
        sentence, statistic = interaction_words.untested(evidence)
        return Answer(question, NOT_TESTED, sentence, statistic, anova.INTERACTION)
    size = largest_contrast(evidence.interaction_contrasts, evidence.study.matters, evidence.scale)
    told = interaction_words.shown if tested["p"] < evidence.alpha else interaction_words.not_shown
    verdict, sentence = told(evidence, size)
    return _answer(
        question,
        verdict,
        sentence,
        _statistic(evidence, tested, anova.INTERACTION, size),
        tested,
        size,
        evidence.layout.analysed.residual_df,
    )


def factor_answer(evidence: Evidence, factor: Factor, other: Factor, depends: bool) -> Answer:
    """Answer whether one factor matters; inside the levels of the other where the effect depends on it."""
    question = f"Does {factor.word} matter?"
    tested = evidence.tested(factor.name)
    if tested is None:
        sentence = f"Cannot be told: {factor.word} cannot be tested in this layout."
        return Answer(question, NOT_TESTED, sentence, "No test: see the notes on the design.", factor.name)
    size = largest(evidence.comparisons[factor.name], evidence.scale)
    statistic = _statistic(evidence, tested, factor.word, size)
    if depends:
        verdict, sentence = factor_words.inside(evidence, factor, other)
        statistic += f" · on average over {other.word}; read it within each {other.word}, because of the first answer"
    elif tested["p"] < evidence.alpha:
        verdict, sentence = factor_words.shown(evidence, factor, size)
    else:
        verdict, sentence = factor_words.not_shown(factor, size)
    return _answer(question, verdict, sentence, statistic, tested, size, evidence.layout.analysed.residual_df)


def _statistic(evidence: Evidence, tested: pd.Series, term: str, size: Size | None) -> str:
    """Write the test, the share of variation and the largest difference, in this order."""
    words = [f"{term} F({tested['df']:.0f}, {evidence.layout.analysed.residual_df}) = {significant(tested['f'])}, {p_value(tested['p'])}"]
    if size is not None and evidence.scale.tells_ratios:
        words.append(f"largest ratio {significant(size.effect)} ({significant(size.lower)} to {significant(size.upper)})")
    elif size is not None:
        what = "largest difference of differences" if term == anova.INTERACTION else "largest difference"
        what += "" if size.complete else " that can be estimated"
        ends = f"{measured(size.lower, size.se)} to {measured(size.upper, size.se)}"
        where = evidence.unit if evidence.scale.is_identity else " on the scale analysed"
        words.append(f"{what} {measured(size.effect, size.se)}{where} ({ends})")
    low, high = percent_number(tested["partial_eta2_lower"]), percent(tested["partial_eta2_upper"])
    words.append(f"explains {percent(tested['partial_eta2'])} of what the other terms leave open ({low} to {high})")
    return " · ".join(words)


def _answer(question: str, verdict: str, sentence: str, statistic: str, tested: pd.Series, size: Size | None, residual_df: int) -> Answer:
    return Answer(
        question=question,
        verdict=verdict,
        sentence=sentence,
        statistic=statistic,
        term=str(tested["term"]),
        f=float(tested["f"]),
        df1=int(tested["df"]),
        df2=residual_df,
        p=float(tested["p"]),
        partial_eta2=float(tested["partial_eta2"]),
        partial_eta2_lower=float(tested["partial_eta2_lower"]),
        partial_eta2_upper=float(tested["partial_eta2_upper"]),
        effect=None if size is None else size.effect,
        effect_lower=None if size is None else size.lower,
        effect_upper=None if size is None else size.upper,
    )
