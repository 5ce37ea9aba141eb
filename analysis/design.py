"""What can be said of the crossed layout before any test: counts, balance, empty cells, connection, and what follows from them."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from analysis.cells import Cells, Strata, cells_of, strata_of
from analysis.model import Model, Surfaces, row_column_parts
from analysis.observations import Factor, Observations
from analysis.refusals import BlockIsFactor, ConstantResponse, FactorsGoTogether, OneLevel, TooFewObservations
from analysis.rounding import shortest
from analysis.surfaces import BLOCK, ROW, codes_of, connected_parts


@dataclass(frozen=True, eq=False)
class Design:
    """The layout of the analysed observations and the models that it allows."""

    observed: Observations
    strata: Strata
    cells: Cells
    full: Model
    additive: Model
    wants_interaction: bool  # the study asks for the model with interaction

    @cached_property
    def analysed(self) -> Model:
        """The model that is analysed: the one asked for, or the additive one where no replication leaves a choice."""
        return self.full if self.wants_interaction and self.full.residual_df > 0 else self.additive

    @property
    def interaction_untestable(self) -> bool:
        """Return whether the interaction was asked for and no degree of freedom is left to judge it."""
        return self.wants_interaction and not self.analysed.interaction

    @property
    def single_values(self) -> bool:
        """Return whether no cell holds more than one observation."""
        return int(self.cells.n.max()) == 1

    @cached_property
    def balanced(self) -> bool:
        """Return whether every combination of row, column and block holds the same number of observations."""
        a, b, blocks = self.strata.levels
        return self.strata.n.size == a * b * blocks and bool((self.strata.n == self.strata.n[0]).all())

    @cached_property
    def empty_cells(self) -> tuple[tuple[str, str], ...]:
        """The combinations without an observation."""
        rows, columns = self.observed.row.levels, self.observed.column.levels
        return tuple((rows[i], columns[j]) for i, j in np.argwhere(self.cells.n == 0))

    @cached_property
    def parts(self) -> tuple[tuple[tuple[str, ...], tuple[str, ...]], ...]:
        """The connected parts of the layout, each as its row levels and column levels."""
        rows, columns = row_column_parts(self.strata)
        return tuple(
            (
                tuple(level for level, p in zip(self.observed.row.levels, rows, strict=True) if p == part),
                tuple(level for level, p in zip(self.observed.column.levels, columns, strict=True) if p == part),
            )
            for part in sorted(set(rows))
        )

    @property
    def connected(self) -> bool:
        """Return whether every level can be compared with every other of its factor."""
        return len(self.parts) == 1


def design_over(observed: Observations, wants_interaction: bool) -> Design:
    """Return the layout of some observations with its models; nothing is fitted before it is asked for."""
    strata = strata_of(observed)
    surfaces = Surfaces(strata)
    return Design(
        observed=observed,
        strata=strata,
        cells=cells_of(strata),
        full=Model(surfaces, interaction=True),
        additive=Model(surfaces, interaction=False),
        wants_interaction=wants_interaction,
    )


def refuse_unusable(design: Design) -> None:
    """Raise a Refusal for a response that never varies, columns that go together, or too few observations to judge chance."""
    observed = design.observed
    if design.strata.without_rounding(float(np.ptp(observed.offsets)) ** 2 * observed.size) == 0:
        raise ConstantResponse(observed.response, shortest(float(observed.values[0])), observed.size)
    _refuse_aliases(design)
    model = design.analysed
    if model.residual_df < 2:
        raise TooFewObservations(
            observed.size, model.parameters, "full" if model.interaction else "additive", observed.readings > observed.size
        )


def refuse_one_level(observed: Observations) -> None:
    """Raise OneLevel where a factor has nothing to compare."""
    for factor in (observed.row, observed.column):
        if factor.size == 1:
            raise OneLevel(factor.name, factor.levels[0])


def _refuse_aliases(design: Design) -> None:
    observed, strata = design.observed, design.strata
    a, b, blocks = strata.levels
    if min(a, b) > 1 and len(design.parts) == a == b:
        raise FactorsGoTogether(observed.row.name, observed.column.name)
    if observed.block is None:
        return
    for factor, name in ((observed.row, ROW), (observed.column, "column")):
        codes, size = codes_of(strata, name)
        parts = connected_parts(codes, codes_of(strata, BLOCK)[0], size, blocks)
        if size > 1 and len(set(parts.tolist())) == size == blocks:
            raise BlockIsFactor(observed.block.name, factor.name)


def notes(design: Design) -> tuple[str, ...]:
    """Return what the layout means for the answers, in sentences."""
    return (*_untestable(design), *_empties(design), *_parts_told(design), *_nesting(design), *_blocks_told(design), *_units(design))


def _untestable(design: Design) -> tuple[str, ...]:
    if not design.interaction_untestable:
        return ()
    why = "every filled cell holds one observation" if design.single_values else "no degree of freedom is left for the residual"
    return (
        f"The interaction cannot be tested because {why}: the model without interaction is analysed, and what looks like "
        f"interaction cannot be told from chance.",
    )


def _empties(design: Design) -> tuple[str, ...]:
    empty = design.empty_cells
    if not empty:
        return ()
    told = ", ".join(f"{row} × {column}" for row, column in empty[:6]) + (f" and {len(empty) - 6} more" if len(empty) > 6 else "")
    sentence = f"No observation for {told}: "
    if design.analysed.interaction:
        return (
            sentence + "with the interaction in the model the means over these rows and columns cannot be estimated, Type III is "
            "not defined for the factors, and Type II is used; effects that sum to zero are not defined.",
        )
    return (sentence + "the means of these cells are carried by the model without interaction.",)


def _parts_told(design: Design) -> tuple[str, ...]:
    if design.connected:
        return ()
    told = "; ".join(f"{', '.join(rows)} with {', '.join(columns)}" for rows, columns in design.parts)
    return (f"The layout falls into {len(design.parts)} parts that share no level ({told}): only levels inside one part can be compared.",)


def _nesting(design: Design) -> tuple[str, ...]:
    """Name a factor that lies inside the other: each of its levels occurs with one level of the other only."""
    filled = design.cells.n > 0
    row, column = design.observed.row, design.observed.column
    found = []
    for inner, outer, across in ((row, column, filled), (column, row, filled.T)):
        if outer.size > 1 and (across.sum(axis=1) == 1).all():
            found.append(
                f"Each level of “{inner.name}” occurs with one level of “{outer.name}” only: “{inner.name}” is nested in "
                f"“{outer.name}”, and the two are not crossed."
            )
    return tuple(found) if found else _lonely_levels(row, column, filled)


def _lonely_levels(row: Factor, column: Factor, filled: np.ndarray) -> tuple[str, ...]:
    notes = []
    for inner, outer, across in ((row, column, filled), (column, row, filled.T)):
        for level in np.flatnonzero(across.sum(axis=1) == 1) if outer.size > 1 else ():
            with_level = outer.levels[int(np.flatnonzero(across[level])[0])]
            notes.append(f"“{inner.levels[level]}” of “{inner.name}” was tried with “{with_level}” of “{outer.name}” only.")
    return tuple(notes)


def _blocks_told(design: Design) -> tuple[str, ...]:
    """Say where a block column takes no part, or keeps means from being estimated."""
    block = design.observed.block
    if block is None:
        return ()
    if block.size == 1:
        return (f"All usable rows are in one block of “{block.name}”, so the block takes no part.",)
    filled = design.cells.n.ravel() > 0
    if design.analysed.cells.estimable[filled].all():
        return ()
    return (
        f"Some combinations share no block of “{block.name}”, not even through others: their differences cannot be told apart from "
        "differences between blocks, and means over the blocks are not given for them.",
    )


def _units(design: Design) -> tuple[str, ...]:
    observed = design.observed
    if observed.readings == observed.size:
        return ()
    df = design.analysed.residual_df
    before = observed.readings - design.analysed.parameters
    return (
        f"Residual degrees of freedom: {df} with the unit as the observation; {before} if every reading had been counted as independent.",
    )
