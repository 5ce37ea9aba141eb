"""By which signs a table holds means and their spread in place of the single observations."""

import re
from collections.abc import Sequence

import numpy as np

from analysis import refusals
from analysis.reading import numerals, spaces
from analysis.reading.grid_signs import SAMPLE, numeric
from analysis.reading.records import Body

_NUMBER = r"[-+\u2212]?[0-9]+(?:[.,][0-9]+)?"
_UNIT = r"(?: ?[^\W\d_%°]{1,8}| ?[%°])?"
_PLUS_MINUS = re.compile(rf"{_NUMBER}{_UNIT} ?(?:±|\+/?[-\u2212]|\+ -) ?{_NUMBER}{_UNIT}(?: ?\(?[A-Za-z*]{{1,4}}\)?)?")
_BRACKETED = re.compile(rf"{_NUMBER} ?[(\[] ?(?:s\.?[de]\.?m?\.? ?=? ?)?±? ?[0-9]+(?:[.,][0-9]+)? ?[)\]]", re.IGNORECASE)
_MEAN = r"means?|averages?|avg|mittelwert|mittel|moyenne|media|promedio|gemiddelde|medel(?:värde|v)?|lsmeans?|emmeans?|x̄"
_SPREAD = (
    r"s\.?d\.?|s\.?e\.?m?\.?|std\.?|std\.? ?(?:dev|err)\w*\.?|stdev\w*|st\.? ?dev\w*\.?|standard[ _]?(?:deviation|error)\w*|variance|cv|"
    r"standardabweichung|standardfehler|écart[- ]type|desviaci[oó]n\w*|deviazione\w*|standaardafwijking|ci|conf\w*"
)
_FURTHER = r"min\w*|max\w*|median\w*|lower|upper|lcl|ucl|df|range"
_REPEAT = r"rep|reps|replicates?|replication|repeat|block|blk|plot|pot|plant|sample|run|id|batch|tray|animal|subject"


def _named(words: str) -> re.Pattern[str]:
    return re.compile(rf"(?:^|[\W_])(?:{words})(?:$|[\W_])", re.IGNORECASE)


_IS_MEAN, _IS_SPREAD, _IS_FURTHER, _IS_REPEAT = _named(_MEAN), _named(_SPREAD), _named(_FURTHER), _named(_REPEAT)


def refuse(names: Sequence[str], body: Body) -> None:
    """Turn down a table of means and spreads; raises SummaryTable, which tells by what it was recognised."""
    samples = [tuple(map(spaces.tidy, column.slice(0, SAMPLE).to_pylist())) for column in body.columns]
    for index, (name, cells) in enumerate(zip(names, samples, strict=True)):
        pair = _pair(cells)
        if pair:
            row = int(body.rows[cells.index(pair)])
            raise refusals.SummaryTable(f"“{pair[:40]}” in column “{name[:60] or index + 1}”, row {row}")
    means = [name for name in names if _IS_MEAN.search(name) and not _IS_SPREAD.search(name)]
    spreads = [name for name in names if _IS_SPREAD.search(name)]
    if means and spreads and _is_summary(names, body, samples):
        raise refusals.SummaryTable(f"columns “{means[0][:60]}” and “{spreads[0][:60]}”, one row for each combination")


def _pair(cells: Sequence[str]) -> str:
    """The first cell with a mean and its spread, where most filled cells hold both."""
    filled = [cell for cell in cells if cell]
    pairs = [cell for cell in filled if _PLUS_MINUS.fullmatch(cell) or (_BRACKETED.fullmatch(cell) and numerals.find(cell) is None)]
    return pairs[0] if len(pairs) > 1 and 2 * len(pairs) > len(filled) else ""


def _is_summary(names: Sequence[str], body: Body, samples: Sequence[tuple[str, ...]]) -> bool:
    """Whether nothing but labels stands beside the summaries, and no combination of the labels stands on two rows.

    Replicates are no labels: where they tell the rows apart, each mean is an observation of its own.
    """
    labels = []
    for place, (name, cells) in enumerate(zip(names, samples, strict=True)):
        if _IS_MEAN.search(name) or _IS_SPREAD.search(name) or _IS_REPEAT.search(name):
            continue
        if numeric(cells) and not _IS_FURTHER.search(name) and _measures(cells):
            return False
        labels.append(place)
    if not labels:
        return False
    codes = [column.dictionary_encode().indices.to_numpy(zero_copy_only=False) for column in (body.columns[i] for i in labels)]
    return len(np.unique(np.column_stack(codes), axis=0)) == body.rows.size


def _measures(cells: Sequence[str]) -> bool:
    """Whether numbers look like measurements rather than levels: decimals, hardly any of them twice."""
    filled = [cell for cell in cells if cell]
    return 2 * len(set(filled)) > len(filled) and any("." in cell or "," in cell for cell in filled)
