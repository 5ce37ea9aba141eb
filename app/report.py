"""The report of a study: methods and results that cover a reporting list item by item, with what only the user knows left blank."""

from collections.abc import Sequence

from analysis.findings import Findings
from analysis.log import Entry
from app import report_methods, report_results, sheets, speaker, words
from app.board import Board
from app.paper import Sheet
from app.report_parts import ITEMS, Part, Rows, Text, left_blank, where_stated

BLANKS = "What stands in square brackets and is marked is known to nobody but you: fill it in, or strike it out."
OPEN = "to fill in"


def report(findings: Findings, told: Sequence[Board], decisions: Sequence[Entry] = ()) -> tuple[Part, ...]:
    """Return the whole report, the list of what it covers last."""
    body = (*report_methods.methods(findings), *report_results.results(findings, told), *_log(decisions))
    return (_summary(findings), *body, _covered(body))


def title(findings: Findings) -> str:
    """Return what the report is called."""
    row, column = findings.study.factors
    return f"{words.response_in_units(findings)} by {row} and {column}"


def _summary(findings: Findings) -> Part:
    sentences = tuple(Text(f"{answer.question} {answer.sentence}") for answer in findings.answers)
    return Part("In short", (*sentences, Text(findings.holds_sentence), Text(BLANKS), Text(speaker.CAUTION)))


def _log(decisions: Sequence[Entry]) -> tuple[Part, ...]:
    if not decisions:
        return ()
    return (Part("Every decision", (Rows(sheets.decisions(decisions), "Every decision that led to these results, in order.", (30, 7)),)),)


def _covered(body: tuple[Part, ...]) -> Part:
    where, blank = where_stated(body), left_blank(body)
    rows = [(str(item), what, ", ".join(where[item]), OPEN if item in blank else "") for item, what in ITEMS.items()]
    sheet = Sheet("What is stated", ("item", "what has to be stated", "stated under", "left for you"), rows, frozenset({0, 1, 2, 3}))
    return Part(
        "What this report states", (Rows(sheet, "The reporting list, item by item (after SAMPL, ARRIVE 2.0, APA JARS-Quant and ICH E9)."),)
    )
