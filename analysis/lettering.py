"""Which means share a letter in each family of comparisons."""

from collections.abc import Mapping

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis.families import Slice
from analysis.letters import letters

SEPARATOR = " · "  # between row and column of a cell, and between a level and the slice it is compared in


def letters_of(
    families: Mapping[str, tuple[Slice, ...]], comparisons: Mapping[str, pd.DataFrame | None], alpha: float
) -> dict[str, dict[str, str]]:
    """Return the compact letter display of every family that is written out: {family: {level: letters}}.

    A cell is called "row · column", a level inside a slice "level · slice". Two levels share a letter exactly when their
    pair is not decided different; a pair that cannot be estimated is not decided. Means without an estimate get no letter.
    """
    found = {}
    for name, slices in families.items():
        frame = comparisons[name]
        if frame is not None:
            decided = frame["p_adjusted"].to_numpy(float) < alpha
            ends = np.cumsum([part.pairs()[0].size for part in slices])  # slices stand one after another
            parts = zip(slices, np.split(decided, ends[:-1]), strict=True)
            found[name] = {label: text for part, mine in parts for label, text in _slice_letters(part, mine).items()}
    return found


def _slice_letters(part: Slice, decided: NDArray[np.bool_]) -> dict[str, str]:
    left, right = part.pairs()
    k = len(part.labels)
    different = np.zeros((k, k), dtype=bool)
    different[left[decided], right[decided]] = different[right[decided], left[decided]] = True
    known = np.flatnonzero(part.estimates.estimable)
    order = np.argsort(-part.estimates.value[known], kind="stable")
    given = letters(order.tolist(), different[np.ix_(known, known)])
    return {_label(part, int(i)): text for i, text in zip(known, given, strict=True)}


def _label(part: Slice, i: int) -> str:
    label = part.labels[i]
    words = [str(word) for word in label] if isinstance(label, list) else [str(label)]
    return SEPARATOR.join(words if part.within is None else [*words, part.within])
