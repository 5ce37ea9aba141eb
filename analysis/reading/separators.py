"""Which character separates the cells of a text file."""

import csv
import re
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from analysis.table import Decision

NAMES = {",": "commas", ";": "semicolons", "\t": "tabs", "|": "pipes", " ": "spaces", "  ": "runs of spaces"}
_WEIGHT = {"\t": 1.0, ";": 0.99, "|": 0.98, ",": 0.97, "  ": 0.85, " ": 0.75}  # at equal consistency the surer sign wins
_DECLARED = re.compile(rb"(?:\"?sep=(.)\"?)[ ,;\t]*(?:\n|$)", re.IGNORECASE)
_SAMPLE_LINES = 200
_GAPS = {" ": re.compile(r'("(?:[^"]|"")*")|[ \t]+'), "  ": re.compile(r'("(?:[^"]|"")*")|\t| {2,}[ \t]*')}


@dataclass(frozen=True)
class Separated:
    """A text file with one separating character; declared: how many lines at its start only name it."""

    data: bytes
    delimiter: str
    declared: int
    decisions: tuple[Decision, ...]


def find(data: bytes) -> Separated:
    """Find the separator of a text file (UTF-8, \\n line ends); runs of spaces are turned into tabs."""
    match = _DECLARED.match(data)
    if match:
        delimiter = match[1].decode()
        sentence = f"The first line names the separator ({NAMES.get(delimiter, delimiter)})."
        return Separated(data, delimiter, 1, (Decision("separator", sentence),))
    delimiter = guess(_sample(data))
    decisions = () if delimiter == "," else (_decision(delimiter),)
    if delimiter in _GAPS:
        return Separated(_tabbed(data, delimiter), "\t", 0, decisions)
    return Separated(data, delimiter, 0, decisions)


def _decision(delimiter: str) -> Decision:
    others = tuple(name for mark, name in NAMES.items() if mark != delimiter)
    return Decision("separator", f"The cells are separated by {NAMES[delimiter]}.", others)


def _sample(data: bytes) -> list[str]:
    text = data[:262144].decode("utf-8", errors="ignore")
    lines = [line for line in text.split("\n")[: _SAMPLE_LINES + 1] if line.strip()]
    if len(data) > 262144 and len(lines) > 1:
        lines.pop()  # it may have been cut
    remarks = sum(1 for _ in _leading_remarks(lines))
    return lines[remarks:] or lines


def _leading_remarks(lines: Iterable[str]) -> Iterable[str]:
    for line in lines:
        if not line.lstrip(' "').startswith("#"):
            return
        yield line


def guess(lines: Sequence[str]) -> str:
    """Return the separator that gives most lines the same number of cells; a comma where there is none."""
    scores = {mark: _consistency(lines, mark) * weight for mark, weight in _WEIGHT.items()}
    if scores[","] and _only_decimal(lines):
        rest = max(score for mark, score in scores.items() if mark != ",")
        scores[","] = scores[","] if rest < 0.5 else 0.0
    best = max(scores, key=lambda mark: scores[mark])
    return best if scores[best] > 0 else ","


def _consistency(lines: Sequence[str], mark: str) -> float:
    """The share of lines with the commonest number of cells, 0 where that is one."""
    counts = Counter(_cells(line, mark) for line in lines)
    several = {count: lines for count, lines in counts.items() if count > 1}
    if not several:
        return 0.0
    return max(several.values()) / len(lines)


def _cells(line: str, mark: str) -> int:
    if mark in _GAPS:
        line, mark = tabbed(line, mark), "\t"
    if '"' not in line:
        return line.count(mark) + 1
    return len(next(csv.reader([line], delimiter=mark, skipinitialspace=True), [""]))


def _only_decimal(lines: Sequence[str]) -> bool:
    """Whether every comma stands between two digits, as decimal commas do."""
    text = "\n".join(lines)
    return text.count(",") == len(re.findall(r"(?<=\d),(?=\d)", text))


def tabbed(line: str, mark: str) -> str:
    """Replace runs of spaces outside quotation marks by tabs."""
    return _GAPS[mark].sub(lambda match: match[1] or "\t", line.strip(" \t"))


def _tabbed(data: bytes, mark: str) -> bytes:
    return "\n".join(tabbed(line, mark) for line in data.decode("utf-8").split("\n")).encode("utf-8")
