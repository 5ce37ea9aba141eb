"""The defensible analyses of one study beside each other: each question's p-value and its largest difference."""

from collections.abc import Callable, Iterator, Mapping
from functools import partial

import numpy as np
import pandas as pd

from analysis import tails
from analysis.cells import Vector
from analysis.holding import fits, refits, unequal_spread
from analysis.holding.analysed import Analysed, Entry, ends
from analysis.holding.bases import Bases
from analysis.holding.permutation import LEAST, SIDE, permuted, side_for
from analysis.rounding import fixed
from analysis.scales import scale_named

COLUMNS = ("analysis", "term", "p", "effect", "lower", "upper", "same", "note")
AS_ANALYSED = "as analysed"
LOG, MEASURED = "log scale", "scale as measured"
LARGEST_POWER = 2.0  # beyond it nobody would analyse
MOST_BLOCKS = 50  # blocks left out one at a time
TYPES_TOLD = {
    "type_1": "Type I, the row factor first",
    "type_1_column_first": "Type I, the column factor first",
    "type_2": "Type II",
}  # Type III is the one told wherever it is defined and differs from these
Progress = Callable[[int, int], None]  # analyses done, analyses in all
Analyses = Iterator[tuple[str, Callable[[], Mapping[str, Entry]]]]


def holds(analysed: Analysed, progress: Progress | None = None) -> pd.DataFrame:
    """Return one row for each analysis and question, the analysis told first; progress is called after each analysis.

    `same` says whether the question is decided alike at the study's confidence with the difference pointing the same way; missing
    where an analysis cannot test the question.
    """
    analyses = list(_analyses(analysed))
    reference: Mapping[str, Entry] = {}
    rows = []
    for done, (name, compute) in enumerate(analyses, start=1):
        entries = compute()
        reference = reference or entries
        for term in analysed.terms:
            if term in entries:
                same = _same(entries[term], reference[term], 1 - analysed.confidence, _tells_ratios(name, analysed))
                rows.append((name, term, *vars(entries[term]).values(), same))
        if progress is not None:
            progress(done, len(analyses))
    columns = dict(zip(("analysis", "term", "p", "effect", "lower", "upper", "note", "same"), zip(*rows, strict=True), strict=True))
    numbers = {name: np.array(columns[name], dtype=float) for name in ("p", "effect", "lower", "upper")}
    same_told = {"same": np.array(columns["same"], dtype=object)}
    return pd.DataFrame({name: (columns | numbers | same_told)[name] for name in COLUMNS})


def _tells_ratios(name: str, analysed: Analysed) -> bool:
    return name == LOG or (analysed.scale.tells_ratios and name != MEASURED)


def _analyses(analysed: Analysed) -> Analyses:
    """Yield every analysis that this study allows with the way to compute it, cheap ones first."""
    yield AS_ANALYSED, lambda: fits.entries(analysed, analysed.layout, analysed.used)
    yield from _other_models(analysed)
    yield from _other_types(analysed)
    yield from _scales(analysed)
    yield from unequal_spread.analyses(analysed)
    yield from _other_rows(analysed)
    yield from _permutation(analysed)


def _other_models(analysed: Analysed) -> Analyses:
    layout = analysed.layout
    if layout.analysed.interaction and layout.connected:
        other = refits.without_interaction(layout)
        yield "without the interaction", lambda: fits.entries(analysed, other, "type_2")
    elif layout.full.residual_df > 1 and not layout.empty_cells:
        other = refits.with_interaction(layout)
        yield "with the interaction", lambda: fits.entries(analysed, other, "type_3")


def _other_types(analysed: Analysed) -> Analyses:
    """Yield the other sums of squares where they are not the same for every question."""
    if not analysed.layout.balanced:
        for kind, told in TYPES_TOLD.items():
            if kind != analysed.used:
                yield told, partial(fits.entries, analysed, analysed.layout, kind)


def _scales(analysed: Analysed) -> Analyses:
    names = {LOG: "log", MEASURED: "none"}
    rounded = _best_power(analysed)
    if rounded is not None:
        names[f"power {fixed(rounded, int(rounded % 1 > 0))} (best, rounded)"] = f"power={rounded:g}"
    for told, name in names.items():
        if name == analysed.scale.name:
            continue
        other = refits.on_scale(analysed.layout, scale_named(name))
        if other is not None:
            yield told, partial(fits.entries, analysed, other, analysed.used)


def _best_power(analysed: Analysed) -> float | None:
    """Return the best power rounded to halves; None where the scale as measured or the logarithm suits as well, or none in use does."""
    best = analysed.checks["box_cox"]
    if best is None or any(best["lower"] <= power <= best["upper"] for power in (0.0, 1.0)):
        return None
    rounded = round(2 * best["lambda"]) / 2
    return rounded if rounded not in (0.0, 1.0) and abs(rounded) <= LARGEST_POWER else None


def _other_rows(analysed: Analysed) -> Analyses:
    """Yield the analyses without the most influential observation, without each block, and with the rows set aside."""
    layout, at = analysed.layout, analysed.most_influential
    if at is not None:
        yield f"without row {layout.observed.file_rows[at]}, the most influential", lambda: _without_one(analysed, at)
    block = layout.observed.block
    for k, level in enumerate(block.levels[:MOST_BLOCKS] if block is not None and block.size > 2 else ()):
        smaller = refits.without(layout, block.codes == k) if block is not None else layout
        if smaller.analysed.residual_df > 1 and smaller.analysed.interaction == layout.analysed.interaction:
            yield f"without block {level}", partial(fits.entries, analysed, smaller, analysed.used)
    if analysed.whole is not None and analysed.whole.analysed.interaction == layout.analysed.interaction:
        yield "rows set aside put back", partial(fits.entries, analysed, analysed.whole, analysed.used)


def _without_one(analysed: Analysed, at: int) -> dict[str, Entry]:
    """Return the answers without one observation: in closed form, or by fitting again where the layout leaves an effect open."""
    if analysed.without is None:
        left_out = np.arange(analysed.layout.observed.size) == at
        return fits.entries(analysed, refits.without(analysed.layout, left_out), analysed.used)
    found = {}
    for term, told in analysed.without.items():
        half = float(tails.t_quantile((1 - analysed.confidence) / 2, told.df) * told.se[at])
        found[term] = Entry(float(told.p[at]), *ends(analysed.scale, float(told.effect[at]), half))
    return found


def _permutation(analysed: Analysed) -> Analyses:
    bases = analysed.bases
    if bases is not None and analysed.layout.analysed.residual_ms > 0:
        side = side_for(bases)
        count = f" ({fixed(side * side, 0)})" if side else ""
        yield f"permutation of residuals{count}", lambda: _permuted(analysed, bases, side)


def _permuted(analysed: Analysed, bases: Bases, side: int) -> dict[str, Entry]:
    if not side:
        why = f"Left out: {fixed(LEAST, 0)} permutations of so many observations would take too long."
        return {term: Entry(None, note=why) for term in analysed.terms}
    fewer = "" if side == SIDE else " Fewer permutations than usual, because there are many observations."
    return {
        term: Entry(
            value.p, _estimate(analysed, bases, analysed.contrasts[term]), note=f"Monte Carlo error {fixed(value.error, 4)}.{fewer}"
        )
        for term, value in permuted(bases, side).items()
    }


def _estimate(analysed: Analysed, bases: Bases, contrast: Vector) -> float:
    return ends(analysed.scale, float(contrast @ bases.cell_rows @ bases.coordinates), 0.0)[0]


def _same(entry: Entry, reference: Entry, alpha: float, ratios: bool) -> bool | None:
    if entry.p is None or reference.p is None:
        return None
    decided = entry.p < alpha
    if decided != (reference.p < alpha):
        return False
    if not decided or entry.effect is None or reference.effect is None:
        return True
    return entry.effect > (1 if ratios else 0)
