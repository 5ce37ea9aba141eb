"""Where the levels of a factor stand along an axis: at equal steps, or as far apart as their amounts are."""

from dataclasses import dataclass

import numpy as np

from analysis.findings import Findings
from app.figures import placing

EQUAL, TRUE, LOGARITHMIC = "equal steps", "true spacing", "logarithmic spacing"
NEAREST = 0.12  # of a mean step; levels nearer than that would cover each other


@dataclass(frozen=True, eq=False)
class Along:
    """Places of a factor's levels, a mean step being 1, the first level at 0."""

    places: placing.Positions
    spacing: str
    amounts: bool = False  # whether the levels are amounts, even where they stand at equal steps

    @property
    def step(self) -> float:
        """The smallest distance of two neighbours, at most 1."""
        return float(min(np.diff(self.places).min(initial=1.0), 1.0))

    @property
    def told(self) -> str:
        """What the caption says of the spacing; nothing where levels are names."""
        if not self.amounts:
            return ""
        return {
            TRUE: " Levels stand as far apart as their amounts.",
            LOGARITHMIC: " Amounts stand on a logarithmic axis: equal steps are equal ratios.",
            EQUAL: " Amounts stand at equal steps, since the nearest would cover each other.",
        }[self.spacing]


def along(findings: Findings, factor: str) -> Along:
    """Return where the levels of a factor stand: at true spacing where they are amounts, as long as no two cover each other."""
    count = findings.observed.factor(factor).size
    equal = np.arange(count, dtype=np.float64)
    amounts = findings.spacing(factor)
    values = np.asarray(amounts or (), dtype=np.float64)
    if count < 2 or values.size < count or not (np.diff(values) > 0).all():  # names, or amounts that somebody put in another order
        return Along(equal, EQUAL)
    ways = [(TRUE, values), *([(LOGARITHMIC, np.log10(values))] if (values > 0).all() else [])]
    for spacing, at in ways:
        places = (at - at[0]) / (at[-1] - at[0]) * (count - 1)
        if np.diff(places).min() >= NEAREST:
            return Along(places, spacing, amounts=True)
    return Along(equal, EQUAL, amounts=True)
