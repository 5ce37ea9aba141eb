"""What the sentences are read from: the tables, means and comparisons of one analysis, and its names as they read aloud."""

from collections.abc import Mapping
from dataclasses import dataclass

import pandas as pd

from analysis.design import Design
from analysis.observations import Factor
from analysis.scales import Scale
from analysis.study import Study


@dataclass(frozen=True, eq=False)
class Evidence:
    """What the sentences are read from."""

    layout: Design
    study: Study
    table: pd.DataFrame
    comparisons: Mapping[str, pd.DataFrame | None]
    simple_effects: pd.DataFrame
    interaction_contrasts: pd.DataFrame | None
    marginal_means: Mapping[str, pd.DataFrame]
    cells: pd.DataFrame

    @property
    def alpha(self) -> float:
        """The level at which something is called decided."""
        return 1 - self.study.confidence

    @property
    def unit(self) -> str:
        """The unit of the response with a space before it, or nothing."""
        observed = self.layout.observed
        return f" {observed.unit}" if observed.unit and observed.scale.is_identity else ""

    @property
    def row(self) -> Factor:
        """The row factor."""
        return self.layout.observed.row

    @property
    def column(self) -> Factor:
        """The column factor."""
        return self.layout.observed.column

    @property
    def response(self) -> str:
        """The response as it reads in a sentence."""
        return self.layout.observed.word

    @property
    def scale(self) -> Scale:
        """The scale analysed."""
        return self.layout.observed.scale

    @property
    def tells_sizes(self) -> bool:
        """Whether a difference on this scale is one, or a ratio, in original units."""
        return self.scale.is_identity or self.scale.tells_ratios

    def tested(self, term: str) -> pd.Series | None:
        """Return the table's row of a term, or None where it has no F."""
        terms = self.table["term"].tolist()
        row = self.table.iloc[terms.index(term)] if term in terms else None
        return None if row is None or pd.isna(row["f"]) else row
