"""Spread tests, case statistics, the robust Wald test and the non-additivity test, from their definitions."""

from fractions import Fraction

from mpmath import mp, mpf

from tests.oracle import tails
from tests.oracle.layout import Experiment, Reading
from tests.oracle.means import Analysis
from tests.oracle.sweep import Fit, Vector, fit
from tests.oracle.tables import Names, Row, number


def groups(x: Experiment) -> list[Vector]:
    """Cells with at least two readings."""
    return [x.values(i, j) for i, j in x.cells if len(x.values(i, j)) > 1]


def one_way(parts: list[Vector]) -> Row | None:
    """F between groups."""
    df1, df2 = len(parts) - 1, sum(map(len, parts)) - len(parts)
    if df1 < 1:
        return None
    means = [sum(part) / len(part) for part in parts]
    grand = sum(map(sum, parts)) / sum(map(len, parts))
    between = sum(len(part) * (mean - grand) ** 2 for part, mean in zip(parts, means, strict=True))
    inside = sum((v - mean) ** 2 for part, mean in zip(parts, means, strict=True) for v in part)
    if inside == 0:  # two readings are equally far from their middle
        return None
    f = number(between / df1 / (inside / df2))
    return {"f": f, "df1": df1, "df2": df2, "p": tails.f_tail(f, df1, df2)}


def levene(x: Experiment) -> Row | None:
    """Absolute distances from the cell mean (Levene 1960)."""
    return one_way([[abs(v - sum(part) / len(part)) for v in part] for part in groups(x)])


def brown_forsythe(x: Experiment) -> Row | None:
    """Absolute distances from the cell median (Brown and Forsythe 1974, JASA 69, 364-367)."""
    return one_way([[abs(v - median(part)) for v in part] for part in groups(x)])


def median(values: Vector) -> Fraction:
    """Middle value, or the mean of the two middle ones."""
    ordered = sorted(values)
    return (ordered[(len(ordered) - 1) // 2] + ordered[len(ordered) // 2]) / 2


def bartlett(x: Experiment) -> Row | None:
    """Pooled against separate variances (Bartlett 1937, Proc. R. Soc. A 160, 268-282)."""
    parts = groups(x)
    df = [len(part) - 1 for part in parts]
    variances = [number(sum((v - sum(part) / len(part)) ** 2 for v in part) / (len(part) - 1)) for part in parts]
    if len(parts) < 2 or min(variances) == 0:
        return None
    pooled = sum(d * s for d, s in zip(df, variances, strict=True)) / sum(df)
    raw = sum(df) * mp.log(pooled) - sum(d * mp.log(s) for d, s in zip(df, variances, strict=True))
    chi2 = raw / (1 + (sum(mpf(1) / d for d in df) - mpf(1) / sum(df)) / (3 * (len(parts) - 1)))
    return {"chi2": chi2, "df": len(parts) - 1, "p": tails.chi2_tail(chi2, len(parts) - 1)}


def design_rows(x: Experiment, full: bool) -> list[Vector]:
    """The design matrix of a model."""
    columns = (x.cell_columns() if full else x.row_columns() + x.column_columns()) + x.block_columns()
    return [[column(reading) for column in columns] for reading in x.readings]


def influence(a: Analysis) -> list[Row]:
    """Residual, leverage, both studentised residuals and Cook's distance of every reading."""
    return [case(a, reading, row) for reading, row in zip(a.x.readings, design_rows(a.x, a.full), strict=True)]


def case(a: Analysis, reading: Reading, row: Vector) -> Row:
    """One reading (Cook and Weisberg 1982, Residuals and Influence in Regression, ch. 2)."""
    fitted, h = a.model.value(row), a.model.product(row, row)
    line = {"fitted": number(fitted), "residual": number(reading.y - fitted), "leverage": number(h)}
    if h == 1:
        return line | dict.fromkeys(("student_internal", "student_external", "cook"))
    inside = number(reading.y - fitted) / mp.sqrt(number(a.ms * (1 - h)))
    left = a.df - inside**2
    outside = inside * mp.sqrt((a.df - 1) / left) if a.df > 1 and left > 0 else None
    return line | {"student_internal": inside, "student_external": outside, "cook": inside**2 * number(h / (1 - h)) / a.model.rank}


def hc3(a: Analysis, names: Names) -> list[Row]:
    """Wald F of the equal-weight hypotheses, e^2 / (1 - h)^2 as variances (MacKinnon and White 1985, J. Econometrics 29, 305-325)."""
    rows = design_rows(a.x, a.full)
    if any(a.model.product(row, row) == 1 for row in rows) or (a.full and not a.x.complete):
        terms = (names.row, names.column, "interaction")[: 3 if a.full else 2]
        return [{"term": term} | dict.fromkeys(("f", "df1", "df2", "p")) for term in terms]
    weights = [(r.y - a.model.value(row)) / (1 - a.model.product(row, row)) for r, row in zip(a.x.readings, rows, strict=True)]
    influences = [[e * share for share in spread(a.model, row)] for e, row in zip(weights, rows, strict=True)]
    return [wald(a, term, hypotheses, influences) for term, hypotheses in equal_weight_hypotheses(a, names)]


def spread(model: Fit, row: Vector) -> Vector:
    """How a unit change of this reading moves every parameter."""
    return [sum(row[m] * model.inverse[m][k] for m in model.kept) for k in range(len(row))]


def equal_weight_hypotheses(a: Analysis, names: Names) -> list[tuple[str, list[Vector]]]:
    """Differences of marginal means from the first, and of cells for the interaction."""
    m, n_rows, n_columns = a.margin, len(a.x.rows), len(a.x.columns)
    rows = [subtract(m(i, None), m(0, None)) for i in range(1, n_rows)]
    columns = [subtract(m(None, j), m(None, 0)) for j in range(1, n_columns)]
    both = [subtract(subtract(m(i, j), m(i, 0)), subtract(m(0, j), m(0, 0))) for i in range(1, n_rows) for j in range(1, n_columns)]
    return [(names.row, rows), (names.column, columns)] + [("interaction", both)] * a.full


def subtract(left: Vector, right: Vector) -> Vector:
    """Difference of two weight vectors."""
    return [p - q for p, q in zip(left, right, strict=True)]


def wald(a: Analysis, term: str, hypotheses: list[Vector], influences: list[Vector]) -> Row:
    """Estimates against the covariance of the weighted residuals: their quadratic form falls out of a least squares fit."""
    if not hypotheses:  # a factor with one level
        return {"term": term} | dict.fromkeys(("f", "df1", "df2", "p"))
    estimates = [a.model.value(h) for h in hypotheses]
    moves = [[sum(p * q for p, q in zip(h, row, strict=True)) for h in hypotheses] for row in influences]
    covariance = [[sum(row[i] * row[j] for row in moves) for j in range(len(hypotheses))] for i in range(len(hypotheses))]
    inverse = solve(covariance, estimates)
    f = number(sum(p * q for p, q in zip(estimates, inverse, strict=True)) / len(hypotheses))
    return {"term": term, "f": f, "df1": len(hypotheses), "df2": a.df, "p": tails.f_tail(f, len(hypotheses), a.df)}


def solve(matrix: list[Vector], right: Vector) -> Vector:
    """Solve a square system as a least squares fit without residual."""
    return fit(matrix, right).solution


def nonadditivity(x: Experiment) -> Row | None:
    """One degree of freedom for the squared additive fit (Tukey 1949; for any layout Milliken and Graybill 1970, JASA 65, 797-807)."""
    if x.additive.rank < len(x.rows) + len(x.columns) - 1 + max(len(x.blocks) - 1, 0):
        return None  # in separate parts the effects have no common origin, and their product depends on it
    rows = design_rows(x, False)
    grand = sum(r.y for r in x.readings) / len(x.readings)
    extended: Fit = fit([[*row, (x.additive.value(row) - grand) ** 2] for row in rows], [r.y for r in x.readings])
    df2 = len(x.readings) - extended.rank
    if extended.rank == x.additive.rank or df2 < 1:
        return None
    ss = x.additive.residual_ss - extended.residual_ss
    f = number(ss / (extended.residual_ss / df2))
    return {"f": f, "df1": 1, "df2": df2, "p": tails.f_tail(f, 1, df2)}
