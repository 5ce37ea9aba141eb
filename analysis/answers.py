"""The three questions of a two-factor experiment, answered in plain sentences with their numbers."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import pandas as pd

from analysis import anova, verdicts
from analysis.design import Design
from analysis.families import within_name
from analysis.rounding import measured, p_value, percent, percent_number, signed, significant
from analysis.sizes import Size, largest, largest_contrast, turns
from analysis.study import Study

NOT_TESTED = "not_tested"


@dataclass(frozen=True, eq=False)
class Evidence:
    """What the sentences are read from."""

    layout: Design
    study: Study
    table: pd.DataFrame
    comparisons: Mapping[str, pd.DataFrame | None]
    simple_effects: pd.DataFrame
    interaction_contrasts: pd.DataFrame | None
    marginal_means: Mapping[str, pd.DataFrame]
    cells: pd.DataFrame

    @property
    def alpha(self) -> float:
        """The level at which something is called decided."""
        return 1 - self.study.confidence

    @property
    def unit(self) -> str:
        """The unit of the response with a space before it, or nothing."""
        unit = self.layout.observed.response_unit
        return f" {unit}" if unit and self.layout.observed.scale.is_identity else ""

    def tested(self, term: str) -> pd.Series | None:
        """Return the table's row of a term, or None where it has no F."""
        row = self.table[self.table["term"] == term]
        return None if row.empty or pd.isna(row["f"].iloc[0]) else row.iloc[0]


@dataclass(frozen=True)
class Answer:
    """One of the three questions: the sentence first, then the statistic, then the numbers behind it."""

    question: str
    verdict: str  # one of analysis.verdicts, or "not_tested"
    sentence: str
    statistic: str
    term: str
    f: float | None = None
    df1: float | None = None
    df2: float | None = None
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
    row, column = evidence.study.factors
    first = interaction_answer(evidence)
    depends = first.verdict in (verdicts.DIFFERS, verdicts.LARGER)
    return first, factor_answer(evidence, row, column, depends), factor_answer(evidence, column, row, depends)


def interaction_answer(evidence: Evidence) -> Answer:
    """Answer whether the effect of one factor depends on the other."""
    row, column = evidence.study.factors
    question = f"Does what {column} does depend on {row}?"
    tested = evidence.tested(anova.INTERACTION)
    if tested is None:
        sentence, statistic = _interaction_untested(evidence)
        return Answer(question, NOT_TESTED, sentence, statistic, anova.INTERACTION)
    size = largest_contrast(evidence.interaction_contrasts, evidence.study.matters, evidence.layout.observed.scale)
    if tested["p"] < evidence.alpha:
        verdict, sentence = _depends(evidence, size)
    else:
        verdict, sentence = _not_shown_to_depend(evidence, size)
    return _answer(question, verdict, sentence, _statistic(evidence, tested, anova.INTERACTION, size), tested, size)


def _interaction_untested(evidence: Evidence) -> tuple[str, str]:
    if evidence.layout.interaction_untestable:
        what = "one observation in each cell" if evidence.layout.single_values else "no observation to spare"
        return f"Cannot be told: with {what}, interaction and chance cannot be separated.", "No test; repeat the combinations to have one."
    if evidence.study.model == "additive":
        return "Not asked: the model without interaction was chosen.", "No test; choose the model with interaction to have one."
    return "Cannot be told from these observations.", "No test: see the notes on the design."


def _depends(evidence: Evidence, size: Size | None) -> tuple[str, str]:
    row, column = evidence.study.factors
    sentence = f"Yes: what {column} does depends on {row}"
    if size is not None and size.all_small:
        return verdicts.SMALL, f"{sentence}, but by less than what matters."
    verdict = verdicts.LARGER if size is not None and size.verdict == verdicts.LARGER else verdicts.DIFFERS
    example = _example(evidence)
    turned = [factor for factor, other in ((column, row), (row, column)) if turns(evidence.comparisons[within_name(factor, other)])]
    if turned:
        return verdict, f"{sentence}, and the order of the levels of {' and of '.join(turned)} changes{example}."
    return verdict, f"{sentence}{example}."


def _example(evidence: Evidence) -> str:
    """Show the largest difference of differences by the two changes that it is made of, where the scale can tell them."""
    contrasts, scale = evidence.interaction_contrasts, evidence.layout.observed.scale
    if contrasts is None or not (scale.is_identity or scale.tells_ratios) or contrasts["difference"].isna().all():
        return ""
    at = contrasts.iloc[int(contrasts["difference"].abs().fillna(0).to_numpy(float).argmax())]
    (r1, r2), (c1, c2) = at["rows"], at["columns"]
    row, column = evidence.study.factors
    changes = [_change(evidence, r, c1, c2) for r in (r1, r2)]
    how = "changes by the factor" if scale.tells_ratios else "changes by"
    told = f"{changes[0]} with {_levels(row, [r1])} and {changes[1]} with {_levels(row, [r2])}"
    return f": from {_levels(column, [c1])} to {_levels(column, [c2])} {evidence.layout.observed.response} {how} {told}"


def _change(evidence: Evidence, row: str, first: str, second: str) -> str:
    """Write how the estimate of one row changes between two columns."""
    mine = evidence.cells[evidence.cells["row"] == row]
    (before, se_before), (after, se_after) = (
        mine.loc[mine["column"] == column, ["estimate", "se"]].to_numpy(float)[0].tolist() for column in (first, second)
    )
    change = after - before
    scale = evidence.layout.observed.scale
    if scale.tells_ratios:
        return significant(float(scale.back(np.array(change))))
    se = float(np.hypot(se_before, se_after))
    return f"{signed(change, se)}{evidence.unit}"


def _not_shown_to_depend(evidence: Evidence, size: Size | None) -> tuple[str, str]:
    row, column = evidence.study.factors
    if size is not None and size.all_small:
        return verdicts.NONE_THAT_MATTERS, f"Not by an amount that matters: {column} does much the same at every level of {row}."
    return verdicts.UNDECIDED, f"Not decided: the data do not show that what {column} does depends on {row}, nor that it does not."


def factor_answer(evidence: Evidence, factor: str, other: str, depends: bool) -> Answer:
    """Answer whether one factor matters; inside the levels of the other where the effect depends on it."""
    question = f"Does {factor} matter?"
    tested = evidence.tested(factor)
    if tested is None:
        return Answer(
            question,
            NOT_TESTED,
            f"Cannot be told: {factor} cannot be tested in this layout.",
            "No test: see the notes on the design.",
            factor,
        )
    size = largest(evidence.comparisons[factor], evidence.layout.observed.scale, factor)
    if depends:
        verdict, sentence = _inside(evidence, factor, other)
    elif tested["p"] < evidence.alpha:
        verdict, sentence = _matters(evidence, factor, size)
    else:
        verdict, sentence = _not_shown(evidence, factor, size)
    statistic = _statistic(evidence, tested, factor, size)
    if depends:
        statistic += f" · on average over {other}; read it within each {other}, because of the first answer"
    return _answer(question, verdict, sentence, statistic, tested, size)


def _inside(evidence: Evidence, factor: str, other: str) -> tuple[str, str]:
    """Say inside which levels of the other factor this one makes a difference."""
    frame = evidence.simple_effects[evidence.simple_effects["factor"] == factor]
    where = frame.loc[frame["p_adjusted"] < evidence.alpha, "within"].tolist()
    rest = [level for level in frame["within"] if level not in where]
    if not where:
        return verdicts.UNDECIDED, f"Not decided within any single level of {other}, though its effect changes with {other}."
    if not rest:
        return verdicts.DIFFERS, f"{_capital(factor)} matters at every level of {other}, and not by the same amount."
    small = _only_small(evidence, factor, other, rest)
    ending = "any difference is too small to matter" if small else "no difference is shown"
    return verdicts.DIFFERS, f"{_capital(factor)} matters with {_levels(other, where)}; with {_levels(other, rest)} {ending}."


def _only_small(evidence: Evidence, factor: str, other: str, levels: list[str]) -> bool:
    frame = evidence.comparisons[within_name(factor, other)]
    if frame is None:
        return False
    inside = frame.loc[frame["within"].isin(levels), "verdict"]
    return bool(len(inside)) and bool(inside.isin((verdicts.SMALL, verdicts.NONE_THAT_MATTERS)).all())


def _matters(evidence: Evidence, factor: str, size: Size | None) -> tuple[str, str]:
    if size is not None and size.all_small:
        return verdicts.SMALL, f"{_capital(factor)} makes a difference, but one too small to matter."
    verdict = verdicts.LARGER if size is not None and size.verdict == verdicts.LARGER else verdicts.DIFFERS
    means = evidence.marginal_means[factor].dropna(subset=["mean"])
    if size is None or means.empty:
        return (
            verdict,
            f"{_capital(factor)} matters, judged beside the other factor; its means cannot be averaged while combinations are missing.",
        )
    if size.verdict == verdicts.UNDECIDED:
        return verdict, f"{_capital(factor)} makes a difference overall, though no two of its levels can be told apart one by one."
    levels, values = means["level"].tolist(), means["mean"].to_numpy(float)
    high, low = levels[int(values.argmax())], levels[int(values.argmin())]
    return verdict, f"{_capital(factor)} matters: {_highest(evidence, size, _levels(factor, [high]), _levels(factor, [low]))}."


def _highest(evidence: Evidence, size: Size, high: str, low: str) -> str:
    """Say by how much the highest mean lies above the lowest, where the scale can tell it and that pair is compared."""
    observed = evidence.layout.observed
    if {high, low} != {_levels(size.factor, [level]) for level in size.levels} or not (
        observed.scale.is_identity or observed.scale.tells_ratios
    ):
        return f"{observed.response} is highest with {high} and lowest with {low}"
    if observed.scale.tells_ratios:
        ratio = f"{significant(size.effect)} times ({significant(size.lower)} to {significant(size.upper)})"
        return f"{observed.response} is {ratio} as high with {high} as with {low}"
    difference = f"{measured(size.effect, size.se)}{evidence.unit} ({measured(size.lower, size.se)} to {measured(size.upper, size.se)})"
    return f"{observed.response} is {difference} higher with {high} than with {low}"


def _not_shown(evidence: Evidence, factor: str, size: Size | None) -> tuple[str, str]:
    if size is not None and size.all_small:
        return verdicts.NONE_THAT_MATTERS, f"{_capital(factor)} makes no difference that matters."
    return verdicts.UNDECIDED, f"Not decided: the data do not show a difference between the levels of {factor}, nor that there is none."


def _statistic(evidence: Evidence, tested: pd.Series, term: str, size: Size | None) -> str:
    """Write the test, the share of variation and the largest difference, in this order."""
    words = [f"{term} F({tested['df']:.0f}, {evidence.layout.analysed.residual_df}) = {significant(tested['f'])}, {p_value(tested['p'])}"]
    if size is not None and evidence.layout.observed.scale.tells_ratios:
        words.append(f"largest ratio {significant(size.effect)} ({significant(size.lower)} to {significant(size.upper)})")
    elif size is not None:
        what = "largest difference of differences" if term == anova.INTERACTION else "largest difference"
        ends = f"{measured(size.lower, size.se)} to {measured(size.upper, size.se)}"
        words.append(f"{what} {measured(size.effect, size.se)}{evidence.unit} ({ends})")
    low, high = percent_number(tested["partial_eta2_lower"]), percent(tested["partial_eta2_upper"])
    words.append(f"explains {percent(tested['partial_eta2'])} of what the other terms leave open ({low} to {high})")
    return " · ".join(words)


def _answer(question: str, verdict: str, sentence: str, statistic: str, tested: pd.Series, size: Size | None) -> Answer:
    return Answer(
        question=question,
        verdict=verdict,
        sentence=sentence,
        statistic=statistic,
        term=str(tested["term"]),
        f=float(tested["f"]),
        df1=float(tested["df"]),
        df2=None if size is None else size.df,
        p=float(tested["p"]),
        partial_eta2=float(tested["partial_eta2"]),
        partial_eta2_lower=float(tested["partial_eta2_lower"]),
        partial_eta2_upper=float(tested["partial_eta2_upper"]),
        effect=None if size is None else size.effect,
        effect_lower=None if size is None else size.lower,
        effect_upper=None if size is None else size.upper,
    )


def _capital(name: str) -> str:
    return name[:1].upper() + name[1:]


def _levels(factor: str, levels: list[str]) -> str:
    """Write levels for a sentence; numbers carry their factor's name, since "with 20" says nothing."""
    told = [f"{factor} {level}" if level[:1].isdigit() else level for level in levels]
    return told[0] if len(told) == 1 else f"{', '.join(told[:-1])} and {told[-1]}"
