"""Whether an additive model leaves an interaction that grows with both effects: one degree of freedom for their product."""

from collections.abc import Callable
from dataclasses import asdict, dataclass

import numpy as np
from numpy.typing import NDArray

from analysis.checks.outcomes import FTest, f_test

Floats = NDArray[np.float64]
ROUNDING = 1e-12  # a root mean square below this share of its like is rounding


@dataclass(frozen=True)
class ProductTest(FTest):
    """The F test with the sums of squares that it divides the additive residual into."""

    ss: float  # of the product, squared response units
    remainder_ss: float  # what is left, squared response units


def nonadditivity(y: Floats) -> ProductTest | None:
    """Test single values per cell for an interaction that grows with both effects.

    y is (a, b) in response units, one value per cell, none missing. Returns F with 1 and (a - 1)(b - 1) - 1 degrees of freedom; None
    where none are left (2 × 2), where a factor has no effect at all, or where the additive model fits perfectly.
    Source: Tukey (1949), Biometrics 5, 232-242.
    """

    def residuals(values: Floats) -> Floats:
        cells = values.reshape(y.shape)
        return np.asarray((cells - cells.mean(axis=1, keepdims=True) - cells.mean(axis=0) + cells.mean()).ravel(), dtype=np.float64)

    centred = y - y.mean()
    row = np.broadcast_to(centred.mean(axis=1, keepdims=True), y.shape).ravel()
    column = np.broadcast_to(centred.mean(axis=0), y.shape).ravel()
    a, b = y.shape
    return nonadditivity_general(residuals(centred), row, column, residuals, (a - 1) * (b - 1))


def nonadditivity_general(
    residual: Floats, row: Floats, column: Floats, residual_maker: Callable[[Floats], Floats], residual_df: int
) -> ProductTest | None:
    """Test an additive model, in any layout, for an interaction that grows with both effects.

    residual (n,) and residual_df are the additive model's, row and column (n,) its effects for each observation in response units (from any
    origin), and residual_maker takes values (n,) to their residuals from it. The product of the effects is added to the model; without
    blocks the square of the fitted values would give the same F. Returns F with 1 and residual_df - 1 degrees of freedom; None where none
    are left, where a factor has no effect at all, where the product is a part of the additive model, or where that model fits perfectly.
    Source: Tukey (1949), Biometrics 5, 232-242; Milliken and Graybill (1970), JASA 65, 797-807.
    """
    row, column = row - row.mean(), column - column.mean()
    sizes = [_size(row), _size(column), _size(residual)]
    if residual_df < 2 or min(sizes) <= ROUNDING * max(sizes):
        return None
    extra = residual_maker(row * column)
    if _size(extra) <= ROUNDING * sizes[0] * sizes[1]:
        return None
    slope = (residual @ extra) / (extra @ extra)
    left_over = residual - slope * extra
    if _size(left_over) <= ROUNDING * sizes[2]:
        return None
    ss, remainder = float(slope**2 * (extra @ extra)), float(left_over @ left_over)
    found = f_test(ss / remainder * (residual_df - 1), 1, residual_df - 1)
    return ProductTest(**asdict(found), ss=ss, remainder_ss=remainder)


def _size(values: Floats) -> float:
    return float(np.sqrt((values**2).mean()))
