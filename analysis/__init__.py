"""Two-factor experiments from a table to an answer: read, lay out, fit, compare, check and put in words."""

from analysis.findings import Findings, analyse
from analysis.reading.entry import read_table
from analysis.refusals import Refusal
from analysis.study import Study
from analysis.table import Table

__all__ = ["Findings", "Refusal", "Study", "Table", "analyse", "read_table"]
