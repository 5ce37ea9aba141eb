"""How large the largest difference in a family is, and what the family as a whole says of sizes that matter."""

from dataclasses import dataclass

import numpy as np
import pandas as pd

from analysis import verdicts
from analysis.frames import estimable
from analysis.scales import Scale

SMALL_ENOUGH = (verdicts.SMALL, verdicts.NONE_THAT_MATTERS)


@dataclass(frozen=True)
class Size:
    """The largest difference of a family, told in original units (a ratio where the scale tells ratios)."""

    effect: float
    se: float  # on the analysed scale
    df: float
    lower: float
    upper: float
    verdict: str  # the most decided verdict in the family
    levels: tuple[str, ...]  # the two compared
    complete: bool  # every comparison of the family can be estimated
    all_small: bool  # every comparison lies inside ±the smallest difference that matters


def largest(frame: pd.DataFrame | None, scale: Scale) -> Size | None:
    """Return the size of the largest difference of a family with its adjusted interval, or None where nothing is estimable."""
    known = None if frame is None else estimable(frame, "difference")
    if frame is None or known is None or known.empty:
        return None
    at = known.iloc[int(known["difference"].abs().to_numpy(float).argmax())]
    return _size(
        at,
        ("lower_adjusted", "upper_adjusted"),
        known["verdict"].tolist(),
        scale,
        (str(at["left"]), str(at["right"])),
        len(known) == len(frame),
    )


def largest_contrast(frame: pd.DataFrame | None, matters: float | None, scale: Scale) -> Size | None:
    """Return the size of the largest difference of differences with its own (unadjusted) interval."""
    known = None if frame is None else estimable(frame, "difference")
    if frame is None or known is None or known.empty:
        return None
    limit = matters if scale.is_identity else None
    found = verdicts.verdicts(known["lower"].to_numpy(float), known["upper"].to_numpy(float), limit)
    at = known.iloc[int(known["difference"].abs().to_numpy(float).argmax())]
    return _size(at, ("lower", "upper"), found.tolist(), scale, (), len(known) == len(frame))


def _size(at: pd.Series, names: tuple[str, str], found: list[str], scale: Scale, levels: tuple[str, ...], complete: bool) -> Size:
    """Return a size with a positive effect, the ends of its interval turned with it, in original units for ratios."""
    ends = np.array([at["difference"], at[names[0]], at[names[1]]], dtype=float)
    if ends[0] < 0:
        ends = -ends[[0, 2, 1]]
    if scale.tells_ratios:
        ends = scale.back(ends)
    strongest = next((v for v in (verdicts.LARGER, verdicts.DIFFERS, verdicts.SMALL) if v in found), found[0])
    small = all(v in SMALL_ENOUGH for v in found)
    effect, lower, upper = ends.tolist()
    return Size(effect, float(at["se"]), float(at["df"]), lower, upper, strongest, levels, complete, small)


def turns(frame: pd.DataFrame | None) -> bool:
    """Return whether some pair of levels is decided to differ one way inside one slice and the other way inside another."""
    if frame is None:
        return False
    decided = frame[frame["verdict"].isin((verdicts.LARGER, verdicts.DIFFERS, verdicts.SMALL))]
    ways = decided.assign(way=decided["difference"] > 0).groupby(["left", "right"], sort=False)["way"].nunique()
    return bool((ways > 1).any())
