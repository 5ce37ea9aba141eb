"""Families of comparisons, each adjusted by its own definition, simple effects and interaction contrasts."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import combinations

from mpmath import mp, mpf

from tests.oracle import tails
from tests.oracle.layout import Cell, minus
from tests.oracle.means import Analysis, estimate
from tests.oracle.paths import word
from tests.oracle.sweep import Fit, Vector
from tests.oracle.tables import Row, number


@dataclass(frozen=True, eq=False)
class Contrast:
    """One comparison of a family: what is shown of it and its weights on the model's parameters."""

    labels: Row
    weights: Vector


@dataclass(frozen=True)
class Adjusting:
    """What an adjustment may look at."""

    p: Sequence[mpf]  # unadjusted
    t: Sequence[mpf]  # absolute
    df: int
    means: int
    dimension: int
    loadings: tuple[mpf, ...]  # of comparisons with a control


def holm(p: Sequence[mpf]) -> list[mpf]:
    """Step down (Holm 1979, Scand. J. Statist. 6, 65-70)."""
    order = sorted(range(len(p)), key=lambda i: p[i])
    adjusted, highest = [mpf(0)] * len(p), mpf(0)
    for rank, i in enumerate(order):
        highest = max(highest, min(mpf(1), (len(p) - rank) * p[i]))
        adjusted[i] = highest
    return adjusted


P_VALUES: dict[str, Callable[[Adjusting], list[mpf]]] = {
    "none": lambda a: list(a.p),
    "holm": lambda a: holm(a.p),
    "bonferroni": lambda a: [min(mpf(1), len(a.p) * p) for p in a.p],
    "sidak": lambda a: [1 - (1 - p) ** len(a.p) for p in a.p],
    "scheffe": lambda a: [tails.f_tail(t * t / a.dimension, a.dimension, a.df) for t in a.t],
    "tukey": lambda a: [tails.studentised_range_tail(mp.sqrt(2) * t, a.means, a.df) for t in a.t],
    "dunnett": lambda a: [tails.many_to_one_tail(t, a.loadings, a.df) for t in a.t],
}

CRITICAL: dict[str, Callable[[Adjusting, mpf], mpf]] = {
    "none": lambda a, alpha: tails.t_point(alpha, a.df),
    "holm": lambda a, alpha: tails.t_point(alpha / len(a.p), a.df),
    "bonferroni": lambda a, alpha: tails.t_point(alpha / len(a.p), a.df),
    "sidak": lambda a, alpha: tails.t_point(1 - (1 - alpha) ** (mpf(1) / len(a.p)), a.df),
    "scheffe": lambda a, alpha: mp.sqrt(a.dimension * tails.f_point(alpha, a.dimension, a.df)),
    "tukey": lambda a, alpha: tails.studentised_range_point(alpha, a.means, a.df) / mp.sqrt(2),
    "dunnett": lambda a, alpha: many_to_one_point(a, alpha),
}


def many_to_one_point(a: Adjusting, alpha: mpf) -> mpf:
    """The bound that the largest of the comparisons with a control exceeds with probability alpha, to 12 digits."""
    high = tails.t_point(alpha / len(a.p), a.df)  # Bonferroni: a little too large, or exact for one comparison
    if len(a.p) == 1:
        return high
    brackets = (high * mpf("0.95"), high)
    return mp.findroot(lambda d: tails.many_to_one_tail(d, a.loadings, a.df) - alpha, brackets, solver="secant", tol=1e-24)


def dimension(vectors: list[Vector]) -> int:
    """Rank of the contrasts, by elimination."""
    rows, rank = [list(v) for v in vectors], 0
    for column in range(len(rows[0])):
        pivot = next((r for r in range(rank, len(rows)) if rows[r][column] != 0), None)
        if pivot is None:
            continue
        rows[rank], rows[pivot] = rows[pivot], rows[rank]
        for r in range(rank + 1, len(rows)):
            factor = rows[r][column] / rows[rank][column]
            rows[r] = [a - factor * b for a, b in zip(rows[r], rows[rank], strict=True)]
        rank += 1
    return rank


def tested(a: Analysis, model: Fit, contrasts: list[Contrast], adjust: str, means: int, simultaneous: bool) -> list[Row]:
    """Every contrast of one family with its test, adjusted within the family."""
    usable = [c for c in contrasts if model.estimable(c.weights)]
    if not usable:
        return []
    ses = [mp.sqrt(number(model.product(c.weights, c.weights) * a.ms)) for c in usable]
    differences = [number(model.value(c.weights)) for c in usable]
    t = [d / se for d, se in zip(differences, ses, strict=True)]
    raw = [tails.t_two_sided(value, a.df) for value in t]
    loadings = loadings_of(model, usable) if adjust == "dunnett" else ()
    family = Adjusting(raw, [abs(value) for value in t], a.df, means, dimension([c.weights for c in usable]), loadings)
    adjusted = P_VALUES[adjust](family)
    single = tails.t_point(1 - a.confidence, a.df)
    wide = CRITICAL[adjust](family, 1 - a.confidence) if simultaneous else None
    lines = zip(usable, differences, ses, t, raw, adjusted, strict=True)
    return [c.labels | shown(d, se, t_, p, q, a.df, single, wide) | {"family_size": len(usable)} for c, d, se, t_, p, q in lines]


def shown(difference: mpf, se: mpf, t: mpf, p: mpf, p_adjusted: mpf, df: int, single: mpf, wide: mpf | None) -> Row:
    """The numbers of one comparison; without a simultaneous bound only its own interval."""
    line = {"difference": difference, "se": se, "df": df, "t": t, "p": p, "p_adjusted": p_adjusted}
    line |= {"lower": difference - single * se, "upper": difference + single * se}
    return line if wide is None else line | {"lower_adjusted": difference - wide * se, "upper_adjusted": difference + wide * se}


def loadings_of(model: Fit, contrasts: list[Contrast]) -> tuple[mpf, ...]:
    """Loadings l with corr(i, j) = l_i l_j, from the variances when all estimates are independent."""
    v = [model.product(c.weights, c.weights) for c in contrasts]
    shared = model.product(contrasts[0].weights, contrasts[1].weights) if len(v) > 1 else Fraction(0)
    pairs = combinations(range(len(v)), 2)
    assert all(model.product(contrasts[i].weights, contrasts[j].weights) == shared for i, j in pairs), "needs independent estimates"
    return tuple(mp.sqrt(number(shared / variance)) for variance in v)


Means = list[tuple[object, Vector | None]]


def pairs_of(levels: Means, within: str | None, control: int | None) -> list[Contrast]:
    """Later minus earlier for every pair, or each level minus the control."""
    known = [(label, weights, place) for place, (label, weights) in enumerate(levels) if weights is not None]
    pairs = list(combinations(known, 2))
    if control is not None:
        base = next((one for one in known if one[2] == control), None)
        pairs = [(base, one) for one in known if base is not None and one[2] != control]
    return [Contrast({"left": right[0], "right": left[0], "within": within}, minus(right[1], left[1])) for left, right in pairs]


@dataclass(frozen=True)
class Wanted:
    """How the families are to be adjusted, and the places of the control levels."""

    adjust: str
    row_control: int = 0
    column_control: int = 0

    @property
    def against(self) -> tuple[int | None, int | None]:
        """Control places where comparisons are with a control, else None."""
        return (self.row_control, self.column_control) if self.adjust == "dunnett" else (None, None)


def comparisons(a: Analysis, row: str, column: str, wanted: Wanted) -> dict[str, list[Row]]:
    """All families: both margins under the analysed model, all cells, and slices both ways over the full model's cells."""
    x, (row_control, column_control) = a.x, wanted.against
    row_means = [(level, a.margin(i, None)) for i, level in enumerate(x.rows)]
    column_means = [(level, a.margin(None, j)) for j, level in enumerate(x.columns)]
    cell_means = [([x.rows[i], x.columns[j]], x.cell_weights(i, j)) for i, j in x.cells]
    down = [[(level, x.cell_weights(i, j)) for i, level in enumerate(x.rows)] for j in range(len(x.columns))]
    across = [[(level, x.cell_weights(i, j)) for j, level in enumerate(x.columns)] for i in range(len(x.rows))]
    families = {
        row: family(a, a.model, row_means, None, row_control, wanted.adjust),
        column: family(a, a.model, column_means, None, column_control, wanted.adjust),
        f"{row} within {column}": slices(a, down, x.columns, row_control, wanted.adjust),
        f"{column} within {row}": slices(a, across, x.rows, column_control, wanted.adjust),
    }
    return families if wanted.adjust == "dunnett" else families | {"cells": family(a, x.full, cell_means, None, None, wanted.adjust)}


def family(a: Analysis, model: Fit, levels: Means, within: str | None, control: int | None, adjust: str) -> list[Row]:
    """One family over the comparisons that the data allow; its means are those that take part in one."""
    contrasts = [c for c in pairs_of(levels, within, control) if model.estimable(c.weights)]
    means = {word(c.labels[side]) for c in contrasts for side in ("left", "right")}
    return tested(a, model, contrasts, adjust, len(means), simultaneous=True)


def slices(a: Analysis, families: list[Means], within: tuple[str, ...], control: int | None, adjust: str) -> list[Row]:
    """One family for each level of the other factor."""
    return [line for levels, level in zip(families, within, strict=True) for line in family(a, a.x.full, levels, level, control, adjust)]


def simple_effects(a: Analysis, row: str, column: str) -> list[Row]:
    """F for one factor inside each level of the other: the cells of the slice made equal, against the pooled residual."""
    down = [simple_effect(a, row, x, lambda cell, j=j: (-1, j) if cell[1] == j else cell) for j, x in enumerate(a.x.columns)]
    across = [simple_effect(a, column, x, lambda cell, i=i: (i, -1) if cell[0] == i else cell) for i, x in enumerate(a.x.rows)]
    return with_holm(down) + with_holm(across)


def simple_effect(a: Analysis, factor: str, within: str, merge: Callable[[Cell], Cell]) -> Row:
    """One slice; with fewer than two cells there is nothing to test."""
    merged = a.x.fit(a.x.cell_columns(merge) + a.x.block_columns())
    df, ss = a.x.full.rank - merged.rank, merged.residual_ss - a.x.full.residual_ss
    line = {"factor": factor, "within": within, "df": df, "residual_df": a.df, "ss": number(ss), "f": None, "p": None}
    if df == 0:
        return line | {"ss": None}
    f = number(ss / df / a.ms)
    return line | {"f": f, "p": tails.f_tail(f, df, a.df)}


def with_holm(lines: list[Row]) -> list[Row]:
    """Holm across the slices of one factor that hold a test."""
    known = [line for line in lines if line["p"] is not None]
    adjusted = iter(holm([line["p"] for line in known]))
    return [line | {"p_adjusted": next(adjusted) if line["p"] is not None else None} for line in lines]


def interaction_contrasts(a: Analysis, wanted: Wanted) -> list[Row]:
    """All differences of differences over four filled cells."""
    x = a.x
    quads = [(i, k, j, m) for i, k in combinations(range(len(x.rows)), 2) for j, m in combinations(range(len(x.columns)), 2)]
    contrasts = []
    for i, k, j, m in quads:
        weights = minus(minus(x.cell_weights(k, m), x.cell_weights(k, j)), minus(x.cell_weights(i, m), x.cell_weights(i, j)))
        if weights is not None and estimate(x.full, weights) is not None:
            contrasts.append(Contrast({"rows": [x.rows[i], x.rows[k]], "columns": [x.columns[j], x.columns[m]]}, weights))
    adjust = "holm" if wanted.adjust in ("tukey", "dunnett") else wanted.adjust
    lines = tested(a, x.full, contrasts, adjust, 0, simultaneous=False)
    return [{key: value for key, value in line.items() if key != "family_size"} for line in lines]
