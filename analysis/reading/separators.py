"""Which character separates the cells of a text file."""

import csv
import re
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from analysis.reading.choices import SEPARATORS, Reading
from analysis.table import Alternative, Decision

_WEIGHT = {"\t": 1.0, ";": 0.99, "|": 0.98, ",": 0.97, "  ": 0.85, " ": 0.75}  # at equal consistency the surer sign wins
_DECLARED = re.compile(rb"(?:\"?sep=(.)\"?)[ ,;\t]*(?:\n|$)", re.IGNORECASE)
_SAMPLE_LINES = 200
_LONGEST = 100_000  # characters of a line looked at; a cell beyond would stop the parser
_OFTEN = 0.5  # share of lines that a separator cuts alike from which it is offered
_GAPS = {" ": re.compile(r'("(?:[^"]|"")*")|[ \t]+'), "  ": re.compile(r'("(?:[^"]|"")*")|\t| {2,}[ \t]*')}


@dataclass(frozen=True)
class Separated:
    """A text file with one separating character; declared: how many lines at its start only name it."""

    data: bytes
    delimiter: str
    declared: int
    decision: Decision


def find(data: bytes, reading: Reading) -> Separated:
    """Find the separator of a text file (UTF-8, \\n line ends), unless one was asked for; runs of spaces are turned into tabs."""
    declared = _DECLARED.match(data)
    lines = _sample(data)
    found = declared[1].decode() if declared else guess(lines)
    delimiter = next((mark for mark, name in SEPARATORS.items() if name == reading.separator), found)
    decision = Decision(
        "separator",
        f"The first line names the separator ({_name(found)})." if declared else f"The cells are separated by {_name(delimiter)}.",
        _alternatives(delimiter, found, lines, reading),
        ordinary=reading.separator is not None or (delimiter == "," and not declared),
    )
    if delimiter in _GAPS:
        data, delimiter = _tabbed(data, delimiter), "\t"
    return Separated(data, delimiter, int(declared is not None), decision)


def _name(mark: str) -> str:
    return SEPARATORS.get(mark, mark)


def _alternatives(delimiter: str, found: str, lines: Sequence[str], reading: Reading) -> tuple[Alternative, ...]:
    """The separators that would give several cells at least; the one found of itself is that of no request."""
    marks = [mark for mark in SEPARATORS if mark == found or _consistency(lines, mark) >= _OFTEN]
    marks += [found] if found not in SEPARATORS else []
    return tuple(
        Alternative(_name(mark), replace(reading, separator=None if mark == found else SEPARATORS[mark]))
        for mark in marks
        if mark != delimiter
    )


def _sample(data: bytes) -> list[str]:
    text = data[:262144].decode("utf-8", errors="ignore")
    lines = [line[:_LONGEST] for line in text.split("\n")[: _SAMPLE_LINES + 1] if line.strip()]
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
