"""What no correct analysis may depend on, over random designs: order, names, origin, unit of measurement, which factor comes first."""

from dataclasses import dataclass
from typing import Any

import numpy as np
import pandas as pd
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

import analysis

FEW = settings(max_examples=12, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
KINDS = ("type_1", "type_1_column_first", "type_2", "type_3")
TESTED = ["ss", "ms", "f", "p", "partial_eta2", "omega2", "partial_omega2"]


@dataclass(frozen=True, eq=False)
class Drawn:
    """A random experiment: one row an observation, levels as ordered categories."""

    frame: pd.DataFrame

    @property
    def rows(self) -> list[str]:
        """Row levels."""
        return list(self.frame["a"].cat.categories)

    @property
    def columns(self) -> list[str]:
        """Column levels."""
        return list(self.frame["b"].cat.categories)

    def __repr__(self) -> str:
        return f"Drawn({pd.crosstab(self.frame['a'], self.frame['b']).to_numpy().tolist()}, {self.frame['y'].tolist()})"


@st.composite
def experiments(draw: st.DrawFn, balanced: bool = False, may_be_empty: bool = False) -> Drawn:
    """Two to four levels by two to four, one to four observations a cell (at least two in the first), rounded to 0.01."""
    a, b = draw(st.integers(2, 4)), draw(st.integers(2, 4))
    if balanced:
        counts = np.full((a, b), draw(st.integers(2, 4)))
    else:
        counts = np.array(draw(st.lists(st.integers(1, 4), min_size=a * b, max_size=a * b))).reshape(a, b)
    counts[0, 0] = max(counts[0, 0], 3)
    if balanced:
        counts[:] = counts[0, 0]
    if may_be_empty:
        counts[a - 1, b - 1] = 0
    rng = np.random.default_rng(draw(st.integers(0, 2**32 - 1)))
    row, column = (np.repeat(index.ravel(), counts.ravel()) for index in np.indices((a, b)))
    centre = 10 + rng.normal(0, 2, a)[:, None] + rng.normal(0, 2, b) + rng.normal(0, 1, (a, b))
    y = np.round(centre[row, column] + rng.normal(0, 1, row.size), 2)
    frame = pd.DataFrame({"a": categories("a", row, a), "b": categories("b", column, b), "y": y})
    return Drawn(frame)


def categories(letter: str, codes: np.ndarray, count: int) -> pd.Categorical:
    """Codes as ordered categories."""
    return pd.Categorical.from_codes(codes, [f"{letter}{k}" for k in range(count)], ordered=True)


def analysed(frame: pd.DataFrame, row: str = "a", column: str = "b", **choices: Any) -> analysis.Findings:
    """Findings of a frame."""
    return analysis.analyse(analysis.Study(table=analysis.read_table(frame), response="y", row_factor=row, column_factor=column, **choices))


def by_term(findings: analysis.Findings, kind: str) -> pd.DataFrame:
    """One of the four tables, a line a term."""
    return findings.tables[kind].set_index("term")


def assert_same_tables(one: analysis.Findings, other: analysis.Findings, unit: float = 1.0) -> None:
    """Every line of every table agrees to 1e-10; sums of squares after a change of unit."""
    for kind in KINDS:
        if one.tables[kind] is None:
            assert other.tables[kind] is None
            continue
        left, right = by_term(one, kind)[["df", *TESTED]].astype(float), by_term(other, kind).loc[by_term(one, kind).index, ["df", *TESTED]]
        left[["ss", "ms"]] *= unit**2
        scale = left.at["total", "ss"]
        np.testing.assert_allclose(right[["ss", "ms"]].astype(float), left[["ss", "ms"]], rtol=1e-10, atol=1e-13 * scale)
        rest = ["df", *TESTED[2:]]
        np.testing.assert_allclose(right[rest].astype(float), left[rest], rtol=1e-9, atol=1e-11)


def lines(frame: pd.DataFrame, *keys: str) -> pd.DataFrame:
    """Rows found by what names them, whatever their order."""
    return frame.set_index(list(keys)).sort_index()


@FEW
@given(experiments(may_be_empty=True), st.randoms(use_true_random=False))
def test_row_order_changes_nothing(drawn, source):
    order = list(range(len(drawn.frame)))
    source.shuffle(order)
    one, other = analysed(drawn.frame), analysed(drawn.frame.iloc[order].reset_index(drop=True))
    assert_same_tables(one, other)
    np.testing.assert_allclose(other.cells["estimate"].astype(float), one.cells["estimate"].astype(float), rtol=1e-12)
    np.testing.assert_allclose(other.comparisons["a"]["p_adjusted"], one.comparisons["a"]["p_adjusted"], rtol=1e-8)


@FEW
@given(experiments(), st.data())
def test_level_order_changes_only_signs(drawn, data):
    keep = {"a": data.draw(st.permutations(drawn.rows)), "b": data.draw(st.permutations(drawn.columns))}
    one, other = analysed(drawn.frame), analysed(drawn.frame, keep=keep)
    assert_same_tables(one, other)
    assert list(other.marginal_means["a"]["level"]) == keep["a"]
    for part in (lambda f: lines(f.marginal_means["b"], "level")["mean"], lambda f: lines(f.cells, "row", "column")["se"]):
        pd.testing.assert_series_equal(part(one), part(other), rtol=1e-11)
    signed = {(row.left, row.right): row.difference for row in one.comparisons["a"].itertuples()}
    signed |= {(right, left): -difference for (left, right), difference in signed.items()}
    assert all(row.difference == pytest.approx(signed[row.left, row.right], abs=1e-11) for row in other.comparisons["a"].itertuples())


@FEW
@given(experiments(may_be_empty=True))
def test_names_of_levels_and_columns_change_nothing(drawn):
    renamed = drawn.frame.assign(
        a=drawn.frame["a"].cat.rename_categories([f"level {k} of ü" for k in drawn.rows]),
        b=drawn.frame["b"].cat.rename_categories([f"{k}, so to speak" for k in drawn.columns]),
    )
    assert_same_tables(analysed(drawn.frame), analysed(renamed))


@FEW
@given(experiments(may_be_empty=True), st.sampled_from([-7.0, 4096.0, -(2.0**30)]))
def test_adding_a_constant_moves_only_the_means(drawn, constant):
    exact = drawn.frame.assign(y=np.round(drawn.frame["y"] * 64) / 64)  # sixty-fourths: the sum with the constant is exact
    one, other = analysed(exact), analysed(exact.assign(y=exact["y"] + constant))
    assert_same_tables(one, other)
    for key in ("a", "b"):
        moved = other.marginal_means[key]["mean"].astype(float) - constant
        np.testing.assert_allclose(
            moved, one.marginal_means[key]["mean"].astype(float), rtol=1e-9, atol=1e-6 if abs(constant) > 1e6 else 1e-10
        )


@FEW
@given(experiments(may_be_empty=True), st.sampled_from([-1.0, 0.001, 1e6, -2.5e-9]))
def test_unit_of_measurement_scales_and_keeps_f(drawn, unit):
    one, other = analysed(drawn.frame), analysed(drawn.frame.assign(y=drawn.frame["y"] * unit))
    assert_same_tables(one, other, unit)
    np.testing.assert_allclose(
        other.comparisons["b"]["difference"], one.comparisons["b"]["difference"] * unit, rtol=1e-9, atol=1e-11 * abs(unit)
    )
    np.testing.assert_allclose(other.comparisons["b"]["p_adjusted"], one.comparisons["b"]["p_adjusted"], rtol=1e-7)


@FEW
@given(experiments(may_be_empty=True))
def test_swapping_the_factors_swaps_the_answers(drawn):
    one, other = analysed(drawn.frame), analysed(drawn.frame, "b", "a")
    swapped = {"type_1": "type_1_column_first", "type_1_column_first": "type_1", "type_2": "type_2", "type_3": "type_3"}
    for kind, twin in swapped.items():
        if one.tables[kind] is not None:
            left = by_term(one, kind)[TESTED].astype(float)
            right = by_term(other, twin).loc[left.index, TESTED].astype(float)
            np.testing.assert_allclose(right, left, rtol=1e-9, atol=1e-11 * left.at["total", "ss"])
    pd.testing.assert_frame_equal(one.marginal_means["a"], other.marginal_means["a"], rtol=1e-10)
    for family in ("a", "b", "a within b", "b within a"):
        keys = ["left", "right", "within"] if " " in family else ["left", "right"]
        columns = ["difference", "se", "p", "p_adjusted"]
        pd.testing.assert_frame_equal(
            lines(one.comparisons[family], *keys)[columns], lines(other.comparisons[family], *keys)[columns], rtol=1e-7, check_dtype=False
        )


@FEW
@given(experiments(may_be_empty=True))
def test_the_same_data_twice_double_every_sum_of_squares(drawn):
    one, other = analysed(drawn.frame), analysed(pd.concat([drawn.frame] * 2, ignore_index=True))
    for kind in KINDS:
        if one.tables[kind] is not None:
            left, right = by_term(one, kind)["ss"].astype(float), by_term(other, kind)["ss"].astype(float)
            np.testing.assert_allclose(right, 2 * left, rtol=1e-9, atol=1e-12 * left["total"])
    np.testing.assert_allclose(other.cells["estimate"].astype(float), one.cells["estimate"].astype(float), rtol=1e-12)


@FEW
@given(experiments(balanced=True), st.sampled_from(["full", "additive"]))
def test_types_agree_when_balanced(drawn, model):
    findings = analysed(drawn.frame, model=model)
    first = by_term(findings, "type_1")[TESTED].astype(float)
    for kind in KINDS[1:]:
        other = by_term(findings, kind).loc[first.index, TESTED].astype(float)
        np.testing.assert_allclose(other, first, rtol=1e-10, atol=1e-12 * first.at["total", "ss"])


@FEW
@given(experiments(may_be_empty=True), st.sampled_from(["full", "additive"]))
def test_degrees_of_freedom_and_sequential_sums_add_up(drawn, model):
    findings = analysed(drawn.frame, model=model)
    for kind in KINDS:
        table = findings.tables[kind]
        if table is not None and table["df"].notna().all():
            parts = table[table["term"] != "total"]
            assert parts["df"].sum() == by_term(findings, kind).at["total", "df"] == len(drawn.frame) - 1
    for kind in KINDS[:2]:
        parts, total = findings.tables[kind].query("term != 'total'"), by_term(findings, kind).at["total", "ss"]
        assert parts["ss"].sum() == pytest.approx(total, rel=1e-12)


@FEW
@given(experiments(balanced=True))
def test_slices_hold_main_effect_and_interaction_when_balanced(drawn):
    findings = analysed(drawn.frame)
    ss = by_term(findings, "type_3")["ss"]
    slices = findings.simple_effects.groupby("factor")["ss"].sum()
    for factor in ("a", "b"):
        assert slices[factor] == pytest.approx(ss[factor] + ss["interaction"], rel=1e-11)


ADJUSTMENTS = ("tukey", "holm", "bonferroni", "sidak", "scheffe", "none")


@FEW
@given(experiments(), st.sampled_from(ADJUSTMENTS), st.sampled_from([0.8, 0.95, 0.99]))
def test_family_sizes_and_intervals_fit_the_p_values(drawn, adjust, confidence):
    findings = analysed(drawn.frame, adjust=adjust, confidence=confidence)
    a, b = len(drawn.rows), len(drawn.columns)
    sizes = {"a": a * (a - 1) // 2, "b": b * (b - 1) // 2, "cells": a * b * (a * b - 1) // 2}
    sizes |= {"a within b": sizes["a"], "b within a": sizes["b"]}
    for family, size in sizes.items():
        frame = findings.comparisons[family]
        assert set(frame["family_size"]) == {size}
        if adjust != "holm":  # Holm has no simultaneous interval of its own and shows the wider one of Bonferroni
            outside = (frame["lower_adjusted"] > 0) | (frame["upper_adjusted"] < 0)
            assert (outside == (frame["p_adjusted"] < 1 - confidence)).all()
        assert (frame["p_adjusted"] >= frame["p"] * (1 - 1e-9)).all()
        assert (((frame["lower"] > 0) | (frame["upper"] < 0)) == (frame["p"] < 1 - confidence)).all()


@FEW
@given(experiments(), st.sampled_from([0.9, 0.95]))
def test_comparisons_with_a_control_fit_their_intervals(drawn, confidence):
    findings = analysed(drawn.frame, adjust="dunnett", control={"a": drawn.rows[-1]}, confidence=confidence)
    assert set(findings.comparisons["a"]["right"]) == {drawn.rows[-1]}
    assert "cells" not in findings.comparisons
    for frame in findings.comparisons.values():
        outside = (frame["lower_adjusted"] > 0) | (frame["upper_adjusted"] < 0)
        assert (outside == (frame["p_adjusted"] < 1 - confidence)).all()
