"""The study as a script: a plain Python file with the analysed observations that computes the results again without this program."""

import json
import textwrap
from pathlib import Path

import pandas as pd

from analysis.findings import Findings
from app import words
from app.exports import csv_files

PLAIN = Path(__file__).parents[1] / "assets" / "recompute.txt"
LIBRARIES = ("pandas", "statsmodels", "scipy")
ROWS_NAMED = 30  # rows left out that the head names one by one


def build(findings: Findings, file: str = "recompute.py") -> bytes:
    """Return the script, which calls itself by the name of its file; the same bytes for the same findings."""
    script = PLAIN.read_text(encoding="utf-8")
    for mark, told in {
        "@FILE@": file,
        "@PINS@": " ".join(f"{name}=={findings.versions[name]}" for name in LIBRARIES),
        "@ABOUT@": quoted(about(findings)),
        "@STUDY@": constants(findings),
        "@OBSERVATIONS@": quoted(csv_files.text(observations(findings))),
    }.items():
        script = script.replace(mark, told)
    return script.encode("utf-8")


def observations(findings: Findings) -> pd.DataFrame:
    """Return the analysed observations in the columns of the exported data that the script needs."""
    seen = findings.observations
    block = {"block": seen["block"]} if findings.study.block else {}
    return pd.DataFrame(
        {"file_row": seen["file_row"], "row": seen["row"], "column": seen["column"], **block, "value": seen["value"]}
    ).assign(analysed="yes")


def quoted(text: str) -> str:
    """Return text as it stands between triple quotes of a Python file, line by line, every odd character escaped."""
    return "\n".join(json.dumps(line, ensure_ascii=False)[1:-1] for line in text.split("\n"))


def about(findings: Findings) -> str:
    """Return what was analysed and which rows were left out."""
    design, study = findings.design, findings.study
    left_out = design["left_out"]
    named = "; ".join(f"row {entry['row']}, {entry['why']}" for entry in left_out[:ROWS_NAMED])
    rest = f"; and {len(left_out) - ROWS_NAMED} more" if len(left_out) > ROWS_NAMED else ""
    sentences = (
        f"{words.response_label(findings)} by {design['row_factor']} and {design['column_factor']}, from {study.table.name}.",
        f"Scale of the values: {words.scale_name(study.scale).lower()}. Left out: {words.counted(len(left_out), 'row')} of the file"
        f"{f' ({named}{rest})' if left_out else ''}.",
    )
    return "\n".join(line for sentence in sentences for line in textwrap.wrap(sentence, 120, break_long_words=False))


def constants(findings: Findings) -> str:
    """Return the choices that the script needs, as JSON in letters that no source file mistakes."""
    study, design = findings.study, findings.design
    row, column = study.factors
    levels = {"row": list(design["row_levels"]), "column": list(design["column_levels"])}
    control = findings.control or {}
    told = {
        "response": study.response,
        "row": row,
        "column": column,
        "block": study.block,
        "levels": levels,
        "interaction": findings.model.interaction,
        "scale": study.scale,
        "confidence": study.confidence,
        "adjust": study.adjust,
        "table": findings.used["table"],
        "control": {side: levels[side][control.get(name, 0)] for side, name in (("row", row), ("column", column))},
    }
    return json.dumps(told).replace("'", "\\u0027")
