"""The surfaces that least squares lays through the strata: fitted values, their rank and what can be estimated from them."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy import sparse
from scipy.sparse import csgraph

from analysis.cells import Codes, Matrix, Strata, Vector
from analysis.estimates import Estimates

ROW, COLUMN, CELL, BLOCK = "row", "column", "cell", "block"
RANK_TOLERANCE = 1e-9  # eigenvalues of the scaled equations are 0 or far above this for any layout that fits in memory


def codes_of(strata: Strata, name: str) -> tuple[Codes, int]:
    """Return the level of each stratum, and the number of levels, of the row, column, cell or block factor."""
    a, b, blocks = strata.levels
    return {ROW: (strata.row, a), COLUMN: (strata.column, b), CELL: (strata.cell, a * b), BLOCK: (strata.block, blocks)}[name]


@dataclass(frozen=True, eq=False)
class Surface:
    """The additive least-squares fit of some factors to the stratum means, weighted by counts.

    The factor with most levels is eliminated first (its effects are weighted means of what the others leave), so the
    equations solved are as small as can be. Source: Kempthorne (1952), The Design and Analysis of Experiments, ch. 6;
    generalised inverse with exact nullity, Searle (1971), Linear Models, ch. 5.
    """

    strata: Strata
    factors: tuple[str, ...]  # none stands for the grand mean alone

    @cached_property
    def swept(self) -> str | None:
        """The factor eliminated first: the one with most levels."""
        return max(self.factors, key=lambda name: codes_of(self.strata, name)[1], default=None)

    @cached_property
    def others(self) -> tuple[str, ...]:
        """The factors that remain in the equations."""
        return tuple(name for name in self.factors if name != self.swept)

    @cached_property
    def _swept_codes(self) -> tuple[Codes, int]:
        return (np.zeros(self.strata.n.size, dtype=np.intp), 1) if self.swept is None else codes_of(self.strata, self.swept)

    @cached_property
    def swept_n(self) -> Vector:
        """Counts by level of the eliminated factor."""
        codes, size = self._swept_codes
        return np.asarray(np.bincount(codes, weights=self.strata.n, minlength=size), dtype=float)

    def _swept_mean(self, values: Matrix) -> Matrix:
        """Return count-weighted means of columns of values by level of the eliminated factor, 0 where it has none."""
        codes, size = self._swept_codes
        if values.ndim == 1:
            return np.bincount(codes, weights=self.strata.n * values, minlength=size) / np.where(self.swept_n > 0, self.swept_n, 1.0)
        k = self.strata.n.size
        gather = sparse.csr_array((self.strata.n, (codes, np.arange(k))), shape=(size, k))
        return np.asarray(gather @ values) / np.where(self.swept_n > 0, self.swept_n, 1.0)[:, None]

    @cached_property
    def _indicator(self) -> sparse.csr_array:
        """One column for each level of each remaining factor."""
        k = self.strata.n.size
        sides = []
        for name in self.others:
            codes, size = codes_of(self.strata, name)
            sides.append(sparse.csr_array((np.ones(k), (np.arange(k), codes)), shape=(k, size)))
        return sparse.csr_array(sparse.hstack(sides)) if sides else sparse.csr_array((k, 0))

    @cached_property
    def _profile(self) -> Matrix:
        """Mean of each remaining indicator by level of the eliminated factor: (levels, parameters)."""
        return self._swept_mean(self._indicator.toarray())

    @cached_property
    def _equations(self) -> Matrix:
        """Normal equations of the remaining factors after the elimination."""
        weighted = self._indicator.multiply(self.strata.n[:, None])
        gram = np.asarray((self._indicator.T @ weighted).todense())
        return np.asarray(gram - self._profile.T @ (self.swept_n[:, None] * self._profile))

    @cached_property
    def _solution(self) -> tuple[Matrix, Matrix]:
        """Generalised inverse of the equations, and an orthonormal basis of what they leave free."""
        equations = self._equations
        size = np.sqrt(np.where(np.diag(equations) > 0, np.diag(equations), 1.0))
        values, vectors = np.linalg.eigh(equations / np.outer(size, size))
        free = self._free_dimension(values)
        kept, null = vectors[:, free:], vectors[:, :free]
        inverse = (kept / values[free:]) @ kept.T / np.outer(size, size)
        basis, _ = np.linalg.qr(null / size[:, None]) if free else (null, None)
        return inverse, basis

    def _free_dimension(self, eigenvalues: Vector) -> int:
        """Return the nullity: exact by counting connected parts for two factors, by eigenvalues for three."""
        if len(self.factors) != 2:
            return int(np.sum(eigenvalues < RANK_TOLERANCE))
        (left, a), (right, b) = (codes_of(self.strata, name) for name in (str(self.swept), self.others[0]))
        parts = connected_parts(left, right, a, b)
        # A level of the eliminated factor without observations is a part of its own, but not one of these equations.
        return len(set(parts[a:].tolist()))

    @cached_property
    def rank(self) -> int:
        """Number of independent parameters."""
        filled = int(np.count_nonzero(self.swept_n))
        if not self.others:
            return filled
        return filled + int(self._equations.shape[0]) - int(self._solution[1].shape[1])

    @cached_property
    def _remaining(self) -> Vector:
        """Effects of the remaining factors; one step of refinement removes the error of the inverse."""
        inverse, _ = self._solution
        effects = np.zeros(inverse.shape[0])
        for _ in range(2):
            left_over = self.strata.mean - self._surface(effects)
            effects = effects + inverse @ (self._indicator.T @ (self.strata.n * left_over))
        return effects

    def _surface(self, effects: Vector) -> Vector:
        """Return the fitted values for given effects of the remaining factors."""
        codes, _ = self._swept_codes
        part = np.asarray(self._indicator @ effects)
        return np.asarray(part + self._swept_mean(self.strata.mean - part)[codes])

    @cached_property
    def fitted(self) -> Vector:
        """Fitted value of each stratum, as an offset from the pivot."""
        if not self.others:
            return np.asarray(self._swept_mean(self.strata.mean)[self._swept_codes[0]])
        return self._surface(self._remaining)

    @cached_property
    def lack_of_fit(self) -> float:
        """Sum of squares between the stratum means and the surface."""
        apart = self.strata.mean - self.fitted
        return float(self.strata.n @ (apart * apart))

    def functional(self, weights: Mapping[str, Matrix]) -> Estimates:
        """Return the estimates of linear functions of the effects; weights hold (functions, levels) for each factor."""
        swept = weights[str(self.swept)]
        have = self.swept_n > 0
        counts = np.where(have, self.swept_n, 1.0)
        swept_means = self._swept_mean(self.strata.mean)
        missing = np.where(have, 0.0, swept)[:, ~have]  # a level without observations is free
        if not self.others:
            return Estimates(swept @ swept_means, (swept / counts) @ swept.T, missing)
        inverse, basis = self._solution
        rest = np.concatenate([weights[name] for name in self.others], axis=1) - swept @ self._profile
        value = rest @ self._remaining + swept @ swept_means
        covariance = rest @ inverse @ rest.T + (swept / counts) @ swept.T
        return Estimates(value, covariance, np.concatenate([rest @ basis, missing], axis=1))

    def leverage(self) -> Vector:
        """Return the leverage of one observation in each stratum: the unit variance of its fitted value."""
        codes, _ = self._swept_codes
        if not self.others:
            return np.asarray(1.0 / self.swept_n[codes])
        inverse, _ = self._solution
        rest = self._indicator.toarray() - self._profile[codes]
        return np.asarray(np.einsum("ij,jk,ik->i", rest, inverse, rest, optimize=True) + 1.0 / self.swept_n[codes])


def connected_parts(left: Codes, right: Codes, a: int, b: int) -> NDArray[np.int32]:
    """Return the part of the layout to which each of the a left and b right levels belongs.

    Two levels belong together when a chain of filled combinations leads from one to the other; comparisons are possible
    only inside a part. Source: Weeks and Williams (1964), Technometrics 6, 319-324.
    """
    links = sparse.coo_array((np.ones(left.size), (left, right + a)), shape=(a + b, a + b))
    _, parts = csgraph.connected_components(links, directed=False)
    return np.asarray(parts)


def distance(strata: Strata, larger: Surface, smaller: Surface) -> float:
    """Return the sum of squares between two nested surfaces; taken between fitted values, so nothing cancels."""
    apart = larger.fitted - smaller.fitted
    return float(strata.n @ (apart * apart))
