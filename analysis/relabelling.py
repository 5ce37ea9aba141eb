"""How levels get the names that the user gives them; levels given one name become one level."""

from collections.abc import Mapping

import numpy as np

from analysis.table import Levels


def relabelled(levels: Levels, names: Mapping[str, str]) -> Levels:
    """Return levels under their new names; a merged level stands where the level of that name, or its first part, stood.

    Names of levels that are not there change nothing. Amounts stay while every level keeps its own.
    """
    given = [names.get(label, label) for label in levels.labels]
    if given == list(levels.labels):
        return levels
    kept = {label for label in levels.labels if names.get(label, label) == label}
    order: list[str] = []
    for label, name in zip(levels.labels, given, strict=True):
        if name not in order and (name not in kept or name == label):
            order.append(name)
    place = np.array([order.index(name) for name in given] + [-1], dtype=levels.codes.dtype)
    told = tuple(f"“{label}” is analysed as “{name}”." for label, name in zip(levels.labels, given, strict=True) if label != name)
    amounts = levels.amounts if len(order) == len(given) else None
    return Levels(place[levels.codes], tuple(order), amounts, (*levels.notes, *told))
