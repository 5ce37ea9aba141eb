"""Sums of squares as differences between nested models, and what each line of a table says about them."""

from dataclasses import dataclass
from fractions import Fraction

from mpmath import mp, mpf

from tests.oracle import tails
from tests.oracle.layout import Column, Experiment, Reading

Row = dict[str, object]
Source = tuple[str, int | None, Fraction]  # term, degrees of freedom (None where there is no hypothesis), sum of squares


@dataclass(frozen=True)
class Names:
    """Column names of the terms."""

    row: str
    column: str
    block: str | None


def number(value: Fraction | int) -> mpf:
    """A fraction at working precision."""
    fraction = Fraction(value)
    return mpf(fraction.numerator) / fraction.denominator


def step(experiment: Experiment, term: str, smaller: list[Column], larger: list[Column]) -> Source:
    """What the larger model explains beyond the smaller one."""
    before, after = experiment.fit(smaller), experiment.fit(larger)
    return term, after.rank - before.rank, before.residual_ss - after.residual_ss


def type_1(x: Experiment, names: Names, full: bool, column_first: bool) -> list[Source]:
    """Blocks first, then the factors in the order named, then the interaction."""
    factors = [(names.row, x.row_columns()), (names.column, x.column_columns())]
    sources, model = [], x.mean_column()
    for term, columns in [(names.block, x.block_columns())] * bool(x.blocks) + (factors[::-1] if column_first else factors):
        sources.append(step(x, term, model, model + columns))
        model = model + columns
    return sources + interaction(x, full)


def interaction(x: Experiment, full: bool) -> list[Source]:
    """What cell means explain beyond an additive model."""
    additive = x.row_columns() + x.column_columns() + x.block_columns()
    return [step(x, "interaction", additive, x.cell_columns() + x.block_columns())] if full else []


def type_2(x: Experiment, names: Names, full: bool) -> list[Source]:
    """Each term after all terms that do not contain it."""
    row, column, block = x.row_columns(), x.column_columns(), x.block_columns()
    factors = [step(x, names.row, column + block, row + column + block), step(x, names.column, row + block, row + column + block)]
    return block_source(x, names, full) + factors + interaction(x, full)


def block_source(x: Experiment, names: Names, full: bool) -> list[Source]:
    """Blocks after everything else in the model."""
    rest = x.cell_columns() if full else x.row_columns() + x.column_columns()
    return [step(x, names.block, rest, rest + x.block_columns())] if x.blocks else []


def type_3(x: Experiment, names: Names, full: bool) -> list[Source]:
    """Each term's sum-to-zero columns left out of the whole model; with an empty cell the factors have no such hypothesis."""
    if not full:
        return type_2(x, names, full)
    if not x.complete:
        return [*block_source(x, names, full), (names.row, None, Fraction(0)), (names.column, None, Fraction(0)), *interaction(x, full)]
    row, column = coded_rows(x), coded_columns(x)
    both = [lambda reading, f=f, g=g: f(reading) * g(reading) for f in row for g in column]
    whole = x.mean_column() + row + column + both + x.block_columns()
    factors = [
        step(x, names.row, x.mean_column() + column + both + x.block_columns(), whole),
        step(x, names.column, x.mean_column() + row + both + x.block_columns(), whole),
    ]
    return block_source(x, names, full) + factors + interaction(x, full)


def coded_rows(x: Experiment) -> list[Column]:
    """Sum-to-zero columns of the row factor: the last level is minus the sum of the others."""
    last = len(x.rows) - 1
    return [lambda reading, i=i: coded(reading.row, i, last) for i in range(last)]


def coded_columns(x: Experiment) -> list[Column]:
    """Sum-to-zero columns of the column factor."""
    last = len(x.columns) - 1
    return [lambda reading, j=j: coded(reading.column, j, last) for j in range(last)]


def coded(level: int, place: int, last: int) -> Fraction:
    """Deviation coding."""
    return Fraction(int(level == place) - int(level == last))


def total_ss(x: Experiment) -> Fraction:
    """Sum of squares about the mean."""
    return x.fit([one]).residual_ss


def one(reading: Reading) -> Fraction:
    """The constant column."""
    return Fraction(1)


def table(x: Experiment, sources: list[Source], full: bool, confidence: mpf) -> list[Row]:
    """Lines of the table: every source against the residual of the model, then residual and total."""
    model, count = (x.full if full else x.additive), len(x.readings)
    df2, residual, total = count - model.rank, model.residual_ss, total_ss(x)
    lines = [line(source, df2, residual, total, count, confidence) for source in sources]
    lines.append(empty_line("residual") | {"df": df2, "ss": number(residual), "ms": number(residual / df2)})
    return [*lines, empty_line("total") | {"df": count - 1, "ss": number(total)}]


def empty_line(term: str) -> Row:
    """A line with nothing defined yet."""
    keys = ("df", "ss", "ms", "f", "p", "partial_eta2", "partial_eta2_lower", "partial_eta2_upper", "omega2", "partial_omega2")
    return {"term": term} | dict.fromkeys(keys)


def line(source: Source, df2: int, residual: Fraction, total: Fraction, count: int, confidence: mpf) -> Row:
    """One source with its test and effect sizes."""
    term, df, ss = source
    if df is None:
        return empty_line(term)
    if df == 0:
        return empty_line(term) | {"df": 0, "ss": number(ss)}
    ms, mse = ss / df, residual / df2
    f = ms / mse
    low, high = tails.noncentrality(number(f), df, df2, confidence)
    return {
        "term": term, "df": df, "ss": number(ss), "ms": number(ms), "f": number(f), "p": tails.f_tail(number(f), df, df2),
        "partial_eta2": number(ss / (ss + residual)),
        "partial_eta2_lower": low / (low + count), "partial_eta2_upper": high / (high + count),  # Steiger 2004
        "omega2": number((ss - df * mse) / (total + mse)),
        "partial_omega2": number(df * (f - 1) / (df * (f - 1) + count)),
    }  # fmt: skip


def four_tables(x: Experiment, names: Names, full: bool, confidence: mpf) -> dict[str, list[Row]]:
    """All four ways of dividing the total."""
    return {
        "type_1": table(x, type_1(x, names, full, False), full, confidence),
        "type_1_column_first": table(x, type_1(x, names, full, True), full, confidence),
        "type_2": table(x, type_2(x, names, full), full, confidence),
        "type_3": table(x, type_3(x, names, full), full, confidence),
    }


def fit_summary(x: Experiment, full: bool, scale: str) -> Row:
    """How much the analysed model explains and what it leaves."""
    model, count, total = (x.full if full else x.additive), len(x.readings), total_ss(x)
    df2 = count - model.rank
    r2 = 1 - model.residual_ss / total
    ms = number(model.residual_ss / df2)
    adjusted = number(1 - (1 - r2) * Fraction(count - 1, df2))
    return {"r2": number(r2), "adjusted_r2": adjusted, "residual_df": df2, "residual_ms": ms, "sigma": mp.sqrt(ms), "scale": scale}
