"""What a least-squares fit says of each question: its tests of one type, and the one difference told for every analysis."""

import numpy as np

from analysis import anova, tails
from analysis.cells import Vector
from analysis.design import Design
from analysis.holding.analysed import Analysed, Entry, ends

Told = tuple[float | None, float | None, float | None]  # a difference and its interval


def entries(analysed: Analysed, layout: Design, kind: str) -> dict[str, Entry]:
    """Return the entries of a layout fitted with tests of one type."""
    parts = {part.term: part for part in anova.parts(layout.analysed, analysed.names, kind)}
    return {
        term: Entry(_p(parts[term], layout), *effect(analysed, layout, analysed.contrasts[term]))
        for term in analysed.terms
        if term in parts
    }


def _p(part: anova.Part, layout: Design) -> float | None:
    model = layout.analysed
    if not part.df or part.ss is None or model.residual_df < 1 or model.residual_ms == 0:
        return None
    return float(tails.f_upper(part.ss / part.df / model.residual_ms, part.df, model.residual_df))


def effect(analysed: Analysed, layout: Design, weights: Vector) -> Told:
    """Return the difference with its interval; nothing where it is not estimable or has no unit to be told in."""
    model, scale = layout.analysed, layout.observed.scale
    told = model.cells.combined(weights[None])
    if not told.estimable[0] or not (scale.tells_ratios or scale.is_identity or scale.name == analysed.scale.name):
        return None, None, None
    half = model.quantile(analysed.confidence) * float(np.sqrt(model.residual_ms * told.unit_variance[0]))
    return ends(scale, float(told.value[0]), half)
