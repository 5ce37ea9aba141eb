"""How numbers are told where another scale is analysed: in the response's own units, as the engine hands them back."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Any

import numpy as np
import pandas as pd

from analysis.findings import Findings
from analysis.rounding import measured, significant
from app import words

# A mean taken on another scale and turned back has a name of its own on two of them.
MEANS: Mapping[str, str] = MappingProxyType({"none": "mean", "log": "geometric mean", "reciprocal": "harmonic mean"})


def is_told(findings: Findings) -> bool:
    """Return whether another scale than the response's own is analysed, so that means are told back in original units."""
    return not findings.observed.scale.is_identity


def label(findings: Findings) -> str:
    """Return the response with its unit, in the units that means are told in."""
    return words.response_in_units(findings)


def mean_word(findings: Findings) -> str:
    """Return what a mean is called in the units that it is told in."""
    return MEANS.get(findings.observed.scale.name, "back-transformed mean")


def means(findings: Findings, frame: pd.DataFrame) -> pd.DataFrame:
    """Return a frame of means with estimate, lower and upper in the units that they are told in; everything else as it was."""
    if not is_told(findings):
        return frame
    told = pd.DataFrame(list(frame["told"]), index=frame.index)
    return frame.assign(**{name: told[name] for name in ("estimate", "lower", "upper")})


def observations(findings: Findings, frame: pd.DataFrame) -> pd.DataFrame:
    """Return observations with their values in the units that means are told in."""
    if not is_told(findings):
        return frame
    return frame.assign(value=findings.observed.scale.back(frame["value"].to_numpy(float)))


def number(findings: Findings, value: float, se: float) -> str:
    """Return a number in the units told, with the digits that its standard error supports, or three where it has none in those units."""
    return significant(value) if is_told(findings) else measured(value, se)


def back(findings: Findings, value: float) -> float:
    """Return one number of the analysed scale in the units told."""
    return float(findings.observed.scale.back(np.array([value]))[0]) if is_told(findings) else value


def with_interval(findings: Findings, mean: Any, centre: str = "estimate") -> str:
    """Return a mean with its interval in the units told; centre names the estimate where no other units are told."""
    if not is_told(findings):
        return words.with_interval(getattr(mean, centre), mean.lower, mean.upper, mean.se)
    ends = [significant(mean.told[name]) for name in ("estimate", "lower", "upper")]
    return f"{ends[0]} ({ends[1]} to {ends[2]})"
