"""Everything computed from one study, each part when it is first asked for."""

import importlib.metadata
import platform
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, cached_property
from types import MappingProxyType
from typing import Any

import numpy as np
import pandas as pd

from analysis import anova, answers, checking, contrasts, design, families, five_numbers, lettering, means, plain, second_route, trends
from analysis.answers import Answer
from analysis.design import Design
from analysis.doubting import order
from analysis.doubting.beside import beside
from analysis.doubting.signs import Signs
from analysis.estimates import Estimates
from analysis.evidence import Evidence
from analysis.families import Choices, Slice
from analysis.holding import agreement, refits, table
from analysis.holding.analysed import Analysed
from analysis.layout import lay_out
from analysis.model import Model
from analysis.observations import Factor, Observations
from analysis.refusals import UnknownLevel
from analysis.study import Study

VERSION = "0.1.0"
LIBRARIES = ("numpy", "pandas", "scipy", "statsmodels")
PARTS = (
    "design", "cells", "tables", "tables_additive", "used", "fit", "effects", "marginal_means", "additive_means", "comparisons",
    "simple_effects", "interaction_contrasts", "letters", "checks", "doubts", "holds", "answers", "versions",
)  # fmt: skip


@dataclass(frozen=True, eq=False)
class Findings:
    """The answers to a study: every attribute named in PARTS, lists of rows as pandas frames."""

    study: Study
    layout: Design

    def __repr__(self) -> str:
        return f"Findings({self.study!r})"

    @property
    def observed(self) -> Observations:
        """The analysed observations."""
        return self.layout.observed

    @property
    def model(self) -> Model:
        """The model analysed."""
        return self.layout.analysed

    @property
    def names(self) -> anova.Names:
        """What the terms are called."""
        return anova.Names(*self.study.factors, self.study.block)

    @cached_property
    def tables(self) -> Mapping[str, pd.DataFrame]:
        """The tables of the model analysed; raises TwoRoutesDisagree where a second computation does not confirm them."""
        tables = anova.tables(self.model, self.names, self.study.confidence)
        second_route.confirm(self.observed, self.model.interaction, self.names, tables)
        return tables

    @cached_property
    def tables_additive(self) -> Mapping[str, pd.DataFrame] | None:
        """The tables of the model without interaction; None where it leaves no residual."""
        if self.layout.additive.residual_df < 1:
            return None
        return anova.tables(self.layout.additive, self.names, self.study.confidence)

    @cached_property
    def tables_full(self) -> Mapping[str, pd.DataFrame] | None:
        """The tables of the model with interaction, whichever model is analysed; None where it leaves no residual."""
        if self.layout.full.residual_df < 1:
            return None
        return self.tables if self.model.interaction else anova.tables(self.layout.full, self.names, self.study.confidence)

    @cached_property
    def used(self) -> Mapping[str, str]:
        """Which table the answers read, and why."""
        return answers.table_used(self.layout, self.tables)

    @cached_property
    def used_table(self) -> pd.DataFrame:
        """The table that the answers read."""
        return self.tables[self.used["table"]]

    @cached_property
    def fit(self) -> Mapping[str, Any]:
        """How well the model analysed fits."""
        r2, adjusted = anova.r_squared(self.model)
        ms = self.model.residual_ms
        return {
            "r2": r2,
            "adjusted_r2": adjusted,
            "residual_df": self.model.residual_df,
            "residual_ms": ms,
            "sigma": float(np.sqrt(ms)),
            "scale": self.study.scale,
        }

    @property
    def residual_sd(self) -> float:
        """Standard deviation of the residuals as they are, with n - 1 degrees of freedom."""
        return float(np.sqrt(self.model.residual_ss / (self.observed.size - 1)))

    @cached_property
    def cells(self) -> pd.DataFrame:
        """One row a cell, empty ones included."""
        return means.cell_frame(self.observed, self.layout.cells, self.layout.full, self.model, self.study.confidence)

    @cached_property
    def five_numbers(self) -> pd.DataFrame:
        """Lowest observation, quartiles, median and highest of each cell, in original units."""
        return five_numbers.by_cell(self.observed)

    @cached_property
    def marginal_means(self) -> Mapping[str, pd.DataFrame]:
        """Equal-weight means of each factor."""
        return {
            factor.name: means.margin_frame(factor, axis, self.observed, self.layout.cells, self.model, self.study.confidence)
            for factor, axis in ((self.observed.row, 1), (self.observed.column, 0))
        }

    @cached_property
    def effects(self) -> Mapping[str, Any]:
        """Effects that sum to zero."""
        return means.effects(self.observed, self.model)

    @cached_property
    def additive_means(self) -> pd.DataFrame | None:
        """Cell means fitted without interaction; None where that model leaves no residual."""
        if self.layout.additive.residual_df < 1:
            return None
        return means.additive_frame(self.observed, self.layout.additive, self.study.confidence)

    @cached_property
    def choices(self) -> Choices:
        """What the study decides about comparisons."""
        matters = self.study.matters if self.observed.scale.is_identity else None
        return Choices(self.study.adjust, self.study.confidence, matters)

    @cached_property
    def control(self) -> Mapping[str, int] | None:
        """Index of the control level of each factor where comparisons are made with a control, else None."""
        if self.study.adjust != "dunnett":
            return None
        return {factor.name: _control_index(self.study, factor.name, factor.levels) for factor in (self.observed.row, self.observed.column)}

    @cached_property
    def families(self) -> Mapping[str, tuple[Slice, ...]]:
        """The means that each family compares."""
        levels = (self.observed.row.levels, self.observed.column.levels)
        return families.families(self.model, self.layout.full, self.study.factors, levels, self.control)

    @cached_property
    def comparisons(self) -> Mapping[str, pd.DataFrame | None]:
        """The comparisons of each family; None for a family too large to write out."""
        return {name: self._family(slices) for name, slices in self.families.items()}

    def _too_large(self) -> list[str]:
        """Return what holds too many comparisons to be written out."""
        large = [name for name, slices in self.families.items() if families.size_of(slices) > families.MOST_COMPARISONS]
        return large if contrasts.count(self.observed.shape) <= families.MOST_COMPARISONS else [*large, "differences of differences"]

    def _family(self, slices: tuple[Slice, ...]) -> pd.DataFrame | None:
        if families.size_of(slices) > families.MOST_COMPARISONS:
            return None
        return families.told(self.observed.scale, families.family_frame(slices, self.model, self.choices))

    @cached_property
    def simple_effects(self) -> pd.DataFrame:
        """F tests of each factor inside each level of the other."""
        row, column = self.study.factors
        both = ((row, families.within_name(row, column)), (column, families.within_name(column, row)))
        return pd.concat([contrasts.simple_effects(name, self.families[family], self.model) for name, family in both], ignore_index=True)

    @cached_property
    def interaction_contrasts(self) -> pd.DataFrame | None:
        """All differences of differences; None where there are too many to write out."""
        if contrasts.count(self.observed.shape) > families.MOST_COMPARISONS:
            return None
        dimension = self.layout.full.parameters - self.layout.additive.parameters
        levels = (self.observed.row.levels, self.observed.column.levels)
        return contrasts.interaction_contrasts(self.layout.full.cells, *levels, self.model, self.choices, dimension)

    @cached_property
    def trends(self) -> pd.DataFrame:
        """Straight trend, curvature and departure of every factor whose levels are amounts; empty where neither's are."""
        frames = [
            trends.trends(factor.name, amounts, overall, slices, self.model, self.study.confidence)
            for factor, amounts, overall, slices in self._along_amounts()
        ]
        return pd.concat(frames, ignore_index=True) if frames else pd.DataFrame(columns=list(trends.COLUMNS))

    @cached_property
    def trend_curves(self) -> pd.DataFrame:
        """The straight line and the curve behind `trends`, on the scale analysed, to be drawn along the amounts."""
        frames = [
            trends.curves(factor.name, amounts, overall, slices, self.observed.pivot)
            for factor, amounts, overall, slices in self._along_amounts()
        ]
        return pd.concat(frames, ignore_index=True) if frames else pd.DataFrame(columns=list(trends.CURVE_COLUMNS))

    def _along_amounts(self) -> list[tuple[Factor, tuple[float, ...], Estimates, tuple[Slice, ...]]]:
        """Return every factor whose levels are amounts, with its means on average and within each level of the other."""
        row, column = self.observed.row, self.observed.column
        sides = ((row, column, self.model.row_means), (column, row, self.model.column_means))
        return [
            (factor, factor.amounts, overall, self.families[families.within_name(factor.name, other.name)])
            for factor, other, overall in sides
            if factor.amounts is not None and factor.size > 1
        ]

    def spacing(self, factor: str) -> tuple[float, ...] | None:
        """Return the amounts that a factor's levels stand for, in their order; None where they count as groups."""
        return self.observed.factor(factor).amounts

    def contrast(self, weights: Mapping[tuple[str, str], float]) -> contrasts.Contrast:
        """Return any weighted combination of cell means, with test and interval; weights are keyed by (row, column) levels.

        Raises UnknownLevel for a cell that is not there and NotEstimable where the layout leaves the combination open.
        """
        return contrasts.contrast(weights, self.observed, self.layout.full.cells, self.model, self.study.confidence)

    @cached_property
    def letters(self) -> Mapping[str, Mapping[str, str]] | None:
        """Compact letter display of each family at the adjusted level; None against a control."""
        if self.control is not None:
            return None
        return lettering.letters_of(self.families, self.comparisons, 1 - self.study.confidence)

    @cached_property
    def checks(self) -> Mapping[str, Any]:
        """Checks of the model on its residuals."""
        return checking.checks(self.layout, self.study.confidence)

    @cached_property
    def doubts(self) -> pd.DataFrame:
        """What would make a careful reader doubt the answers, most serious first."""
        found = order.doubts(Signs(self.analysed, self.holds, beside(self.study, self.observed)))
        return pd.DataFrame([vars(doubt) for doubt in found], columns=["kind", "level", "sentence", "rows"])

    @cached_property
    def analysed(self) -> Analysed:
        """What the other defensible analyses are held against."""
        whole = refits.put_back(self.study, self.layout)
        return Analysed(self.layout, self.names, self.used["table"], self.checks, self.study.confidence, whole)

    @cached_property
    def holds(self) -> pd.DataFrame:
        """The defensible analyses, one row for each analysis and question; permutation included."""
        return table.holds(self.analysed)

    def hold(self, progress: table.Progress) -> pd.DataFrame:
        """Return the defensible analyses, telling the progress where they are not computed yet."""
        if "holds" not in self.__dict__:
            self.__dict__["holds"] = table.holds(self.analysed, progress)
        return self.holds

    @property
    def holds_sentence(self) -> str:
        """Whether the answers hold whichever analysis is taken, in one sentence."""
        return agreement.told(self.holds)

    @cached_property
    def answers(self) -> tuple[Answer, ...]:
        """The three questions in words."""
        return answers.three_answers(
            Evidence(
                layout=self.layout,
                study=self.study,
                table=self.used_table,
                comparisons=self.comparisons,
                simple_effects=self.simple_effects,
                interaction_contrasts=self.interaction_contrasts,
                marginal_means=self.marginal_means,
                cells=self.cells,
            )
        )

    @cached_property
    def observations(self) -> pd.DataFrame:
        """One row an analysed observation: its cell, value, fitted value and residual on the analysed scale, and its file row."""
        observed, strata = self.observed, self.layout.strata
        fitted = means.fitted_values(observed, strata, self.model)
        block = None if observed.block is None else np.array(observed.block.levels, dtype=object)[observed.block.codes]
        return pd.DataFrame(
            {
                "row": np.array(observed.row.levels, dtype=object)[observed.row.codes],
                "column": np.array(observed.column.levels, dtype=object)[observed.column.codes],
                "block": block,
                "value": observed.values,
                "fitted": fitted + observed.pivot,
                "residual": observed.offsets - fitted,
                "file_row": observed.file_rows,
            }
        )

    @property
    def notes(self) -> tuple[str, ...]:
        """What the reader decided and what the layout means for the answers, in sentences."""
        return (*self.observed.notes, *design.notes(self.layout))

    @cached_property
    def design(self) -> Mapping[str, Any]:
        """The layout as the object tells it."""
        observed, layout = self.observed, self.layout
        return {
            "response": observed.response,
            "row_factor": observed.row.name,
            "column_factor": observed.column.name,
            "block": None if observed.block is None else observed.block.name,
            "row_levels": list(observed.row.levels),
            "column_levels": list(observed.column.levels),
            "counts": layout.cells.n.tolist(),
            "balanced": layout.balanced,
            "empty_cells": [list(cell) for cell in layout.empty_cells],
            "connected": layout.connected,
            "observations": observed.readings,
            "left_out": [{"row": entry.row, "why": entry.why} for entry in observed.left_out],
            "notes": [*self.notes, *self._undefined()],
        }

    def _undefined(self) -> list[str]:
        """Return the reason for every part of the object that is not defined for this study."""
        reasons = {
            "The model without interaction leaves no residual here, so its tables and means are not given.": self.tables_additive is None,
            "The model analysed has no interaction, so there are no interaction effects to list.": not self.model.interaction,
            "The model fits every observation exactly, so there is no chance variation to test against: no F, t or p is given.": (
                self.model.residual_ms == 0
            ),
            "Comparisons are made with a control, so there is no family of all cells and there are no letters.": self.control is not None,
            "The smallest difference that matters is in units of the response and is not applied on another scale.": (
                self.study.matters is not None and self.choices.matters is None
            ),
            **checking.reasons(self.layout),
        }
        large = [f"The family “{name}” holds too many comparisons to be written out one by one." for name in self._too_large()]
        return [*(sentence for sentence, applies in reasons.items() if applies), *large]

    @property
    def versions(self) -> Mapping[str, str]:
        """Versions of what computed this."""
        return _versions()

    def to_dict(self) -> dict[str, Any]:
        """Return the whole object in plain values: no NaN, None where something is undefined."""
        return {name: plain.plain(getattr(self, name)) for name in PARTS}


@cache
def _versions() -> Mapping[str, str]:
    libraries = {name: importlib.metadata.version(name) for name in LIBRARIES}
    return MappingProxyType({"crossgrain": VERSION, "python": platform.python_version(), **libraries})


def analyse(study: Study) -> Findings:
    """Return the findings of a study; cheap, since each part is computed when it is first asked for.

    Raises a Refusal where the table or the choices cannot be analysed. A factor with one level is analysed as it is: the
    one-way case.
    """
    found = Findings(study, design.design_over(lay_out(study), study.model == "full"))
    design.refuse_unusable(found.layout)
    return found


def _control_index(study: Study, factor: str, levels: tuple[str, ...]) -> int:
    """Return the index of a factor's control level, the first one where none was chosen."""
    chosen = study.control.get(factor, levels[0])
    if chosen not in levels:
        raise UnknownLevel(factor, chosen, levels)
    return levels.index(chosen)
