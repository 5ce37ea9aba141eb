"""How a question and its answer are written out: what is compared, within how large a family, and what it came to."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Any

import pandas as pd

from analysis import families, trends, verdicts
from analysis.findings import Findings
from analysis.naming import word_and_unit
from analysis.rounding import p_number, p_value, percent, significant
from app import answers_told, asking, records, tabled, words
from app.asking import Asked
from app.paper import Sheet

FAMILY, WITHIN, CELLS = "What is compared", "Within", "Which combinations"
ALL = "every one, each adjusted on its own"
CONTROL = "Against"
CHOSEN = "two combinations, or four of a block"
HOW_TO_POINT = (
    "Point at a head to compare within it, at a factor’s name to compare its levels, at two cells for their difference, "
    "at four cells of a block for the difference of differences."
)
NEXT_CELL = ("Point at two cells.", "Point at a second cell.", "", "Point at the fourth corner of the block.", "")
ALONE = "one comparison, asked on its own"
ALONE_MEANS = "Asked on its own, so nothing is adjusted for: the p-value holds if the question was meant before the data were seen."
EXPLAINED: Mapping[str, str] = MappingProxyType(
    {
        "tukey": "Tukey-Kramer: the chance of one false difference among all pairs of the family is held.",
        "holm": "Holm: the same chance is held, step by step; the intervals are Bonferroni’s, a little wider than the tests need.",
        "bonferroni": "Bonferroni: each p is multiplied by the size of the family; safe, and wider than needed for many pairs.",
        "sidak": "Šidák: as Bonferroni, a little less wide.",
        "scheffe": "Scheffé: holds for every contrast one might think of after seeing the data, and so has the widest intervals.",
        "dunnett": "Dunnett: each level against the control only, so fewer comparisons and narrower intervals.",
        "none": "Not adjusted: each comparison stands alone; among many, some will differ by chance.",
    }
)
DECIDED = (verdicts.LARGER, verdicts.DIFFERS, verdicts.SMALL)
PARTS: Mapping[str, str] = MappingProxyType(
    {
        trends.LINEAR: "straight trend", trends.QUADRATIC: "curvature", trends.DEPARTURE: "what is left beyond a curve",
        trends.DIFFER: "whether the slopes differ",
    }
)  # fmt: skip


def family(findings: Findings, name: str) -> str:
    """Return how the selector names a question."""
    if name == asking.CHOSEN:
        return CHOSEN
    if name.startswith(asking.TREND):
        return f"trend along {name.removeprefix(asking.TREND)}"
    return words.family(name, findings.study.factors)


def cell(findings: Findings, place: asking.Cell) -> str:
    """Return the name of a cell."""
    return f"{findings.design['row_levels'][place[0]]}, {findings.design['column_levels'][place[1]]}"


def question(findings: Findings, asked: Asked, frame: pd.DataFrame | None) -> str:
    """Return the question asked, in words."""
    if asked.family == asking.CHOSEN:
        return _chosen(asked, frame)
    if asked.family.startswith(asking.TREND):
        return f"How {findings.observed.word} follows {findings.observed.factor(asked.family.removeprefix(asking.TREND)).word}"
    against = _against(findings, asked)
    if asked.within is None:
        return f"{words.family(asked.family, findings.study.factors)}{against}"
    return f"Within {asked.within}: {asking.factor_of(findings, asked)}{against}"


def _against(findings: Findings, asked: Asked) -> str:
    """Return the control that each level is compared with, where comparisons are made with one."""
    factor = asking.factor_of(findings, asked)
    if findings.control is None or factor is None:
        return ""
    return f", each against {findings.observed.factor(factor).levels[findings.control[factor]]}"


def _chosen(asked: Asked, frame: pd.DataFrame | None) -> str:
    if frame is None or frame.empty:
        return "Combinations"
    line = next(records.lines(frame))
    left, right = words.cell_name(line.left), words.cell_name(line.right)
    if len(asked.cells) == asking.MOST_CELLS:
        return f"Difference of differences: {line.within}, with {left} against with {right}"
    return f"{f'Within {line.within}: ' if isinstance(line.within, str) else ''}{left} against {right}"


def family_told(findings: Findings, asked: Asked, frame: pd.DataFrame) -> str:
    """Return how large the family is and how it is adjusted."""
    size = sorted({int(n) for n in frame["family_size"]})
    if size == [1]:
        return ALONE if asked.family == asking.CHOSEN else words.counted(1, "comparison")
    counted = f"{' or '.join(str(n) for n in size)} comparisons"
    one = "one of " if len(frame) == 1 else ""
    each = " in each slice" if frame["within"].nunique() > 1 else ""
    return f"{one}{counted}{each}, adjusted together ({words.adjusted_by(findings)})"


def answer(findings: Findings, asked: Asked, frame: pd.DataFrame) -> tuple[str, str, str]:
    """Return the sentence of the answer, the numbers beneath it, and how it stands."""
    known = frame[frame["difference"].notna()]
    if known.empty:
        return "Cannot be told: no observations stand behind this difference.", "", answers_told.OPEN
    decided = known[known["verdict"].isin(DECIDED)]
    largest = next(records.lines(known.loc[[known["t"].abs().fillna(0).idxmax()]]))
    if len(known) == 1:
        sentence = _block(largest) if len(asked.cells) == asking.MOST_CELLS else _single(largest)
    elif len(decided):
        sentence = f"{len(decided)} of {len(known)} comparisons differ{_rest(known)}."
    elif (known["verdict"] == verdicts.NONE_THAT_MATTERS).all():
        sentence = f"No difference that matters in any of the {len(known)} comparisons."
    else:
        sentence = f"Not decided: none of the {len(known)} comparisons excludes {_nothing(findings)}{_rest(known)}."
    clearest = "" if len(known) == 1 else "clearest: " if known["within"].nunique() < 2 else f"clearest, within {largest.within}: "
    return sentence, f"{clearest}{told(findings, largest)}", standing(known)


def standing(known: pd.DataFrame) -> str:
    """Return how an answer stands: decided where something differs by enough, small where all is known not to matter, else open."""
    standings = {answers_told.standing_of(verdict) for verdict in known["verdict"]}
    return (
        answers_told.DECIDED
        if answers_told.DECIDED in standings
        else answers_told.SMALL
        if standings == {answers_told.SMALL}
        else answers_told.OPEN
    )


def _rest(known: pd.DataFrame) -> str:
    """Return how many of the comparisons that do not differ are known not to matter, and how many are open."""
    small, still = (int((known["verdict"] == verdict).sum()) for verdict in (verdicts.NONE_THAT_MATTERS, verdicts.UNDECIDED))
    return (
        f"; {small} {'shows' if small == 1 else 'show'} no difference that matters, {still} {'is' if still == 1 else 'are'} not decided"
        if small
        else ""
    )


def _nothing(findings: Findings) -> str:
    return "one" if findings.observed.scale.tells_ratios else "zero"


def _block(line: Any) -> str:
    """Return the sentence on one difference of differences."""
    where = f"with {line.left} and with {line.right}"
    sentences = {
        verdicts.LARGER: f"{line.within} is not the same {where}, by more than what matters.",
        verdicts.DIFFERS: f"{line.within} is not the same {where}.",
        verdicts.SMALL: f"{line.within} is not quite the same {where}, but by too little to matter.",
        verdicts.NONE_THAT_MATTERS: f"{line.within} is the same {where}, to within what matters.",
        verdicts.UNDECIDED: f"Not decided whether {line.within} is the same {where}.",
    }
    return sentences[line.verdict]


def _single(line: Any) -> str:
    """Return the sentence on one difference."""
    what = f"{words.cell_name(line.left)} and {words.cell_name(line.right)}"
    sentences = {
        verdicts.LARGER: f"{what} differ, by more than what matters.",
        verdicts.DIFFERS: f"{what} differ.",
        verdicts.SMALL: f"{what} differ, but by too little to matter.",
        verdicts.NONE_THAT_MATTERS: f"No difference that matters between {what}.",
        verdicts.UNDECIDED: f"Not decided whether {what} differ.",
    }
    return sentences[line.verdict]


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]


def told(findings: Findings, line: Any) -> str:
    """Return one comparison with its size, interval and adjusted p."""
    scale = findings.observed.scale
    unit = f" {findings.observed.unit}" if scale.is_identity and findings.observed.unit else ""
    pair = tabled.pair(line.left, line.right, scale.tells_ratios)
    size = tabled.size(line).replace(" (", f"{unit} (", 1)
    return f"{pair} = {size}, {p_value(line.p_adjusted)}"


def explained(findings: Findings, frame: pd.DataFrame) -> str:
    """Return what the adjustment of these comparisons holds, and what it costs."""
    if set(frame["family_size"]) == {1}:
        return ALONE_MEANS
    price = families.price(frame)
    if price is None or findings.study.adjust == "none":
        return EXPLAINED[findings.study.adjust]
    one_by_one = f"Intervals are {significant(price.wider)} times as wide as one by one"
    lost = f", and {words.counted(price.lost, 'comparison')} that would differ taken alone {'is' if price.lost == 1 else 'are'} left open"
    return f"{EXPLAINED[findings.study.adjust]} {one_by_one}{lost if price.lost else ''}."


def changed(now: Findings, before: Findings, asked: Asked) -> str:
    """Return what changing the adjustment did to the question asked; nothing where it could not be asked before."""
    if asking.valid(before, asked) != asked:
        return ""
    frames = [asking.compared(findings, asked) for findings in (before, now)]
    if any(frame is None for frame in frames):
        return ""
    differ = [
        f"{int(frame['verdict'].isin(DECIDED).sum())} of {int(frame['difference'].notna().sum())}" for frame in frames if frame is not None
    ]
    return f"Changed from {words.adjusted_by(before)}, with which {differ[0]} differed; now {differ[1]}."


def trend(findings: Findings, asked: Asked) -> Sheet:
    """Return the table of a trend: slope and curvature on average and within each level of the other factor."""
    columns = ("part", "within", "estimate", f"{percent(findings.study.confidence)} interval", "df", "F", "p")
    rows = [
        (
            PARTS[str(t.part)],
            t.within if isinstance(t.within, str) else "on average" if t.part != trends.DIFFER else "between levels",
            significant(t.estimate) if pd.notna(t.estimate) else "",
            f"{significant(t.lower)} to {significant(t.upper)}" if pd.notna(t.lower) else "",
            f"{int(t.df)}, {int(t.residual_df)}" if pd.notna(t.residual_df) else "",
            significant(t.f),
            p_number(t.p),
        )
        for t in records.lines(asking.trend(findings, asked))
    ]
    return Sheet("Trend", columns, rows, frozenset({0, 1}))


def trend_answer(findings: Findings, asked: Asked) -> tuple[str, str, str]:
    """Return the sentence on the trend over the average, the numbers beneath it, and how it stands."""
    on_average = {str(t.part): t for t in records.lines(asking.trend(findings, asked)) if not isinstance(t.within, str)}
    straight, bend = on_average[trends.LINEAR], on_average.get(trends.QUADRATIC)
    name = asked.family.removeprefix(asking.TREND)
    factor, response = findings.observed.factor(name).word, findings.observed.word
    if pd.isna(straight.lower):
        return "Cannot be told: the average over the other factor cannot be estimated.", "", answers_told.OPEN
    numbers = f"{significant(straight.estimate)}{_per(findings, name)} ({significant(straight.lower)} to {significant(straight.upper)})"
    beneath = f"on average {numbers}, {p_value(straight.p)} · each line of the table asked on its own, not adjusted"
    curved = bend is not None and pd.notna(bend.lower) and not bend.lower <= 0 <= bend.upper
    if straight.lower <= 0 <= straight.upper:
        only = f"{_capital(response)} bends along {factor}, with no straight trend shown." if curved else ""
        return (
            only or f"Not decided: no trend of {response} along {factor} is shown.",
            beneath,
            (answers_told.DECIDED if curved else answers_told.OPEN),
        )
    way = "rises" if (straight.estimate > 0) != findings.observed.scale.reverses else "falls"
    return f"{_capital(response)} {way} with {factor}{', along a curve' if curved else ''}.", beneath, answers_told.DECIDED


def _per(findings: Findings, factor: str) -> str:
    """Return the units of a slope."""
    scale, along = findings.observed.scale, word_and_unit(factor)[1] or findings.study.table.column(factor).unit
    unit = (
        f" {findings.observed.unit or ''}".rstrip()
        if scale.is_identity
        else f" on the scale analysed ({words.scale_name(scale.name).lower()})"
    )
    return f"{unit} per {along or f'unit of {factor}'}"
