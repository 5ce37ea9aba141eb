"""How an answer is known: the model in notation, the hypothesis, the sums of squares and why, formula, sources, rows used."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Any

from analysis import anova
from analysis.adjustments import ADJUSTMENTS
from analysis.answers import Answer
from analysis.findings import Findings
from analysis.rounding import NOT_KNOWN, fixed, p_value, significant
from app import records, words
from app.paper import Sheet

SOURCES: Mapping[str, str] = MappingProxyType(
    {"type_2": "Yates (1934), fitting of constants", "type_3": "Yates (1934), weighted squares of means"}
)
QUESTIONS: Mapping[str, str] = MappingProxyType(
    {
        "type_1": "Type I, {row} first: what {row} explains by itself, then what {column} adds.",
        "type_1_column_first": "Type I, {column} first: what {column} explains by itself, then what {row} adds.",
        "type_2": "Type II: what each factor adds to the other, as if there were no interaction.",
        "type_3": "Type III: whether means differ when every combination counts the same, however often it was observed.",
    }
)


def known(findings: Findings, answer: Answer) -> tuple[str, ...]:
    """Return the lines of the fold under one answer, none where there was no test."""
    if answer.f is None:
        return ()
    table = findings.used["table"]
    adjusted = ADJUSTMENTS[findings.study.adjust]
    return (
        f"Model: {model(findings)}",
        f"Hypothesis tested: {hypothesis(findings, answer.term)}",
        f"{words.TABLES[table]} sums of squares. {findings.used['why']}",
        formula(findings, answer.term),
        f"Sources: {SOURCES[table]}; Fisher (1925) for F; Steiger (2004) for the interval of the share explained; "
        f"differences {adjusted.word} ({adjusted.source}).",
        words.reckoning(findings.design["observations"], len(findings.design["left_out"])),
    )


def model(findings: Findings) -> str:
    """Return the model analysed in notation, each letter explained."""
    row, column, block = findings.study.row_factor, findings.study.column_factor, findings.study.block
    terms = ["αᵢ", "βⱼ", *(["(αβ)ᵢⱼ"] if findings.study.model == "full" else []), *(["γₗ"] if block else [])]
    letters = [f"α: {row}", f"β: {column}", *([f"γ: {block}"] if block else [])]
    index, response = ("ᵢⱼₗₖ", "y") if block else ("ᵢⱼₖ", "y")
    return (
        f"{response}{index} = μ + {' + '.join(terms)} + ε{index} with y: {words.response_label(findings)}, {', '.join(letters)}, "
        "ε independent, normal, with one spread."
    )


def hypothesis(findings: Findings, term: str) -> str:
    """Return what would hold if the answer were no."""
    if term == anova.INTERACTION:
        return "every (αβ)ᵢⱼ = 0: the differences between levels of one factor are the same at every level of the other."
    letter = "α" if term == findings.study.row_factor else "β"
    if findings.used["table"] == "type_3":
        return f"every {letter} = 0: the means of {term} are equal when every combination counts the same."
    return f"every {letter} = 0: {term} adds nothing to the other factor."


def formula(findings: Findings, term: str) -> str:
    """Return F as the ratio that it is, with its numbers."""
    lines = {line.term: line for line in records.lines(findings.used_table)}
    tested, left = lines[term], lines[anova.RESIDUAL]
    return (
        f"F = mean square of {term} ÷ residual mean square = {significant(tested.ms, 4)} ÷ {significant(left.ms, 4)} "
        f"= {significant(tested.f)}, with {fixed(tested.df, 0)} and {fixed(left.df, 0)} degrees of freedom."
    )


def types(findings: Findings) -> Sheet | None:
    """Return F and p of every type of sums of squares side by side; None where the types agree because cells are equal."""
    if findings.design["balanced"]:
        return None
    row, column = findings.study.factors
    tables = {kind: {line.term: line for line in records.lines(findings.tables[kind])} for kind in QUESTIONS}
    terms = [str(t.term) for t in records.lines(findings.used_table) if t.term not in (anova.RESIDUAL, anova.TOTAL)]
    heads = [QUESTIONS[kind].format(row=row, column=column).partition(":")[0] for kind in QUESTIONS]
    rows = [(term, *(_told(tables[kind][term]) for kind in QUESTIONS)) for term in terms]
    return Sheet("F and p by the type of sums of squares", ("term", *heads), rows)


def _told(tested: Any) -> str:
    told = significant(tested.f)
    return told if told == NOT_KNOWN else f"{told}, {p_value(tested.p)}"


def questions(findings: Findings) -> tuple[str, ...]:
    """Return the question that each type of sums of squares answers."""
    row, column = findings.study.factors
    return tuple(question.format(row=row, column=column) for question in QUESTIONS.values())
