"""What a doubt looks at: the residuals of the model analysed with where and in what order they were seen."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis import tails
from analysis.cells import Vector
from analysis.design import Design

AMBER, NOTE = "amber", "note"


@dataclass(frozen=True)
class Doubt:
    """One doubt: what kind, how serious, one or two sentences, and the file rows it is about."""

    kind: str
    level: str  # "amber" or "note"
    sentence: str
    rows: tuple[int, ...] = ()


@dataclass(frozen=True, eq=False)
class Signs:
    """The residuals (n,) of one study on the analysed scale, and the checks made on them."""

    layout: Design
    observations: pd.DataFrame
    checks: Mapping[str, Any]
    holds: pd.DataFrame

    @cached_property
    def residual(self) -> Vector:
        """Observed minus fitted."""
        return np.asarray(self.observations["residual"].to_numpy(float))

    @cached_property
    def student(self) -> Vector:
        """Externally studentised residuals, NaN where not defined."""
        return np.asarray(self.checks["influence"]["student_external"].to_numpy(float))

    @cached_property
    def file_rows(self) -> NDArray[np.int64]:
        """Row of each observation in the file."""
        return np.asarray(self.observations["file_row"].to_numpy(np.int64))

    @property
    def n(self) -> int:
        """Number of observations."""
        return int(self.residual.size)

    @cached_property
    def outlying_p(self) -> float:
        """Bonferroni p-value of the farthest observation; 1 where none is defined.

        Source: Cook and Weisberg (1982), Residuals and Influence in Regression, section 2.2.2.
        """
        df = self.layout.analysed.residual_df - 1
        if df < 1 or not np.isfinite(self.student).any():
            return 1.0
        return float(min(1.0, self.n * tails.t_two_sided(np.nanmax(np.abs(self.student)), df)))

    @cached_property
    def farthest(self) -> int:
        """Index of the observation that lies farthest from what the others lead one to expect."""
        return int(np.nanargmax(np.abs(self.student)))
