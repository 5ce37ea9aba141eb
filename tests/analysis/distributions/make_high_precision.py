"""Computes high_precision.json: tails of the studentised range and of Dunnett's distribution by mpmath, to 15 digits and more.

Run `python tests/analysis/distributions/make_high_precision.py`; it takes some minutes. The integrals are the textbook ones, written as
differences from a distribution function, unlike the program's, and survive the cancellation by working with 40 digits. Each is a
trapezoidal sum with steps finer than the program's; halving them changed no digit that is kept in the three cases tried.
"""

import json
import math
from collections.abc import Callable
from pathlib import Path

import mpmath as mp

HERE = Path(__file__).parent
RANGE = [  # k, df, q
    (3, 10, "3.877676"),
    (3, 1, "500"),
    (5, 3, "40"),
    (10, 20, "18"),
    (12, 24, "5.1"),
    (20, 120, "13"),
    (100, 60, "3.5"),
    (6, 2.5, "9"),
    (200, 5, "30"),
    (4, 1000, "11"),
]
DUNNETT = [  # loadings (correlation of i and j is their product), df, d
    (["0.7071067811865475"] * 3, 20, "2.54"),
    (["0.7071067811865475"] * 5, 12, "9"),
    (["0.3", "0.6", "0.9"], 8, "3"),
    (["0.999", "0.98", "0.5"], 15, "4"),
    (["-0.5", "0.5", "0.8", "0.2"], 40, "7"),
    (["0.6", "0.6"], 1, "1000"),
]


def normal(x: mp.mpf) -> mp.mpf:
    return mp.erfc(-x / mp.sqrt(2)) / 2


def density(x: mp.mpf) -> mp.mpf:
    return mp.exp(-x * x / 2) / mp.sqrt(2 * mp.pi)


def summed(term: Callable[[mp.mpf], mp.mpf], low: float, high: float, step: float) -> mp.mpf:
    """Return the trapezoidal sum of a term that vanishes at both ends."""
    count = int((high - low) / step)
    return step * mp.fsum(term(mp.mpf(low) + i * mp.mpf(step)) for i in range(count + 1))


def range_tail(r: mp.mpf, k: int) -> mp.mpf:
    def term(z: mp.mpf) -> mp.mpf:
        return k * density(z) * (normal(z) ** (k - 1) - (normal(z) - normal(z - r)) ** (k - 1))

    return summed(term, max(-9.0, float(r) / 2 - 9), float(r) / 2 + 10, 0.125 if k < 20 else 0.0625)


def dunnett_tail(d: mp.mpf, loadings: list[str]) -> mp.mpf:
    factors = [(mp.mpf(text), mp.sqrt(1 - mp.mpf(text) ** 2)) for text in loadings]

    def term(u: mp.mpf) -> mp.mpf:
        inside = mp.mpf(1)
        for loading, c in factors:
            inside *= normal((d - loading * u) / c) - normal((-d - loading * u) / c)
        return density(u) * (1 - inside)

    if d > 40:  # below 1e-340, which no average over s brings back
        return mp.mpf(0)
    narrow = float(min(c for _, c in factors))
    return 2 * summed(term, 0.0, float(mp.sqrt(d * d + 90)), min(0.125, narrow / 6)) - min(0.125, narrow / 6) * term(mp.mpf(0))


def studentized(tail: Callable[[mp.mpf], mp.mpf], df: float, q: mp.mpf) -> mp.mpf:
    """Return the average of tail(q s) over s, in log s, with s² chi-square(df) / df."""
    nu = mp.mpf(df)
    constant = 2 * (nu / 2) ** (nu / 2) / mp.gamma(nu / 2)

    def term(v: mp.mpf) -> mp.mpf:
        return constant * mp.exp(nu * v - nu * mp.exp(2 * v) / 2) * tail(q * mp.exp(v))

    centre = -float(mp.log(1 + q * q / nu)) / 2
    low, high = centre - 45 / df - 9 / math.sqrt(df), min(2.3, 10 / math.sqrt(df))
    return summed(term, low, high, min(0.0625, 0.2 / math.sqrt(df)))


def main() -> None:
    mp.mp.dps = 40
    of_range = [studentized(lambda r, k=k: range_tail(r, k), df, mp.mpf(q)) for k, df, q in RANGE]
    of_dunnett = [studentized(lambda x, these=these: dunnett_tail(x, these), df, mp.mpf(d)) for these, df, d in DUNNETT]
    found = {
        "range": [{"k": k, "df": df, "q": q, "sf": mp.nstr(p, 18)} for (k, df, q), p in zip(RANGE, of_range, strict=True)],
        "dunnett": [
            {"loadings": these, "df": df, "d": d, "sf": mp.nstr(p, 18)} for (these, df, d), p in zip(DUNNETT, of_dunnett, strict=True)
        ],
    }
    (HERE / "high_precision.json").write_text(json.dumps(found, indent=1) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
