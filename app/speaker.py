"""What is said beside a board: its line of evidence and the speaker notes with model, numbers, method and caveats."""

from collections.abc import Iterable

import pandas as pd

from analysis import rounding
from analysis.answers import Answer
from analysis.findings import Findings
from app import records, tabled, words

CAUTION = "Where a result may bear on someone's health or safety, a qualified person reviews it first and local rules come first."
COMPARISONS_TOLD = 60  # comparisons that the notes tell one by one
ROWS_TOLD = 12  # rows left out that the notes name one by one; the workbook names all


def notes(findings: Findings, own: Iterable[str]) -> str:
    """Return the speaker notes of a board: its own lines, then what holds for the whole study."""
    parts = ["\n".join(own), model_notes(findings), "\n".join(f"Note: {sentence}" for sentence in caveats(findings)), CAUTION]
    return "\n\n".join(part for part in parts if part)


def design_line(findings: Findings) -> str:
    """Tell the size of the experiment in one line."""
    design = findings.design
    rows, columns = len(design["row_levels"]), len(design["column_levels"])
    parts = [
        f"{design['response']}: {len(findings.observations)} {words.units_word(findings)}",
        f"{rows} × {columns} combinations, {words.n_per_cell(findings)}",
        f"blocks: {design['block']}" if design["block"] else "",
        f"empty: {', '.join(words.cell_name(cell) for cell in design['empty_cells'])}" if design["empty_cells"] else "",
        left_out_line(findings) if design["left_out"] else "",
    ]
    return " · ".join(part for part in parts if part)


def left_out_line(findings: Findings) -> str:
    """Tell how many rows are left out."""
    left_out = len(findings.design["left_out"])
    return f"{words.counted(left_out, 'row')} left out" if left_out else "no row left out"


def design_notes(findings: Findings) -> list[str]:
    """Tell response, factors with all their levels, counts, and every row left out with its reason."""
    design = findings.design
    left_out = design["left_out"]
    named = [f"Left out: row {entry['row']}, {entry['why']}" for entry in left_out[:ROWS_TOLD]]
    if len(left_out) > ROWS_TOLD:
        named.append(f"{len(left_out) - ROWS_TOLD} more rows are left out; the workbook names each.")
    return [
        f"Response: {words.response_label(findings)}.",
        f"Factors: {tabled.factors_with_levels(findings)}.",
        f"Counts: {tabled.numbers(findings)}; {design['observations']} rows read.",
        *(named or ["No row was left out."]),
    ]


def short_statistic(answer: Answer) -> str:
    """Return the test and the size of an answer without the share it explains."""
    return " · ".join(answer.statistic.split(" · ")[:2])


def bars_line(findings: Findings) -> str:
    """Tell what the bars are and how many values stand behind them."""
    return f"bars: {words.intervals(findings)}, {words.n_per_cell(findings)}"


def model_line(findings: Findings) -> str:
    """Tell in one line how the answers were computed."""
    fit = findings.fit
    return (
        f"{table_words(findings)} sums of squares · residual df {fit['residual_df']}, residual sd {rounding.significant(fit['sigma'])} · "
        f"{words.n_per_cell(findings)} · {model_words(findings)}"
    )


def model_words(findings: Findings) -> str:
    """Return the model analysed as a sum of its terms."""
    study = findings.study
    row, column = study.factors
    terms = [f"{row} + {column}", f"{row} × {column}" if study.model == "full" else "", str(study.block or "")]
    return f"{study.response} = {' + '.join(term for term in terms if term)}"


def table_words(findings: Findings) -> str:
    """Return which sums of squares the answers use, as people say it."""
    return {"type_1": "Type I", "type_1_column_first": "Type I", "type_2": "Type II", "type_3": "Type III"}[findings.used["table"]]


def model_notes(findings: Findings) -> str:
    """Tell model, table, tests and versions."""
    study, fit = findings.study, findings.fit
    tests = [line for answer in findings.answers for line in [tabled.short_test(answer.statistic)] if answer.p is not None]
    return "\n".join(
        [
            f"Model: {model_words(findings)}, effects sum to zero, scale: {words.scale_name(study.scale).lower()}.",
            f"Tests: {table_words(findings)}. {findings.used['why']}",
            *tests,
            f"Residual sd {rounding.significant(fit['sigma'])} on {fit['residual_df']} degrees of freedom; "
            f"R² {rounding.percent(fit['r2'])}.",
            f"Computed with {', '.join(f'{name} {version}' for name, version in findings.versions.items())}.",
        ]
    )


def caveats(findings: Findings) -> list[str]:
    """Tell the open doubts and the notes on the design."""
    return [*findings.doubts["sentence"], *findings.notes]


def family_size(findings: Findings, family: str) -> str:
    """Tell how many comparisons a family holds and how they are adjusted."""
    if records.family(findings, family).empty:
        return tabled.NOTHING_TO_COMPARE
    return f"{words.family_size(findings, family)}, adjusted: {words.adjusted_by(findings)}"


def family_notes(findings: Findings, told: pd.DataFrame) -> list[str]:
    """Tell comparisons in full, the largest first."""
    if told.empty:
        return [tabled.NOTHING_TO_COMPARE]
    head = tabled.difference_head(findings)
    place = [name for name in told.columns if name in ("factor", "within")]
    shown = told.head(COMPARISONS_TOLD)
    lines = [
        f"{''.join(f'{row[name]}: ' for name in place)}{row['compared']}: {head} {row[head]}, p {row['p adjusted']}, {row['reading']}"
        for _, row in shown.iterrows()
    ]
    rest = [f"{len(told) - len(shown)} more stand in the workbook."] if len(told) > len(shown) else []
    bounds = ["The intervals are Bonferroni's, since Holm has none of its own."] if findings.study.adjust == "holm" else []
    return [*bounds, *lines, *rest]
