"""Estimates with the covariance they share, and which of their combinations the layout lets one estimate."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from analysis.cells import Matrix, Vector

FREE_TOLERANCE = 1e-8  # a combination is estimable when its free part is 0; those are 0 or of the order of the weights


@dataclass(frozen=True, eq=False)
class Estimates:
    """Linear estimates from one fit.

    value is (m,) in response units; covariance is (m, m), or (m,) where they are independent, in units of the residual
    variance; free is (m, r): the part of each that the data leave open (all 0 for an estimable one).
    """

    value: Vector
    covariance: Matrix | Vector
    free: Matrix

    @cached_property
    def estimable(self) -> NDArray[np.bool_]:
        """Which estimates the layout determines."""
        return np.asarray(np.abs(self.free).max(axis=1, initial=0.0) < FREE_TOLERANCE)

    @cached_property
    def unit_variance(self) -> Vector:
        """Variance of each in units of the residual variance."""
        return self.covariance if self.covariance.ndim == 1 else np.diag(self.covariance)

    def combined(self, weights: Matrix) -> "Estimates":
        """Return weighted combinations; weights are (k, m)."""
        covariance = (weights * self.covariance) @ weights.T if self.covariance.ndim == 1 else weights @ self.covariance @ weights.T
        return Estimates(weights @ self.value, covariance, weights @ self.free)

    def at(self, chosen: NDArray[np.intp]) -> "Estimates":
        """Return some of the estimates."""
        covariance = self.covariance[chosen] if self.covariance.ndim == 1 else self.covariance[np.ix_(chosen, chosen)]
        return Estimates(self.value[chosen], covariance, self.free[chosen])

    def shifted(self, by: float) -> "Estimates":
        """Return the same estimates with a constant added, for means told from the pivot."""
        return Estimates(self.value + by, self.covariance, self.free)

    def differences(self, left: NDArray[np.intp], right: NDArray[np.intp]) -> tuple[Vector, Vector]:
        """Return left minus right and its unit variance, NaN where a difference is not estimable."""
        variance = self.unit_variance[left] + self.unit_variance[right]
        if self.covariance.ndim == 2:
            variance = variance - 2 * self.covariance[left, right]
        open_ = np.abs(self.free[left] - self.free[right]).max(axis=1, initial=0.0) >= FREE_TOLERANCE
        difference = self.value[left] - self.value[right]
        return np.where(open_, np.nan, difference), np.where(open_, np.nan, variance)

    def difference_covariance(self, left: NDArray[np.intp], right: NDArray[np.intp]) -> Matrix:
        """Return the covariance among differences left minus right, in units of the residual variance."""
        full = np.diag(self.covariance) if self.covariance.ndim == 1 else self.covariance
        return full[np.ix_(left, left)] - full[np.ix_(left, right)] - full[np.ix_(right, left)] + full[np.ix_(right, right)]

    def equality(self) -> tuple[float, int]:
        """Return the sum of squares and degrees of freedom of the hypothesis that the comparable estimates are equal.

        Estimates that share their free part can be compared; each such group contributes its own contrasts. Source: general
        linear hypothesis, Searle (1971), Linear Models, section 3.6; for independent estimates Yates (1934), weighted squares of means.
        """
        ss, df = 0.0, 0
        for group in self.comparable_groups():
            ss += self.at(group).spread()
            df += group.size - 1
        return ss, df

    def spread(self) -> float:
        """Return the sum of squares of the comparable estimates about their generalised mean."""
        if self.value.size < 2:
            return 0.0
        centred = self.value - self.value[0]  # a shift changes nothing and saves digits
        if self.covariance.ndim == 1:
            weight = 1.0 / self.covariance
            apart = centred - (weight @ centred) / weight.sum()
            return float(weight @ (apart * apart))
        contrasts = centred[1:]
        first = self.covariance[0]
        among = self.covariance[1:, 1:] - first[1:][None, :] - first[1:][:, None] + first[0]
        return float(contrasts @ np.linalg.solve(among, contrasts))

    def nought(self) -> tuple[float, int]:
        """Return the sum of squares and degrees of freedom of the hypothesis that all estimates are zero.

        NaN where one is not estimable. Source: general linear hypothesis, Searle (1971), Linear Models, section 3.6.
        """
        if not self.estimable.all():
            return float("nan"), self.value.size
        covariance = np.diag(self.covariance) if self.covariance.ndim == 1 else self.covariance
        return float(self.value @ np.linalg.solve(covariance, self.value)), self.value.size

    def comparable_groups(self) -> list[NDArray[np.intp]]:
        """Return the estimates grouped by what they leave open: differences inside a group are estimable."""
        groups = []
        waiting = np.arange(self.value.size)
        while waiting.size:
            apart = np.abs(self.free[waiting] - self.free[waiting[0]]).max(axis=1, initial=0.0)
            groups.append(waiting[apart < FREE_TOLERANCE])
            waiting = waiting[apart >= FREE_TOLERANCE]
        return groups
