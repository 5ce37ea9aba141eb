"""The same study on other observations: without some of them, or on another scale."""

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from analysis.design import Design, design_over
from analysis.layout import lay_out
from analysis.observations import Factor, Observations
from analysis.refusals import Refusal
from analysis.scales import Scale
from analysis.study import Study


def without(layout: Design, left_out: NDArray[np.bool_]) -> Design:
    """Return the layout without the observations marked (n,); block levels that vanish are dropped, factor levels stay."""
    kept = np.flatnonzero(~left_out)
    observed = layout.observed
    block = None if observed.block is None else _filled(observed.block.at(kept))
    smaller = replace(
        observed,
        row=observed.row.at(kept),
        column=observed.column.at(kept),
        block=block,
        offsets=observed.offsets[kept],
        file_rows=observed.file_rows[kept],
    )
    return design_over(smaller, layout.wants_interaction)


def on_scale(layout: Design, scale: Scale) -> Design | None:
    """Return the layout with the response as measured put on a scale, None where the scale cannot take a value of it."""
    measured = layout.observed.scale.back(layout.observed.values)
    if not np.isfinite(measured).all() or scale.unusable(measured).any():
        return None
    other: Observations = replace(layout.observed, scale=scale, offsets=scale.forward(measured), pivot=0.0)
    return design_over(other, layout.wants_interaction)


def put_back(study: Study, layout: Design) -> Design | None:
    """Return the layout with the rows set aside put back; None where none are, or where they bring levels of their own."""
    if not study.set_aside:
        return None
    try:
        observed = lay_out(replace(study, set_aside={}))
    except Refusal:  # the rows were set aside because they stand in the way, of a scale or of a unit: then nothing else can be compared
        return None
    same = all(one.levels == other.levels for one, other in zip(observed.factors[:2], layout.observed.factors[:2], strict=True))
    return design_over(observed, layout.wants_interaction) if same and observed.size > layout.observed.size else None


def without_interaction(layout: Design) -> Design:
    """Return the layout analysed without the interaction."""
    return replace(layout, wants_interaction=False)


def with_interaction(layout: Design) -> Design:
    """Return the layout analysed with the interaction."""
    return replace(layout, wants_interaction=True)


def _filled(block: Factor) -> Factor:
    used, codes = np.unique(block.codes, return_inverse=True)
    return replace(block, levels=tuple(block.levels[k] for k in used), codes=codes, amounts=None)
