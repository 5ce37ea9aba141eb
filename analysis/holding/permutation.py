"""What permuted residuals say of each question: a p-value that leans on no normal distribution."""

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from analysis.cells import Matrix
from analysis.holding.bases import Bases

SIDE = 72  # permutations in each of two sets: 72 × 72 = 5,184 products
LEAST = 1000  # permutations below which the p-value would say too little
MOST_WORK = 4e8  # additions in all, about a second
PROJECTING = 0.1  # cost of a multiplication in a matrix product beside such an addition
SEED = 20240229
ENTRIES = 1 << 21  # numbers held at a time
NEAR, NARROW, WIDE = 1 << 18, 8, 36  # numbers that stay near the processor, and the columns so cut that they do (measured)
TIES = 1e-9  # relative difference below which two statistics are the same but for rounding
Places = NDArray[np.intp]


@dataclass(frozen=True)
class Permuted:
    """A permutation p-value, its Monte Carlo standard error and the number of permutations behind it."""

    p: float
    error: float
    permutations: int


def side_for(bases: Bases) -> int:
    """Return how many permutations each of the two sets gets, 0 where so few would be affordable that the row is left out."""
    each = (bases.values.size + PROJECTING * bases.effects.size) * len(bases.questions)
    side = min(SIDE, math.isqrt(int(MOST_WORK / each)))
    return side if side * side >= LEAST else 0


def permuted(bases: Bases, side: int = SIDE, seed: int = SEED) -> dict[str, Permuted]:
    """Return the permutation p-value of every question from side² permutations of the residuals of the model without it.

    Residuals are permuted within blocks where there are blocks. The permutations are the products of two sets of independent draws:
    place k takes the residual Bj[Ai[k]]. Each product is uniform on all permutations, and any two are independent: products that
    share Ai differ in Bj and the other way round, and a uniform draw times whatever is independent of it is uniform and independent
    of that. So the share of permutations that exceed has the mean and the variance p (1 - p) / N of independent draws, at the cost of
    drawing 2·side of them: the sums by stratum of all permuted residuals are one product of the residuals permuted by B with a sparse
    matrix of ones that A fills. The observed arrangement counts as one: p = (1 + exceeding) / (1 + N).
    Source: Freedman and Lane (1983), J. Business & Economic Statistics 1, 292-298, for the residuals that are permuted.
    """
    shuffler = _Shuffler(bases, np.random.default_rng(seed))
    questions = {term: _Question(shuffler, bases, term) for term in bases.questions}
    inner = shuffler.draws(side).T  # Bj, one a column
    exceeding = dict.fromkeys(questions, 0)
    chunk = max(1, ENTRIES // max(bases.values.size, bases.counts.size * side))
    for start in range(0, side, chunk):
        sums = shuffler.sums_by(shuffler.draws(min(chunk, side - start)))  # Ai, one a row
        for term, question in questions.items():
            exceeding[term] += sum(question.exceeding(sums @ part) for part in question.moved(inner))
    count = side * side
    p = {term: (1 + above) / (1 + count) for term, above in exceeding.items()}
    return {term: Permuted(value, math.sqrt(value * (1 - value) / count), count) for term, value in p.items()}


class _Shuffler:
    """Draws permutations of the observations within blocks; observations stand ordered by block and in it by stratum."""

    def __init__(self, bases: Bases, rng: np.random.Generator) -> None:
        self.rng = rng
        block = np.zeros(bases.values.size, dtype=np.intp) if bases.block is None else bases.block
        self.order = np.lexsort((bases.stratum, block))
        self.block = block[self.order]
        stratum = bases.stratum[self.order]
        self.starts = np.flatnonzero(np.diff(stratum, prepend=-1))
        self.strata = stratum[self.starts]  # in this order

    def draws(self, count: int) -> Places:
        """Return uniform permutations (count, n) within blocks."""
        n = self.block.size
        if not self.block[-1]:
            return np.asarray(self.rng.permuted(np.tile(np.arange(n), (count, 1)), axis=1))
        # Sorted by block and then at random, every place is taken by an observation of its own block.
        return np.asarray(np.argsort(self.block + self.rng.random((count, n)), axis=1))

    def sums_by(self, outer: Places) -> sparse.csr_array:
        """Return the ones (permutations · strata, n) that sum, for every permutation (a row of outer), what it brings to each stratum."""
        count, n = outer.shape
        ends = np.append((np.arange(count)[:, None] * n + self.starts).ravel(), count * n)
        return sparse.csr_array((np.ones(outer.size), outer.ravel(), ends), shape=(ends.size - 1, n))


class _Question:
    """One question's residuals under the model without it, and how large their permuted sums make its statistic."""

    def __init__(self, shuffler: _Shuffler, bases: Bases, term: str) -> None:
        basis = bases.questions[term]
        self.residual = bases.left_over(basis.reduced)[shuffler.order]
        self.added, self.effects = basis.added[shuffler.strata].T, bases.effects[shuffler.strata].T
        self.observed = float(self._share(np.add.reduceat(self.residual, shuffler.starts)[:, None])[0])

    def moved(self, inner: Places) -> Iterator[Matrix]:
        """Yield the residuals permuted by the columns of inner (n, permutations), some columns at a time."""
        chunk = min(max(NARROW, NEAR // len(inner)), WIDE)
        for start in range(0, inner.shape[1], chunk):
            yield self.residual[inner[:, start : start + chunk]]

    def exceeding(self, sums: Matrix) -> int:
        """Return how many permutations reach the observed statistic; sums (permutations · strata, permutations)."""
        strata = self.added.shape[1]
        return int(np.sum(self._share(sums.reshape(-1, strata, sums.shape[1])) >= self.observed * (1 - TIES)))

    def _share(self, sums: Matrix) -> Matrix:
        """Return the part of what the reduced model leaves that the question takes: it rises with F, so it ranks alike.

        sums (…, strata, permutations). The mean and the blocks take nothing of residuals permuted inside them, so what the whole model
        takes is what the directions of the factors' effects take.
        """
        taken = ((self.added @ sums) ** 2).sum(axis=-2)
        available = self.residual @ self.residual - ((self.effects @ sums) ** 2).sum(axis=-2) + taken
        return np.asarray(np.divide(taken, available, out=np.zeros_like(taken), where=available > 0))
