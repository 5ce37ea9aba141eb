"""What the shell accepts, and how choices written there are read."""

import argparse
import json
import sys
from collections.abc import Sequence
from typing import NoReturn

from analysis.adjustments import ADJUSTMENTS
from analysis.design import refuse_one_level
from analysis.findings import analyse
from analysis.reading.entry import read_table
from analysis.refusals import Refusal, UnreadableChoice
from analysis.study import MODELS, Study
from analysis.table import Table

LAYOUTS = ("auto", "rows", "grid")


class Parser(argparse.ArgumentParser):
    """An argument parser whose complaints are refusals, one sentence each."""

    def error(self, message: str) -> NoReturn:
        """Raise the complaint instead of printing usage."""
        raise UnreadableChoice(message)


def parser() -> Parser:
    """Return the parser of the shell's choices."""
    p = Parser(prog="python -m analysis", description="Analyse a two-factor experiment and print the findings as JSON.", allow_abbrev=False)
    p.add_argument("table", metavar="TABLE", help="a delimited text, .xlsx, .xls, .ods or Parquet file")
    p.add_argument("--response", required=True, metavar="COLUMN", help="the measured column")
    p.add_argument("--factors", required=True, nargs=2, metavar=("ROW_FACTOR", "COLUMN_FACTOR"), help="the two crossed factors")
    p.add_argument("--block", metavar="COLUMN", help="an additive block")
    p.add_argument("--unit", metavar="COLUMN", help="the experimental unit; its readings are averaged first")
    p.add_argument("--keep", action="append", default=[], metavar="COLUMN=LEVEL,LEVEL", help="analyse these levels only, in this order")
    p.add_argument("--model", default="full", metavar="/".join(MODELS), help="with or without the interaction")
    p.add_argument("--scale", default="none", help="none, log, sqrt, reciprocal or power=L")
    p.add_argument("--confidence", default="0.95", help="level of every interval")
    p.add_argument("--adjust", default="tukey", metavar="/".join(ADJUSTMENTS), help="adjustment within each family")
    p.add_argument("--control", action="append", default=[], metavar="COLUMN=LEVEL", help="control level for dunnett")
    p.add_argument("--matters", metavar="D", help="smallest difference that matters, in units of the response")
    p.add_argument("--layout", default="auto", metavar="/".join(LAYOUTS), help="how the table is laid out")
    p.add_argument("--sheet", metavar="NAME", help="the sheet of a workbook")
    return p


def main(arguments: Sequence[str]) -> int:
    """Print the object for a table and its choices; return 0, or 2 with one sentence on standard error."""
    sys.stdout.reconfigure(encoding="utf-8")  # type: ignore[union-attr]
    sys.stderr.reconfigure(encoding="utf-8")  # type: ignore[union-attr]
    try:
        answer = answer_to(parser().parse_args(arguments))
    except Refusal as refusal:
        sys.stderr.write(f"{refusal}\n")
        return 2
    sys.stdout.write(f"{answer}\n")
    return 0


def answer_to(asked: argparse.Namespace) -> str:
    """Return the findings of what was asked, as JSON text; raises a Refusal."""
    table = read_table(asked.table, sheet=asked.sheet, layout=asked.layout)
    findings = analyse(study_asked(asked, table))
    refuse_one_level(findings.observed)
    return json.dumps(findings.to_dict(), ensure_ascii=False, allow_nan=False)


def study_asked(asked: argparse.Namespace, table: Table) -> Study:
    """Return the study that the shell's choices describe."""
    row, column = (table.column(name).name for name in asked.factors)
    control = {table.column(name).name: ",".join(levels) for name, levels in map(_assignment, asked.control)}
    for name in control:
        if name not in (row, column):
            raise UnreadableChoice(f"--control names “{name}”, which is neither of the factors")
    return Study(
        table=table,
        response=table.column(asked.response).name,
        row_factor=row,
        column_factor=column,
        block=None if asked.block is None else table.column(asked.block).name,
        unit=None if asked.unit is None else table.column(asked.unit).name,
        keep={table.column(name).name: levels for name, levels in map(_assignment, asked.keep)},
        model=asked.model,
        scale=asked.scale,
        confidence=_number("--confidence", asked.confidence),
        adjust=asked.adjust,
        control=control,
        matters=None if asked.matters is None else _number("--matters", asked.matters),
    )


def _number(choice: str, text: str) -> float:
    try:
        return float(text)
    except ValueError:
        raise UnreadableChoice(f"{choice} is “{text}”, which is not a number") from None


def _assignment(text: str) -> tuple[str, list[str]]:
    """Read COLUMN=LEVEL,LEVEL: split at the first = and at commas, both outside double quotes; quotes are dropped.

    A doubled quote inside quotes stands for one quote.
    """
    name, levels, current, quoted, named = "", [""], 0, False, False
    for mark in text:
        if mark == '"':
            quoted = not quoted
        elif mark == "=" and not quoted and not named:
            name, levels, current, named = levels[0], [""], 0, True
        elif mark == "," and not quoted and named:
            levels.append("")
            current += 1
        else:
            levels[current] += mark
    if not named:
        raise UnreadableChoice(f"“{text}” should be written COLUMN=LEVEL")
    return name.strip(), [level.strip() for level in levels]
