"""Cell means, marginal means and effects with their standard errors, from the weights on the model's parameters."""

from dataclasses import dataclass
from fractions import Fraction

from mpmath import mp, mpf

from tests.oracle import tails
from tests.oracle.layout import Experiment, average
from tests.oracle.sweep import Fit, Vector
from tests.oracle.tables import Row, number


@dataclass(frozen=True, eq=False)
class Analysis:
    """An experiment with the model that answers, and the residual that judges."""

    x: Experiment
    full: bool
    confidence: mpf

    @property
    def model(self) -> Fit:
        """The analysed model."""
        return self.x.full if self.full else self.x.additive

    @property
    def df(self) -> int:
        """Residual degrees of freedom of the analysed model."""
        return len(self.x.readings) - self.model.rank

    @property
    def ms(self) -> Fraction:
        """Residual mean square of the analysed model."""
        return self.model.residual_ss / self.df

    def margin(self, row: int | None, column: int | None) -> Vector | None:
        """Weights of the analysed model on an equal-weight marginal mean."""
        rows = range(len(self.x.rows)) if row is None else [row]
        columns = range(len(self.x.columns)) if column is None else [column]
        weights = self.x.cell_weights if self.full else self.x.additive_weights
        return average([weights(i, j) for i in rows for j in columns])


def estimate(model: Fit, weights: Vector | None) -> Fraction | None:
    """The estimate, or None where the data say nothing about it."""
    return model.value(weights) if weights is not None and model.estimable(weights) else None


def told(model: Fit, weights: Vector | None, ms: Fraction, df: int, confidence: mpf) -> dict[str, mpf | None]:
    """Estimate, standard error and interval."""
    value = estimate(model, weights)
    if value is None:
        return dict.fromkeys(("estimate", "se", "lower", "upper"))
    se = mp.sqrt(number(model.product(weights, weights) * ms))
    half = tails.t_point(1 - confidence, df) * se
    return {"estimate": number(value), "se": se, "lower": number(value) - half, "upper": number(value) + half}


def mean_and_sd(values: Vector) -> tuple[mpf | None, mpf | None]:
    """Plain mean and standard deviation."""
    if not values:
        return None, None
    mean = sum(values, Fraction(0)) / len(values)
    variance = sum((v - mean) ** 2 for v in values) / (len(values) - 1) if len(values) > 1 else None
    return number(mean), None if variance is None else mp.sqrt(number(variance))


def cells(a: Analysis) -> list[Row]:
    """Every cell, filled or not."""
    return [cell(a, i, j) for i in range(len(a.x.rows)) for j in range(len(a.x.columns))]


def cell(a: Analysis, i: int, j: int) -> Row:
    """The full model's estimate, judged by the residual of the analysed model."""
    values = a.x.values(i, j)
    mean, sd = mean_and_sd(values)
    own = {"row": a.x.rows[i], "column": a.x.columns[j], "n": len(values), "mean": mean, "sd": sd}
    return own | told(a.x.full, a.x.cell_weights(i, j), a.ms, a.df, a.confidence)


def marginal_means(a: Analysis, by_row: bool) -> list[Row]:
    """Equal-weight means of one factor's levels under the analysed model, beside the plain ones."""
    levels = a.x.rows if by_row else a.x.columns
    return [marginal_mean(a, level, (place, None) if by_row else (None, place)) for place, level in enumerate(levels)]


def marginal_mean(a: Analysis, level: str, at: tuple[int | None, int | None]) -> Row:
    """One level."""
    values = a.x.values(*at)
    line = told(a.model, a.margin(*at), a.ms, a.df, a.confidence)
    found = line.pop("estimate")
    extra = {"raw_mean": mean_and_sd(values)[0], "n": len(values), "estimable": found is not None}
    return {"level": level, "mean": found, "df": a.df} | line | extra


def additive_means(a: Analysis) -> list[Row]:
    """What the additive model fits in every cell, with its own residual."""
    plain = Analysis(a.x, False, a.confidence)
    lines = []
    for i, row in enumerate(a.x.rows):
        for j, column in enumerate(a.x.columns):
            line = told(a.x.additive, a.x.additive_weights(i, j), plain.ms, plain.df, a.confidence)
            lines.append({"row": row, "column": column, "mean": line.pop("estimate")} | line)
    return lines


def effects(a: Analysis) -> Row:
    """Sum-to-zero effects; the interaction only where it is in the analysed model."""
    grand = estimate(a.model, a.margin(None, None))
    rows = {level: less(estimate(a.model, a.margin(i, None)), grand) for i, level in enumerate(a.x.rows)}
    columns = {level: less(estimate(a.model, a.margin(None, j)), grand) for j, level in enumerate(a.x.columns)}
    return {"grand_mean": None if grand is None else number(grand), "row": rows, "column": columns, "interaction": interactions(a)}


def less(value: Fraction | None, other: Fraction | None) -> mpf | None:
    """A difference, unknown when a part is."""
    return None if value is None or other is None else number(value - other)


def interactions(a: Analysis) -> dict[str, dict[str, mpf | None]] | None:
    """What is left of each cell after both main effects."""
    if not a.full:
        return None
    return {row: {column: departure(a, i, j) for j, column in enumerate(a.x.columns)} for i, row in enumerate(a.x.rows)}


def departure(a: Analysis, i: int, j: int) -> mpf | None:
    """Cell less row less column plus grand mean."""
    parts = [estimate(a.model, a.margin(*at)) for at in ((i, j), (i, None), (None, j), (None, None))]
    return None if None in parts else number(parts[0] - parts[1] - parts[2] + parts[3])
