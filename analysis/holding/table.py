"""The defensible analyses of one study beside each other: each question's p-value and its largest difference."""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from functools import cached_property, partial
from typing import Any

import numpy as np
import pandas as pd
from scipy import stats

from analysis import anova
from analysis.anova import INTERACTION, Names
from analysis.cells import Vector
from analysis.design import Design
from analysis.holding import refits, welch
from analysis.holding.bases import Bases, bases_of
from analysis.holding.hypotheses import hypotheses, largest_contrasts
from analysis.holding.permutation import PERMUTATIONS, permuted
from analysis.scales import Scale, scale_named

COLUMNS = ("analysis", "term", "p", "effect", "lower", "upper", "same", "note")
AS_ANALYSED = "as analysed"
LOG, MEASURED = "log scale", "scale as measured"
MOST_ENTRIES = 2_000_000  # entries of the questions' directions beyond which permutation takes no part
MOST_BLOCKS = 50  # blocks left out one at a time
TYPES_TOLD = {
    "type_1": "Type I, the row factor first",
    "type_1_column_first": "Type I, the column factor first",
    "type_2": "Type II",
    "type_3": "Type III",
}
Progress = Callable[[int, int], None]  # analyses done, analyses in all


@dataclass(frozen=True)
class Entry:
    """What one analysis says of one question: effects in response units, or a ratio where a log scale is analysed."""

    p: float | None
    effect: float | None = None
    lower: float | None = None
    upper: float | None = None
    note: str = ""


@dataclass(frozen=True, eq=False)
class Analysed:
    """The analysis that the others are held against."""

    layout: Design
    names: Names
    used: str  # the type of table that the answers read
    tables: Mapping[str, pd.DataFrame]
    checks: Mapping[str, Any]
    confidence: float

    @property
    def terms(self) -> tuple[str, ...]:
        """The questions, the interaction first where it is analysed."""
        factors = (self.names.row, self.names.column)
        return (INTERACTION, *factors) if self.layout.analysed.interaction else factors

    @cached_property
    def contrasts(self) -> Mapping[str, Vector]:
        """The weights over cells of the difference that every analysis tells."""
        return largest_contrasts(self.layout, self.names)

    @cached_property
    def bases(self) -> Bases | None:
        """The questions' hypotheses, None where the layout leaves an effect open or is too large."""
        strata = self.layout.strata
        return bases_of(self.layout, self.names) if strata.n.size * self.layout.analysed.parameters <= MOST_ENTRIES else None


def holds(analysed: Analysed, progress: Progress | None = None) -> pd.DataFrame:
    """Return one row for each analysis and question, the analysis told first; progress is called after each analysis.

    `same` says whether the question is decided alike at the study's confidence with the difference pointing the same way; missing
    where an analysis cannot test the question.
    """
    analyses = _analyses(analysed)
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
    frame = pd.DataFrame(rows, columns=["analysis", "term", "p", "effect", "lower", "upper", "note", "same"])
    return frame[list(COLUMNS)].astype(dict.fromkeys(("p", "effect", "lower", "upper"), float))


def _tells_ratios(name: str, analysed: Analysed) -> bool:
    scale = analysed.layout.observed.scale
    return name == LOG or (scale.tells_ratios and name != MEASURED)


def _analyses(analysed: Analysed) -> list[tuple[str, Callable[[], Mapping[str, Entry]]]]:
    """Return every analysis that this study allows with the way to compute it, cheap ones first."""
    return [
        (AS_ANALYSED, lambda: _from_table(analysed, analysed.layout, analysed.used)),
        *_other_models(analysed),
        *_other_types(analysed),
        *_scales(analysed),
        *_unequal_spread(analysed),
        *_less_data(analysed),
        *_permutation(analysed),
    ]


Analyses = Iterator[tuple[str, Callable[[], Mapping[str, Entry]]]]


def _from_table(analysed: Analysed, layout: Design, kind: str) -> dict[str, Entry]:
    """Return the entries of a least-squares fit with tests of one type."""
    parts = {part.term: part for part in anova.parts(layout.analysed, analysed.names, kind)}
    entries = {}
    for term in analysed.terms:
        if term in parts:
            effect = _effect(analysed, layout, analysed.contrasts[term])
            entries[term] = Entry(_p(parts[term], layout), *effect)
    return entries


def _p(part: anova.Part, layout: Design) -> float | None:
    model = layout.analysed
    if not part.df or part.ss is None or model.residual_df < 1 or model.residual_ms == 0:
        return None
    return float(stats.f.sf(part.ss / part.df / model.residual_ms, part.df, model.residual_df))


def _effect(analysed: Analysed, layout: Design, weights: Vector) -> tuple[float | None, float | None, float | None]:
    """Return the difference with its interval; nothing where it is not estimable or has no unit to be told in."""
    model, scale = layout.analysed, layout.observed.scale
    told = model.cells.combined(weights[None])
    if not told.estimable[0] or not (scale.tells_ratios or scale.is_identity or scale.name == analysed.layout.observed.scale.name):
        return None, None, None
    half = model.quantile(analysed.confidence) * float(np.sqrt(model.residual_ms * told.unit_variance[0]))
    return _ends(scale, float(told.value[0]), half)


def _ends(scale: Scale, value: float, half: float) -> tuple[float, float, float]:
    ends = (value, value - half, value + half)
    return tuple(float(np.exp(end)) for end in ends) if scale.tells_ratios else ends  # type: ignore[return-value]


def _other_models(analysed: Analysed) -> Analyses:
    layout = analysed.layout
    if layout.analysed.interaction and layout.connected:
        other = refits.without_interaction(layout)
        yield "without the interaction", lambda: _from_table(analysed, other, "type_2")
    elif layout.full.residual_df > 1 and not layout.empty_cells:
        other = refits.with_interaction(layout)
        yield "with the interaction", lambda: _from_table(analysed, other, "type_3")


def _other_types(analysed: Analysed) -> Analyses:
    """Yield the other sums of squares where they are not the same for every question."""
    if analysed.layout.balanced:
        return
    for kind, told in TYPES_TOLD.items():
        table = analysed.tables[kind]
        defined = all(anova.is_defined(table, term) for term in (analysed.names.row, analysed.names.column))
        if kind != analysed.used and defined and (kind != "type_3" or analysed.layout.analysed.interaction):
            yield told, partial(_from_table, analysed, analysed.layout, kind)


def _scales(analysed: Analysed) -> Analyses:
    names = {LOG: "log", MEASURED: "none"}
    best = analysed.checks["box_cox"]
    rounded = None if best is None else round(2 * best["lambda"]) / 2
    if rounded is not None and rounded not in (0.0, 1.0):
        names[f"power {rounded:g}, the best one rounded"] = f"power={rounded:g}"
    for told, name in names.items():
        if name == analysed.layout.observed.scale.name:
            continue
        other = refits.on_scale(analysed.layout, scale_named(name))
        if other is not None:
            yield told, partial(_from_table, analysed, other, analysed.used)


def _unequal_spread(analysed: Analysed) -> Analyses:
    robust = analysed.checks["hc3"].set_index("term")["p"]
    if robust.notna().any():
        yield "unequal spread allowed (HC3)", lambda: _hc3_entries(analysed, robust)
    layout = analysed.layout
    if layout.analysed.interaction and not layout.strata.has_blocks and layout.cells.n.min() > 1 and np.all(layout.cells.sd > 0):
        yield "unequal spread allowed (ANOVA-type statistic)", lambda: _welch_entries(analysed)


def _hc3_entries(analysed: Analysed, robust: "pd.Series[float]") -> dict[str, Entry]:
    return {
        term: Entry(float(robust[term]), *_own_spread_effect(analysed, term, inflated=True))
        for term in analysed.terms
        if pd.notna(robust[term])
    }


def _welch_entries(analysed: Analysed) -> dict[str, Entry]:
    cells = analysed.layout.cells
    tests = hypotheses(analysed.layout.observed.shape, analysed.names)
    means, variances, n = cells.mean.ravel(), cells.sd.ravel() ** 2, cells.n.ravel().astype(float)
    means = means - means.mean()
    return {
        term: Entry(welch.anova_type_p(means, variances, n, tests[term]), *_own_spread_effect(analysed, term, inflated=False))
        for term in analysed.terms
    }


def _own_spread_effect(analysed: Analysed, term: str, *, inflated: bool) -> tuple[float | None, float | None, float | None]:
    """Return the difference with an interval from the cells' own spreads: HC3 variances, or Welch's with Satterthwaite's df.

    Source: Satterthwaite (1946), Biometrics Bulletin 2, 110-114; HC3 in a cell is SS n² / (n - 1)² / n².
    """
    layout, weights = analysed.layout, analysed.contrasts[term]
    n, sd = layout.cells.n.ravel(), layout.cells.sd.ravel()
    if layout.strata.has_blocks or not layout.analysed.interaction:
        return _effect(analysed, layout, weights)[0], None, None
    used = weights != 0
    share = weights[used] ** 2 * sd[used] ** 2 / (n[used] - (1 if inflated else 0))
    df = layout.analysed.residual_df if inflated else float(share.sum() ** 2 / np.sum(share**2 / (n[used] - 1)))
    half = float(stats.t.isf((1 - analysed.confidence) / 2, df) * np.sqrt(share.sum()))
    return _ends(layout.observed.scale, float(layout.analysed.cells.combined(weights[None]).value[0]), half)


def _less_data(analysed: Analysed) -> Analyses:
    layout, frame = analysed.layout, analysed.checks["influence"]
    cook = frame["cook"].to_numpy(float)
    if np.isfinite(cook).any() and layout.analysed.residual_df > 2:
        at = int(np.nanargmax(cook))
        yield (
            f"without row {frame['row'].iloc[at]}, the most influential",
            lambda: _from_table(analysed, refits.without(layout, np.arange(cook.size) == at), analysed.used),
        )
    block = layout.observed.block
    for k, level in enumerate(block.levels[:MOST_BLOCKS] if block is not None and block.size > 2 else ()):
        smaller = refits.without(layout, block.codes == k) if block is not None else layout
        if smaller.analysed.residual_df > 1 and smaller.analysed.interaction == layout.analysed.interaction:
            yield f"without block {level}", partial(_from_table, analysed, smaller, analysed.used)


def _permutation(analysed: Analysed) -> Analyses:
    if analysed.bases is not None and analysed.layout.analysed.residual_ms > 0 and analysed.used != "type_1":
        yield f"permutation of residuals ({PERMUTATIONS:,})".replace(",", "\u202f"), lambda: _permuted_entries(analysed)


def _permuted_entries(analysed: Analysed) -> dict[str, Entry]:
    found = permuted(analysed.bases) if analysed.bases is not None else {}
    return {
        term: Entry(
            value.p, _effect(analysed, analysed.layout, analysed.contrasts[term])[0], None, None, f"Monte Carlo error {value.error:.4f}"
        )
        for term, value in found.items()
    }


def _same(entry: Entry, reference: Entry, alpha: float, ratios: bool) -> bool | None:
    if entry.p is None or reference.p is None:
        return None
    decided = entry.p < alpha
    if decided != (reference.p < alpha):
        return False
    if not decided or entry.effect is None or reference.effect is None:
        return True
    return entry.effect > (1 if ratios else 0)
