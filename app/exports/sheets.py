"""What the sheets of the workbook hold: tidy frames at full precision, one header row each."""

from collections.abc import Iterator, Mapping, Sequence

import numpy as np
import pandas as pd

from analysis.findings import Findings
from analysis.log import Entry
from analysis.table import Table
from app import speaker, tabled, words

# How many rows a sheet holds; what is beyond is counted in the first sheet.
DATA_ROWS, OTHER_ROWS = 100_000, 20_000
DATA = "data as analysed"
TYPES: Mapping[str, str] = {
    "type_1": "Type I, {row} first",
    "type_1_column_first": "Type I, {column} first",
    "type_2": "Type II",
    "type_3": "Type III",
}


def all_sheets(findings: Findings, decisions: Sequence[Entry] = ()) -> dict[str, pd.DataFrame]:
    """Return every sheet but the first by name, in their order; a sheet without content is not there."""
    sheets = {
        DATA: data(findings),
        "cells": cells(findings),
        "ANOVA": anova(findings),
        "means": means(findings),
        "comparisons": comparisons(findings),
        "simple effects": findings.simple_effects,
        "interaction contrasts": contrasts(findings),
        "checks": checks(findings),
        "influence": influence(findings),
        "other analyses": findings.holds,
        "doubts": doubts(findings),
        "log": decided(decisions),
    }
    return {name: frame for name, frame in sheets.items() if frame is not None and len(frame)}


def data(findings: Findings) -> pd.DataFrame:
    """Return every row of the file that held an observation: those analysed with fit and residual, the others with the reason."""
    seen, blocks = findings.observations, [findings.study.block] if findings.study.block else []
    used = seen[["file_row", "row", "column", *(["block"] if blocks else []), "value", "fitted", "residual"]].assign(
        analysed="yes", reason=""
    )
    rows = pd.concat([used, _left_out(findings, list(used.columns))], ignore_index=True)
    factors = (findings.design["row_factor"], findings.design["column_factor"])
    heads = ["row of the file", *factors, *blocks, words.response_label(findings), "fitted", "residual", "analysed", "reason"]
    return rows.set_axis(heads, axis=1)


def _left_out(findings: Findings, columns: Sequence[str]) -> pd.DataFrame:
    """Return the rows that take no part, with what the file says there."""
    study, table = findings.study, findings.study.table
    place = {int(row): index for index, row in enumerate(table.file_rows)}
    roles = {"row": study.row_factor, "column": study.column_factor, "block": study.block, "value": study.response}
    rows = []
    for entry in findings.design["left_out"]:
        index = place.get(entry["row"])
        told = {} if index is None else {head: _cell_text(table, name, index) for head, name in roles.items() if name}
        rows.append({"file_row": entry["row"], **told, "analysed": "no", "reason": entry["why"]})
    return pd.DataFrame(rows, columns=list(columns), dtype=object)


def _cell_text(table: Table, column: str, index: int) -> str:
    return (table.column(column).text(index, index + 1) or [""])[0]


def cells(findings: Findings) -> pd.DataFrame:
    """Return the cells with their own means and the model's, and beside them what the model without interaction says."""
    frame = _named(findings, untold(findings.cells))
    if findings.additive_means is None:
        return frame
    additive = findings.additive_means[["mean", "se", "lower", "upper"]].reset_index(drop=True)
    return frame.join(additive.add_prefix("without interaction: "))


def _named(findings: Findings, frame: pd.DataFrame) -> pd.DataFrame:
    design = findings.design
    return frame.rename(columns={"row": design["row_factor"], "column": design["column_factor"]}).reset_index(drop=True)


def untold(frame: pd.DataFrame) -> pd.DataFrame:
    """Spread what is told in original units over columns of its own."""
    if "told" not in frame:
        return frame
    told = pd.DataFrame(frame["told"].tolist(), index=frame.index).add_prefix("in original units: ")
    return frame.drop(columns="told").join(told)


def anova(findings: Findings) -> pd.DataFrame:
    """Return the tables of the model analysed and of the model without interaction, one below the other."""
    row, column = findings.study.factors
    analysed = "with interaction" if findings.study.model == "full" else "without interaction"
    models = {analysed: findings.tables, "without interaction": findings.tables_additive or {}}
    parts = []
    for model, tables in models.items():
        for name, table in tables.items():
            if table is not None:
                told = "yes" if model == analysed and name == findings.used["table"] else "no"
                parts.append(_labelled(table, model=model, kind=TYPES[name].format(row=row, column=column), answers=told))
    return pd.concat(parts, ignore_index=True).rename(columns={"kind": "sums of squares", "answers": "used for the answers"})


def _labelled(frame: pd.DataFrame, **labels: str) -> pd.DataFrame:
    """Put columns with the same text in every row before a frame."""
    return pd.concat([pd.DataFrame(labels, index=frame.index), frame], axis=1)


def means(findings: Findings) -> pd.DataFrame:
    """Return the equal-weight means of both factors beside their plain means."""
    return pd.concat([_labelled(untold(frame), factor=name) for name, frame in findings.marginal_means.items()], ignore_index=True)


def comparisons(findings: Findings) -> pd.DataFrame | None:
    """Return the comparisons of every family, a difference being left minus right."""
    parts = [_labelled(untold(frame), family=name) for name, frame in findings.comparisons.items() if frame is not None and len(frame)]
    if not parts:
        return None
    frame = pd.concat(parts, ignore_index=True)
    sides = {side: [words.cell_name(label) for label in frame[side]] for side in ("left", "right")}
    return frame.assign(**sides, verdict=[words.VERDICTS[verdict] for verdict in frame["verdict"]])


def contrasts(findings: Findings) -> pd.DataFrame | None:
    """Return the differences of differences."""
    frame = findings.interaction_contrasts
    if frame is None or frame.empty:
        return None
    pairs = {f"{side} {k + 1}": [pair[k] for pair in frame[side]] for side in ("rows", "columns") for k in (0, 1)}
    rest = untold(frame).drop(columns=["rows", "columns"])
    return pd.concat([pd.DataFrame(pairs, index=frame.index), rest], axis=1)


def checks(findings: Findings) -> pd.DataFrame:
    """Return the checks of the model, one row each."""
    rows = []
    for name, found in findings.checks.items():
        for entry in _entries(found):
            rows.append({"check": name.replace("_", " "), **entry})
    return pd.DataFrame(rows)


def _entries(found: object) -> Iterator[Mapping[str, object]]:
    """Return what a check found as rows: one for a single test, several for a list of them; influence has a sheet of its own."""
    if found is None or (isinstance(found, pd.DataFrame) and "leverage" in found):
        return
    if isinstance(found, pd.DataFrame):
        yield from ({str(head): value for head, value in row.items()} for row in found.to_dict("records"))
    elif isinstance(found, Mapping):
        yield found
    else:
        yield vars(found)


def influence(findings: Findings) -> pd.DataFrame | None:
    """Return residual, leverage and influence of every observation."""
    found = findings.checks.get("influence")
    return None if found is None else found.rename(columns={"row": "row of the file"})


def doubts(findings: Findings) -> pd.DataFrame:
    """Return the open doubts, the rows of the file that each is about in one cell."""
    found = findings.doubts
    return found.assign(rows=[", ".join(map(str, rows)) for rows in found["rows"]])


def decided(decisions: Sequence[Entry]) -> pd.DataFrame:
    """Return every decision in order, with its reason."""
    told = [(place, entry.sentence, entry.reason) for place, entry in enumerate(decisions, start=1)]
    return pd.DataFrame(told, columns=["step", "decision", "reason"])


def read_me(findings: Findings, others: Mapping[str, pd.DataFrame]) -> list[tuple[str, object]]:
    """Return what the first sheet says, a heading word and a text each."""
    study, design = findings.study, findings.design
    left_out = len(design["left_out"])
    asked = f"{words.response_label(findings)} by {design['row_factor']} and {design['column_factor']}"
    lines: list[tuple[str, object]] = [
        ("Experiment", f"{asked}, from {study.table.name}"),
        *((answer.question, f"{answer.sentence} {answer.statistic}") for answer in findings.answers),
        ("Factors", tabled.factors_with_levels(findings)),
        ("Counts", f"{tabled.numbers(findings)}; rows read: {design['observations']}; rows left out: {left_out}"),
        ("Model", f"{speaker.model_words(findings)}; scale: {words.scale_name(study.scale).lower()}; effects sum to zero"),
        ("Tests", f"{speaker.table_words(findings)}. {findings.used['why']}"),
        ("Intervals", f"{words.intervals(findings)}; comparisons adjusted within each family: {words.adjusted_by(findings)}"),
        ("Smallest difference that matters", "not given" if study.matters is None else float(study.matters)),
        ("Caution", speaker.CAUTION),
    ]
    lines += [(f"Sheet “{name}”", _extent(name, frame)) for name, frame in others.items()]
    lines += [("Note", sentence) for sentence in speaker.caveats(findings)]
    return [*lines, ("Computed with", ", ".join(f"{name} {version}" for name, version in findings.versions.items()))]


def held(name: str, frame: pd.DataFrame) -> pd.DataFrame:
    """Return the rows of a frame that its sheet holds."""
    return frame.head(DATA_ROWS if name == DATA else OTHER_ROWS)


def _extent(name: str, frame: pd.DataFrame) -> str:
    """Tell how much of a frame its sheet holds."""
    rows = len(held(name, frame))
    return f"{rows} rows, numbers at full precision" if rows == len(frame) else f"the first {rows} of {len(frame)} rows"


def number_or_text(value: object) -> object:
    """Return a value as a spreadsheet types it: number, yes or no, text, or nothing where it is not defined."""
    if value is None or value is pd.NaT:
        return None
    if isinstance(value, (bool, np.bool_)):
        return "yes" if value else "no"
    if isinstance(value, (int, np.integer)):
        return int(value)
    if isinstance(value, (float, np.floating)):
        return float(value) if np.isfinite(value) else None
    return str(value)
