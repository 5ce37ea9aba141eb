"""In which order doubts are told: the most serious first."""

from collections.abc import Callable, Sequence

from analysis.doubting import limits, one_observation, scaling, sequence, shapes, spreads
from analysis.doubting.signs import AMBER, Doubt, Signs
from analysis.doubting.spreads import Spread, spread_of

Kind = Callable[[Signs, Spread | None], Doubt | None]
# A drift also widens the spread and alike readings also make it uneven, so what is not independent comes first.
CAUSES: Sequence[Kind] = (sequence.alike_readings, sequence.drift, sequence.block_pattern)
LATER: Sequence[Kind] = (scaling.removable, one_observation.decisive, limits.depends, limits.few)


def doubts(signs: Signs) -> tuple[Doubt, ...]:
    """Return every doubt, amber before notes, and inside each the ones that bring about the others first.

    Everything but single observations is judged without those that stand far out. Where the rest then looks as it should, they are the
    problem; where shape or spread are odd even so, they are a part of it and told after it. Nothing is doubted where the model fits every
    observation.
    """
    if signs.layout.analysed.residual_ms == 0:
        return ()
    found = spread_of(signs.rest)
    causes = [kind(signs, found) for kind in CAUSES]
    forms = _forms(signs, found)
    single = one_observation.outlying(signs)
    odd = any(doubt is not None for doubt in forms)
    told = [*causes, *((*forms, single) if odd else (single, *forms)), *(kind(signs, found) for kind in LATER)]
    return tuple(sorted((doubt for doubt in told if doubt is not None), key=lambda doubt: doubt.level != AMBER))


def _forms(signs: Signs, found: Spread | None) -> tuple[Doubt | None, ...]:
    """Return the doubts about steps, spread and shape, the one that explains the others first.

    A spread that grows with the mean also makes residuals skew, and so is told before the shape; an odd shape that is left when every
    cell is brought to its own spread makes cells look uneven, and so is told before them.
    """
    shape, growing, uneven = shapes.odd_shape(signs, found), spreads.grows(signs, found), spreads.differs(signs, found)
    if growing is not None and (uneven is None or found is None or found.explained):
        return shapes.coarse(signs, found), growing, shape
    return shapes.coarse(signs, found), shape, uneven
