"""Which checks a fitted model gets, on its residuals, and why one is missing where it is."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis.anova import INTERACTION
from analysis.cells import Matrix, Vector, with_values
from analysis.checks import box_cox, hc3, influence, nonadditivity, shape, spread
from analysis.checks.outcomes import FTest
from analysis.coding import contrast_rows, sum_to_zero
from analysis.design import Design
from analysis.means import stratum_of
from analysis.model import Model, Surfaces, column_averaging, row_averaging
from analysis.surfaces import Surface


@dataclass(frozen=True, eq=False)
class Residuals:
    """What the model analysed leaves of each observation; arrays (n,)."""

    layout: Design
    stratum: NDArray[np.intp]  # of each observation

    @cached_property
    def fitted(self) -> Vector:
        """Fitted values as offsets from the pivot."""
        return np.asarray(self.layout.analysed.surface.fitted[self.stratum])

    @cached_property
    def residual(self) -> Vector:
        """Observed minus fitted, on the analysed scale."""
        return self.layout.observed.offsets - self.fitted

    @cached_property
    def leverage(self) -> Vector:
        """Leverages, 0 to 1."""
        return np.asarray(self.layout.analysed.surface.leverage()[self.stratum])

    @property
    def cell(self) -> NDArray[np.intp]:
        """Index of each observation's cell."""
        return np.asarray(self.layout.strata.cell[self.stratum])


def checks(layout: Design, confidence: float) -> dict[str, Any]:
    """Return the checks by name; None where one is not defined (`reasons` says why).

    Spread is judged on the residuals by cell, so that a block takes no part in it; without a block that is the same as judging
    the observations.
    """
    left = Residuals(layout, stratum_of(layout.observed, layout.strata))
    cells = layout.strata.cells
    return {
        "levene": spread.levene(left.residual, left.cell, cells),
        "brown_forsythe": spread.brown_forsythe(left.residual, left.cell, cells),
        "bartlett": spread.bartlett(left.residual, left.cell, cells),
        "shapiro": None if layout.analysed.residual_ms == 0 else shape.shapiro(left.residual),
        "nonadditivity": product_test(layout, left.stratum),
        "box_cox": best_power(layout, left.stratum, confidence),
        "hc3": robust_tests(layout, left),
        "influence": influence_frame(layout, left),
    }


def reasons(layout: Design) -> dict[str, bool]:
    """Return the sentence for each check that this layout does not define, and whether it applies."""
    n, observed = layout.cells.n, layout.observed
    repeated = int((n >= 2).sum())
    lowest = float(observed.scale.back(np.array([observed.pivot + observed.offsets.min()]))[0]) if not observed.scale.reverses else 1.0
    return {
        "The spread of the cells cannot be compared, because fewer than two of them hold repeated observations.": repeated < 2,
        "With at most two observations a cell, Levene's and Brown and Forsythe's tests are not defined.": repeated >= 2
        and int(n.max()) == 2,
        "The power that suits the response best is not looked for, because some values are not above 0.": lowest <= 0,
        "An observation that alone determines its own fitted value has no studentised residual, and the tests that allow unequal "
        "spread (HC3) are not defined with it.": bool((1 - layout.analysed.surface.leverage() < hc3.FITTED_BY_ITSELF).any()),
        "The tests that allow unequal spread (HC3) compare equal-weight means, which need an observation in every combination.": (
            layout.analysed.interaction and bool(layout.empty_cells)
        ),
        "The non-additivity test is not defined in a layout of separate parts.": not layout.connected,
        "The non-additivity test needs at least three levels of one factor.": max(layout.observed.shape) < 3
        or min(layout.observed.shape) < 2,
    }


def product_test(layout: Design, stratum: NDArray[np.intp]) -> FTest | None:
    """Return the test for an interaction that grows with both effects, after the additive model; None where it is not defined."""
    additive = layout.additive
    if not layout.connected or min(layout.observed.shape) < 2:
        return None
    strata, surface = layout.strata, additive.surface

    def left_over(values: Vector) -> Vector:
        """Take the additive part from values that are the same throughout each stratum."""
        means = np.zeros(strata.n.size)
        means[stratum] = values
        return np.asarray((means - Surface(replace(strata, mean=means), surface.factors).fitted)[stratum])

    row = additive.row_means.value[strata.row][stratum]
    column = additive.column_means.value[strata.column][stratum]
    residual = layout.observed.offsets - surface.fitted[stratum]
    return nonadditivity.nonadditivity_general(residual, row, column, left_over, additive.residual_df)


def best_power(layout: Design, stratum: NDArray[np.intp], confidence: float) -> dict[str, float] | None:
    """Return the Box-Cox power of the response as measured, for the model analysed."""
    observed = layout.observed
    measured = observed.scale.back(observed.values)

    def residual_ss(values: Vector) -> float:
        strata = with_values(layout.strata, stratum, values)
        if layout.analysed.interaction and not strata.has_blocks:  # every cell is fitted by its own mean
            return strata.without_rounding(float(strata.within_ss.sum()))
        return Model(Surfaces(strata), layout.analysed.interaction).residual_ss

    found = box_cox.box_cox(measured, residual_ss, confidence)
    return None if found is None else {"lambda": found.lam, "lower": found.lower, "upper": found.upper}


def robust_tests(layout: Design, left: Residuals) -> pd.DataFrame:
    """Return the HC3 tests of the equal-weight hypotheses, one row a term; F is missing where it is not defined."""
    row, column = layout.observed.row.name, layout.observed.column.name
    terms = (row, column, INTERACTION) if layout.analysed.interaction else (row, column)
    found = _cell_tests(layout, left) if layout.analysed.interaction and not layout.strata.has_blocks else _design_tests(layout, left)
    rows = [
        {"term": term} if test is None else {"term": term, "f": test.f, "df1": test.df1, "df2": test.df2, "p": test.p}
        for term, test in zip(terms, found, strict=True)
    ]
    return pd.DataFrame(rows, columns=["term", "f", "df1", "df2", "p"])


def _cell_tests(layout: Design, left: Residuals) -> list[FTest | None]:
    """Return the tests where cells are independent: the full model without blocks."""
    if layout.empty_cells:
        return [None, None, None]
    a, b = layout.observed.shape
    strata = layout.strata
    spreads = hc3.spread_by_row(left.residual, left.leverage, left.stratum, strata.n.size)
    row, column = contrast_rows(a), contrast_rows(b)
    hypotheses: tuple[Matrix, ...] = (row @ row_averaging(a, b), column @ column_averaging(a, b), np.kron(row, column).astype(float))
    return [
        hc3.wald_hc3_cells(strata.mean, strata.n, spreads, hypothesis, layout.analysed.residual_df) if len(hypothesis) else None
        for hypothesis in hypotheses
    ]


def _design_tests(layout: Design, left: Residuals) -> list[FTest | None]:
    """Return the tests from sum-to-zero columns: with blocks, or without the interaction."""
    strata, model = layout.strata, layout.analysed
    parts = {"row": sum_to_zero(strata.row, strata.levels[0]), "column": sum_to_zero(strata.column, strata.levels[1])}
    if model.interaction:
        parts["interaction"] = (parts["row"][:, :, None] * parts["column"][:, None, :]).reshape(strata.n.size, -1)
    other = [np.ones((strata.n.size, 1)), sum_to_zero(strata.block, strata.levels[2])]
    design = np.column_stack([*other, *parts.values()])
    if design.shape[1] != model.parameters:
        return [None] * len(parts)
    root = np.sqrt(strata.n)
    coefficients = np.linalg.lstsq(root[:, None] * design, root * strata.mean, rcond=None)[0]
    spreads = hc3.spread_by_row(left.residual, left.leverage, left.stratum, strata.n.size)
    start, found = sum(part.shape[1] for part in other), []
    for part in parts.values():
        hypothesis: Matrix = np.eye(design.shape[1])[start : start + part.shape[1]]
        found.append(hc3.wald_hc3(design, strata.n, spreads, coefficients, hypothesis, model.residual_df) if part.shape[1] else None)
        start += part.shape[1]
    return found


def influence_frame(layout: Design, left: Residuals) -> pd.DataFrame:
    """Return how much each observation weighs, one row each, named by its file row."""
    model, observed = layout.analysed, layout.observed
    found = influence.influence(left.residual, left.leverage, model.residual_ms, model.residual_df, model.parameters)
    return pd.DataFrame(
        {
            "row": observed.file_rows,
            "fitted": left.fitted + observed.pivot,
            "residual": found.residual,
            "leverage": found.leverage,
            "student_internal": found.student_internal,
            "student_external": found.student_external,
            "cook": found.cook,
        }
    )
