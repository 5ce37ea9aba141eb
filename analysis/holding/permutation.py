"""What permuted residuals say of each question: a p-value that leans on no normal distribution."""

from dataclasses import dataclass

import numpy as np

from analysis.cells import Matrix, Vector
from analysis.holding.bases import Bases, Basis

PERMUTATIONS = 5000
SEED = 20240229
ENTRIES = 1 << 17  # permuted residuals held at a time
TIES = 1e-9  # relative difference below which two statistics are the same but for rounding


@dataclass(frozen=True)
class Permuted:
    """A permutation p-value and its Monte Carlo standard error."""

    p: float
    error: float


def permuted(bases: Bases, permutations: int = PERMUTATIONS, seed: int = SEED) -> dict[str, Permuted]:
    """Return the permutation p-value of every question, residuals permuted under the model without it.

    The fitted part of the reduced model is orthogonal to what is tested, so only sums of permuted residuals by stratum are needed.
    The observed arrangement counts as one: p = (1 + exceeding) / (1 + permutations).
    Source: Freedman and Lane (1983), J. Business & Economic Statistics 1, 292-298.
    """
    order = np.argsort(bases.stratum, kind="stable")
    starts = np.searchsorted(bases.stratum[order], np.arange(bases.size))
    left = {term: bases.left_over(basis.reduced)[order] for term, basis in bases.questions.items()}
    observed = {term: _share(np.add.reduceat(left[term], starts)[None], basis, left[term]) for term, basis in bases.questions.items()}
    exceeding = dict.fromkeys(bases.questions, 0)
    rng, n = np.random.default_rng(seed), bases.values.size
    chunk = max(1, ENTRIES // n)
    for start in range(0, permutations, chunk):
        places = rng.permuted(np.tile(np.arange(n), (min(chunk, permutations - start), 1)), axis=1)
        for term, basis in bases.questions.items():
            share = _share(np.add.reduceat(left[term][places], starts, axis=1), basis, left[term])
            exceeding[term] += int(np.sum(share >= observed[term] * (1 - TIES)))
    p = {term: (1 + count) / (1 + permutations) for term, count in exceeding.items()}
    return {term: Permuted(value, float(np.sqrt(value * (1 - value) / permutations))) for term, value in p.items()}


def _share(sums: Matrix, basis: Basis, left: Vector) -> Vector:
    """Return the part of what the reduced model leaves that the question takes: it rises with F, so it ranks alike."""
    added, reduced = sums @ basis.added, sums @ basis.reduced
    available = left @ left - (reduced * reduced).sum(axis=1)
    return np.asarray((added * added).sum(axis=1) / available)
