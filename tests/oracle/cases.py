"""The fixed set of invented designs on which the engine and the oracle must agree; the seed makes them, nothing is drawn anew."""

import random
from collections.abc import Callable, Iterable

from tests.oracle.whole import Case

Row = tuple[str, str, str, str, str]
Count = Callable[[int, int], int]


def drawn(seed: int, rows: int, columns: int, count: Count, offset: int = 50, lean: float = 1.0) -> tuple[Row, ...]:
    """Readings with two decimals, effects of both factors and an interaction; count says how many a cell holds."""
    source = random.Random(seed)
    made = []
    for i in range(rows):
        for j in range(columns):
            centre = 3 * i - 2 * j + lean * (i * j % 3)
            made += [(f"a{i + 1}", f"b{j + 1}", "", "", decimal(offset, centre + source.gauss(0, 2))) for _ in range(count(i, j))]
    source.shuffle(made)
    return tuple(made)


def decimal(offset: int, deviation: float) -> str:
    """Offset plus two decimals, as text, so that a large offset loses nothing."""
    hundredths = offset * 100 + round(100 * deviation)
    return f"{hundredths // 100}.{hundredths % 100:02d}"


def in_blocks(seed: int, rows: int, columns: int, blocks: int, skip: Callable[[int, int, int], bool]) -> tuple[Row, ...]:
    """One reading of each cell in each block, without those skipped."""
    source = random.Random(seed)
    made: list[Row] = []
    for i in range(rows):
        for j in range(columns):
            for k in range(blocks):
                y = decimal(20, 2 * i - j + (i * j) + 1.5 * k + source.gauss(0, 1.5))
                made += [] if skip(i, j, k) else [(f"a{i + 1}", f"b{j + 1}", f"k{k + 1}", "", y)]
    return tuple(made)


def in_units(seed: int) -> tuple[Row, ...]:
    """Two by three cells, three units a cell (two in one), two or three readings a unit."""
    source = random.Random(seed)
    made: list[Row] = []
    for i in range(2):
        for j in range(3):
            for u in range(2 if (i, j) == (1, 2) else 3):
                centre = 4 * i + 2 * j + source.gauss(0, 2)
                readings = (decimal(30, centre + source.gauss(0, 1)) for _ in range(2 + (u + i) % 2))
                made += [(f"a{i + 1}", f"b{j + 1}", "", f"u{i}{j}{u}", y) for y in readings]
    return tuple(made)


def uneven(i: int, j: int) -> int:
    """Two to five readings, without pattern."""
    return 2 + (5 * i + 3 * j + i * j) % 4


def lacking(*holes: tuple[int, int]) -> Count:
    """Uneven cells, some of them empty."""
    return lambda i, j: 0 if (i, j) in holes else uneven(i, j)


def never(i: int, j: int, k: int) -> bool:
    """No plot missing."""
    return False


def all_cases() -> Iterable[Case]:
    """Every design with its choices."""
    yield Case("balanced", drawn(1, 3, 4, lambda i, j: 3))
    yield Case("balanced-additive-scheffe", drawn(2, 2, 3, lambda i, j: 4), {"model": "additive", "adjust": "scheffe"})
    yield Case("unequal", drawn(3, 3, 3, uneven))
    yield Case("unequal-additive", drawn(4, 3, 4, uneven), {"model": "additive"})
    yield Case("unequal-holm-90", drawn(5, 2, 4, uneven), {"adjust": "holm", "confidence": 0.9})
    yield Case("two-by-two-sidak-99", drawn(6, 2, 2, uneven), {"adjust": "sidak", "confidence": 0.99})
    yield Case("single-readings-among-others", drawn(7, 3, 3, lambda i, j: 1 + (i + 2 * j) % 3), {"adjust": "bonferroni"})
    yield Case("large-scheffe", drawn(8, 6, 5, uneven), {"adjust": "scheffe"})
    yield Case("large-none", drawn(9, 5, 7, lambda i, j: 1 + (i * j + i) % 3), {"adjust": "none"})
    yield Case("order-kept", drawn(10, 3, 3, uneven), {"adjust": "holm", "keep": {"a": ["a3", "a1", "a2"], "b": ["b2", "b3"]}})
    yield Case("dunnett", drawn(11, 4, 2, uneven), {"adjust": "dunnett"})
    yield Case("one-empty", drawn(12, 3, 3, lacking((1, 2))))
    yield Case("three-empty", drawn(13, 3, 4, lacking((0, 3), (1, 0), (2, 2))), {"adjust": "bonferroni"})
    yield Case("empty-additive", drawn(14, 4, 3, lacking((0, 0), (3, 2))), {"model": "additive", "adjust": "holm"})
    yield Case("unconnected", drawn(15, 4, 4, lambda i, j: 2 if (i < 2) == (j < 2) else 0), {"adjust": "holm"})
    yield Case("one-per-cell", drawn(16, 4, 5, lambda i, j: 1))
    yield Case("one-per-cell-missing", drawn(17, 4, 4, lambda i, j: int((i, j) != (2, 1))), {"adjust": "holm"})
    yield Case("blocks-complete", in_blocks(18, 2, 3, 4, never), {"adjust": "tukey"}, checks=False)
    missing = {(0, 1, 2), (2, 0, 0), (1, 2, 3)}
    yield Case("blocks-missing-plots", in_blocks(19, 3, 3, 4, lambda *p: p in missing), {"adjust": "holm"}, checks=False)
    yield Case("blocks-unequal", in_blocks(20, 3, 2, 5, lambda i, j, k: (i + 2 * j + k) % 3 == 0), {"adjust": "scheffe"}, checks=False)
    yield Case("blocks-additive", in_blocks(21, 3, 3, 3, lambda i, j, k: (i, j, k) == (1, 1, 1)), {"model": "additive"}, checks=False)
    yield Case("blocks-empty-cell", in_blocks(22, 3, 3, 4, lambda i, j, k: (i, j) == (2, 0)), {"adjust": "bonferroni"}, checks=False)
    yield Case("units", in_units(23), {"adjust": "tukey"})
    yield Case("offset-1e9", drawn(24, 3, 3, uneven, offset=10**9))
    yield Case("offset-1e12-additive", drawn(25, 2, 4, uneven, offset=10**12), {"model": "additive", "adjust": "none"})
    yield Case("log", drawn(26, 2, 3, uneven), {"scale": "log"})
    yield Case("sqrt", drawn(27, 3, 2, uneven), {"scale": "sqrt", "adjust": "sidak"})
    yield Case("reciprocal", drawn(28, 2, 3, uneven), {"scale": "reciprocal", "adjust": "holm"})
    yield Case("power", drawn(29, 2, 2, uneven), {"scale": "power=1.5", "adjust": "none"})
    yield Case("no-interaction", drawn(30, 3, 3, lambda i, j: 2, lean=0.0), {"adjust": "bonferroni"})
    yield Case("one-column", drawn(31, 4, 1, uneven), {"adjust": "tukey"})
