"""The analysis of variance tables: Type I in both orders, II and III, with effect sizes."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import pandas as pd

from analysis import tails
from analysis.distributions import noncentral_f
from analysis.estimates import Estimates
from analysis.model import Model
from analysis.surfaces import BLOCK, CELL, COLUMN, ROW, Surface, distance

TYPES = ("type_1", "type_1_column_first", "type_2", "type_3")
INTERACTION, RESIDUAL, TOTAL = "interaction", "residual", "total"
COLUMNS = (
    "term", "df", "ss", "ms", "f", "p",
    "partial_eta2", "partial_eta2_lower", "partial_eta2_upper", "omega2", "partial_omega2",
)  # fmt: skip


@dataclass(frozen=True)
class Part:
    """One term's share of the variation; None where the hypothesis is not defined."""

    term: str
    df: int | None
    ss: float | None  # squared response units


@dataclass(frozen=True)
class Names:
    """How the terms are called in a table: by the columns of the user's file."""

    row: str
    column: str
    block: str | None


def parts(model: Model, names: Names, kind: str) -> tuple[Part, ...]:
    """Return the terms of one type of table, in the order in which they are told.

    Type I adds the terms one after another; Type II adjusts each for every term that does not contain it; Type III tests
    equality of equal-weight means. The block comes first in Type I and is adjusted for all else in II and III.
    Source: Searle (1987), Linear Models for Unbalanced Data, ch. 4; Yates (1934), JASA 29, 51-66.
    """
    first = [_block_part(model, names, kind)] if names.block is not None else []
    if kind in ("type_1", "type_1_column_first"):
        return (*first, *_sequential(model, names, row_first=kind == "type_1"), *_interaction(model))
    if kind == "type_2" or not model.interaction:
        return (*first, *_each_after_the_other(model, names), *_interaction(model))
    return (*first, *_equal_weights(model, names), *_interaction(model))


def _added(model: Model, term: str, larger: Surface, smaller: Surface) -> Part:
    ss = model.strata.without_rounding(distance(model.strata, larger, smaller))
    return Part(term, larger.rank - smaller.rank, ss)


def _block_part(model: Model, names: Names, kind: str) -> Part:
    surfaces = model.surfaces
    if kind.startswith("type_1"):
        return _added(model, str(names.block), surfaces.without_block(BLOCK), surfaces.without_block())
    factors = (CELL,) if model.interaction else (ROW, COLUMN)
    return _added(model, str(names.block), model.surface, surfaces.without_block(*factors))


def _sequential(model: Model, names: Names, *, row_first: bool) -> tuple[Part, Part]:
    over = model.surfaces.over
    order = ((ROW, names.row), (COLUMN, names.column))
    (one, one_name), (_, two_name) = order if row_first else order[::-1]
    return _added(model, one_name, over(one), over()), _added(model, two_name, over(ROW, COLUMN), over(one))


def _each_after_the_other(model: Model, names: Names) -> tuple[Part, Part]:
    both = model.surfaces.over(ROW, COLUMN)
    return _added(model, names.row, both, model.surfaces.over(COLUMN)), _added(model, names.column, both, model.surfaces.over(ROW))


def _interaction(model: Model) -> tuple[Part, ...]:
    if not model.interaction:
        return ()
    return (_added(model, INTERACTION, model.surface, model.surfaces.over(ROW, COLUMN)),)


def _equal_weights(model: Model, names: Names) -> tuple[Part, Part]:
    return _equal_means(names.row, model, model.row_means), _equal_means(names.column, model, model.column_means)


def _equal_means(term: str, model: Model, means: Estimates) -> Part:
    """Return the Type III part of a factor; not defined unless all its equal-weight means can be compared."""
    if means.value.size > 1 and len(means.comparable_groups()) > 1:
        return Part(term, None, None)
    ss, df = means.equality()
    return Part(term, df, model.strata.without_rounding(ss))


def total_ss(model: Model) -> float:
    """Return the sum of squares about the grand mean."""
    strata = model.strata
    return float(strata.within_ss.sum()) + model.surfaces.without_block().lack_of_fit


def table(model: Model, names: Names, kind: str, confidence: float) -> pd.DataFrame:
    """Return one analysis of variance table with effect sizes, one row a term, then residual and total."""
    total = total_ss(model)
    rows = [_term_row(part, model, total, confidence) for part in parts(model, names, kind)]
    ms = model.residual_ms if model.residual_df > 0 else None
    rows.append({"term": RESIDUAL, "df": model.residual_df, "ss": model.residual_ss, "ms": ms})
    rows.append({"term": TOTAL, "df": model.strata.observations - 1, "ss": total})
    return pd.DataFrame(rows, columns=list(COLUMNS))


def _term_row(part: Part, model: Model, total: float, confidence: float) -> dict[str, object]:
    if part.df is None or part.ss is None:
        return {"term": part.term}
    row: dict[str, object] = {"term": part.term, "df": part.df, "ss": part.ss}
    if part.df > 0:
        row["ms"] = part.ss / part.df
    if part.df > 0 and model.residual_df > 0 and model.residual_ms > 0:
        f = part.ss / part.df / model.residual_ms
        row |= {"f": f, "p": float(tails.f_upper(f, part.df, model.residual_df))}
        row |= effect_sizes(part.df, part.ss, f, model, total, confidence)
    return row


def effect_sizes(df: int, ss: float, f: float, model: Model, total: float, confidence: float) -> dict[str, float]:
    """Return partial eta squared with its noncentral F interval, omega squared and partial omega squared.

    Source: Steiger (2004), Psychological Methods 9, 164-182 (λ / (λ + N)); Hays (1963) for omega squared; Keren and
    Lewis (1979) for the partial form.
    """
    n = model.strata.observations
    low, high = noncentral_f.noncentrality_interval(f, df, model.residual_df, confidence)
    return {
        "partial_eta2": ss / (ss + model.residual_ss),
        "partial_eta2_lower": low / (low + n),
        "partial_eta2_upper": high / (high + n),
        "omega2": (ss - df * model.residual_ms) / (total + model.residual_ms),
        "partial_omega2": df * (f - 1) / (df * (f - 1) + n),
    }


def tables(model: Model, names: Names, confidence: float, kinds: Sequence[str] = TYPES) -> dict[str, pd.DataFrame]:
    """Return the tables of all types for one model."""
    return {kind: table(model, names, kind, confidence) for kind in kinds}


def r_squared(model: Model) -> tuple[float, float]:
    """Return R² and adjusted R² of a model; NaN where the response does not vary."""
    total, n = total_ss(model), model.strata.observations
    if total == 0 or model.residual_df <= 0:
        return float("nan"), float("nan")
    r2 = 1 - model.residual_ss / total
    return r2, 1 - (1 - r2) * (n - 1) / model.residual_df


def is_defined(frame: pd.DataFrame, term: str) -> bool:
    """Return whether a table tests this term."""
    df = dict(zip(frame["term"].tolist(), frame["df"].tolist(), strict=True)).get(term)
    return df is not None and bool(np.isfinite(df))
