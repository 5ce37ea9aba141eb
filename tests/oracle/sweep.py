"""Least squares over exact fractions: what an explicit design matrix can estimate, and what it leaves over."""

from dataclasses import dataclass
from fractions import Fraction

Vector = list[Fraction]


@dataclass(frozen=True, eq=False)
class Fit:
    """One least squares fit: a solution, its generalised inverse, the dependent columns, and the residual sum of squares."""

    kept: tuple[int, ...]  # columns that are independent of those before them
    solution: Vector  # one coefficient a column, 0 for the dependent ones
    inverse: list[Vector]  # generalised inverse of X'X, zero outside the kept columns
    dependence: list[Vector]  # row k: the share of column k (kept) in every column
    residual_ss: Fraction

    @property
    def rank(self) -> int:
        """Count of independent columns."""
        return len(self.kept)

    def estimable(self, weights: Vector) -> bool:
        """Tell whether the weights lie in the row space of the design: every solution then gives one value."""
        columns = range(len(weights))
        return all(weights[c] == sum(weights[k] * self.dependence[k][c] for k in self.kept) for c in columns)

    def value(self, weights: Vector) -> Fraction:
        """Estimate the weighted sum of the parameters."""
        return sum((weights[k] * self.solution[k] for k in self.kept), Fraction(0))

    def product(self, left: Vector, right: Vector) -> Fraction:
        """Covariance of two estimates in units of the residual variance."""
        return sum((left[k] * self.inverse[k][m] * right[m] for k in self.kept if left[k] for m in self.kept if right[m]), Fraction(0))


def fit(design: list[Vector], y: Vector) -> Fit:
    """Sweep the augmented cross-products, one column after another (Goodnight 1979, The American Statistician 33, 149-158)."""
    width = len(design[0])
    table = cross_products([[*row, value] for row, value in zip(design, y, strict=True)])
    kept = []
    for k in range(width):
        if table[k][k] != 0:  # in exact arithmetic a dependent column leaves a pivot of exactly zero
            sweep(table, k)
            kept.append(k)
    zero, one = Fraction(0), Fraction(1)
    inverse, dependence = ([[zero] * width for _ in range(width)] for _ in range(2))
    for k in kept:
        dependence[k] = [table[k][m] for m in range(width)]
        for m in kept:
            inverse[k][m], dependence[k][m] = table[k][m], one if k == m else zero
    solution = [table[k][width] if k in kept else zero for k in range(width)]
    return Fit(tuple(kept), solution, inverse, dependence, table[width][width])


def cross_products(rows: list[Vector]) -> list[Vector]:
    """Sums of products of every pair of columns."""
    columns = list(zip(*rows, strict=True))
    return [[sum((a * b for a, b in zip(left, right, strict=True) if a and b), Fraction(0)) for right in columns] for left in columns]


def sweep(table: list[Vector], k: int) -> None:
    """Turn column k of a cross-product table from a thing to explain into one that explains, in place."""
    pivot = table[k][k]
    table[k] = [value / pivot for value in table[k]]
    for i, row in enumerate(table):
        factor = row[k]
        if i != k and factor != 0:
            table[i] = [value - factor * above if above else value for value, above in zip(row, table[k], strict=True)]
            table[i][k] = -factor / pivot
    table[k][k] = 1 / pivot
