"""The defensible analyses beside each other as a table of text: one row an analysis, one column a question."""

from typing import Any

from analysis.anova import INTERACTION
from analysis.findings import Findings
from analysis.rounding import NOT_KNOWN, measured, p_number, significant
from app import doubt_words, records
from app.paper import Sheet

OTHERWISE = "otherwise: "


def sheet(findings: Findings) -> Sheet:
    """Return the table; an answer that is decided otherwise, or points the other way, is marked in words."""
    terms = [term for term in (INTERACTION, *findings.study.factors) if term in set(findings.holds["term"])]
    told: dict[str, dict[str, str]] = {}
    for line in records.lines(findings.holds):
        told.setdefault(str(line.analysis), {})[str(line.term)] = _entry(findings, line)
    rows = [(name, *(found.get(term, NOT_KNOWN) for term in terms)) for name, found in told.items()]
    return Sheet(doubt_words.HOLDS, ("analysis", *terms), rows)


def _entry(findings: Findings, line: Any) -> str:
    mark = OTHERWISE if line.same is False else ""
    return f"{mark}{p_number(line.p)}{_effect(findings, line)}"


def _effect(findings: Findings, line: Any) -> str:
    """Return the difference with its interval, in the digits that the interval supports."""
    if line.effect is None or line.effect != line.effect:
        return ""
    spread = (line.upper - line.lower) / 4 if line.upper == line.upper else findings.fit["sigma"] / 4
    if line.analysis == "log scale" or findings.observed.scale.tells_ratios:
        ends = f" ({significant(line.lower)} to {significant(line.upper)})" if line.upper == line.upper else ""
        return f"; × {significant(line.effect)}{ends}"
    ends = f" ({measured(line.lower, spread)} to {measured(line.upper, spread)})" if line.upper == line.upper else ""
    return f"; {measured(line.effect, spread)}{ends}"


def notes(findings: Findings) -> str:
    """Return what is to be known of single analyses, such as the Monte Carlo error of the permutations."""
    found: dict[str, list[str]] = {}
    for line in records.lines(findings.holds):
        if line.note:
            found.setdefault(str(line.analysis), []).append(str(line.note).rstrip("."))
    return " ".join(f"{name[0].upper()}{name[1:]}: {'; '.join(dict.fromkeys(lines))}." for name, lines in found.items())


def compared(findings: Findings) -> tuple[str, ...]:
    """Return the three answers in a line each, for putting two studies side by side."""
    return tuple(f"{told.sentence} {told.statistic}" for told in findings.answers)
