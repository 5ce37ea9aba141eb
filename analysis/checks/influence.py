"""How much each observation weighs in the fit."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
FITTED_BY_ITSELF = 1e-9  # 1 - h below which an observation determines its own fitted value


@dataclass(frozen=True, eq=False)
class Influence:
    """Residuals and their standardised forms; every array (n,), NaN where a form is not defined."""

    residual: Floats  # response units
    leverage: Floats  # 0 to 1
    student_internal: Floats
    student_external: Floats
    cook: Floats


def influence(residual: Floats, leverage: Floats, residual_ms: float, residual_df: int, parameters: int) -> Influence:
    """Return the studentised residuals and Cook's distance of every observation.

    residual (n,) in response units, leverage (n,), residual_ms and residual_df of the model, parameters its rank. With leverage 1 the
    residual is 0 whatever the observation, so nothing is defined; without spread (residual_ms 0) likewise; the external form is not
    defined where leaving the observation out leaves no degree of freedom or a perfect fit.
    Source: Cook and Weisberg (1982), Residuals and Influence in Regression, sections 2.2 and 3.5.
    """
    free = 1 - leverage
    open_ = (free > FITTED_BY_ITSELF) & (residual_ms > 0)
    with np.errstate(divide="ignore", invalid="ignore"):
        internal = np.where(open_, residual / np.sqrt(residual_ms * free), np.nan)
        # r² / df is at most 1: the share of the residual sum of squares that goes when the observation goes.
        left = residual_df - internal**2
        defined = (residual_df > 1) & (left > FITTED_BY_ITSELF * residual_df)
        external = np.where(defined, internal * np.sqrt((residual_df - 1) / left), np.nan)
        cook = internal**2 * leverage / (parameters * free)
    return Influence(residual, leverage, internal, external, cook)
