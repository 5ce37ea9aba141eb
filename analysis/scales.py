"""The scales on which a response can be analysed, the way there and the way back."""

import re
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from analysis.refusals import OutsideScale, SpanOutOfReach, UnknownScale

Values = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Scale:
    """One monotone change of scale: its word, what it can take, and both directions."""

    name: str
    forward: Callable[[Values], Values]
    back: Callable[[Values], Values]
    needs: str | None = None  # "positive", "not negative", or None where every number is taken
    reverses: bool = False  # larger values become smaller ones

    @property
    def is_identity(self) -> bool:
        """Return whether the response is analysed as it stands."""
        return self.name == "none"

    @property
    def tells_ratios(self) -> bool:
        """Return whether a difference on this scale is a ratio in original units."""
        return self.name == "log"

    def unusable(self, values: Values) -> NDArray[np.bool_]:
        """Return which of the values the scale cannot take."""
        if self.needs is None:
            return np.zeros(values.shape, dtype=bool)
        return values <= 0 if self.needs == "positive" else values < 0


def _power(exponent: float) -> Scale:
    needs = "positive" if exponent < 0 else "not negative"
    return Scale(f"power={exponent:g}", lambda y: y**exponent, lambda z: _root(z, exponent), needs, exponent < 0)


def _root(z: Values, exponent: float) -> Values:
    """Undo a power; beyond the power's range (an interval end below zero) there is no original value."""
    with np.errstate(divide="ignore", invalid="ignore"):
        root: Values = np.where(z >= 0, np.abs(z) ** (1.0 / exponent), np.nan)
    return np.where(np.isfinite(root), root, np.nan)


def _reciprocal_back(z: Values) -> Values:
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.where(z > 0, 1.0 / z, np.nan)


NAMED = {
    "none": Scale("none", lambda y: y, lambda z: z),
    "log": Scale("log", np.log, np.exp, "positive"),
    "sqrt": Scale("sqrt", np.sqrt, lambda z: np.where(z >= 0, z * z, np.nan), "not negative"),
    "reciprocal": Scale("reciprocal", lambda y: 1.0 / y, _reciprocal_back, "positive", reverses=True),
}


def scale_named(text: str) -> Scale:
    """Return the scale that a choice such as "log" or "power=0.5" names.

    Raises UnknownScale for any other text, and for a power of zero (whose limit is the log scale).
    """
    if text in NAMED:
        return NAMED[text]
    match = re.fullmatch(r"power=([-+]?\d*\.?\d+(?:[eE][-+]?\d+)?)", text.strip())
    if match is None or float(match.group(1)) == 0:
        raise UnknownScale(text)
    return _power(float(match.group(1)))


def transformed(scale: Scale, values: Values, response: str, file_rows: NDArray[np.int64] | NDArray[np.int32]) -> Values:
    """Return the values on the scale; raise OutsideScale with the rows that it cannot take, SpanOutOfReach where one overflows."""
    bad = scale.unusable(values)
    if bad.any():
        raise OutsideScale(response, scale.name, str(scale.needs), tuple(int(r) for r in file_rows[bad]))
    with np.errstate(over="ignore"):
        on_scale = scale.forward(values)
    if not np.isfinite(on_scale).all():
        raise SpanOutOfReach(response, scale.name)
    return on_scale
