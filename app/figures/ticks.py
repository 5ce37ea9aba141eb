"""Round numbers along an axis, and the room that they and the title of the axis need: the browser then need not draw twice to find out."""

import math
from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np

from analysis.rounding import fixed, shortest
from app.figures import lettering
from app.look import Look

MOST = 9  # numbers along an axis
STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
FIRSTS = ((1, 1.2, 1.4, 1.6, 1.8, 2, 2.5, 3, 3.5, 4, 5, 6, 7, 8, 9), (1, 1.5, 2, 3, 4, 5, 7), (1, 2, 5), (1,))  # of each power of ten
FEWEST, MOST_LOGARITHMIC = 3, 11  # with fewer, the axis is so short that equal steps serve better
STANDOFF = 0.8  # between numbers and title, of the type size


def linear(reach: tuple[float, float], most: int = MOST) -> dict[str, Any]:
    """Return places and texts of round numbers at equal steps inside a reach."""
    low, high = reach
    rough = (high - low) / most or 1.0
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(factor * power for factor in STEPS if factor * power >= rough * (1 - 1e-9))
    decimals = max(0, -math.floor(math.log10(step) + 1e-9)) + (1 if math.isclose(step / power, 2.5) and step < 10 else 0)
    values = [step * k for k in range(math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9) + 1)]
    return {"tickvals": values, "ticktext": [fixed(value, decimals) for value in values]}


def logarithmic(reach: tuple[float, float]) -> dict[str, Any]:
    """Return places and texts of round numbers between two powers of ten, the fewer of each decade the more decades there are."""
    low, high = reach
    shown: list[float] = []
    for firsts in FIRSTS:
        powers = range(math.floor(low), math.ceil(high) + 1)
        shown = [value for power in powers for value in (first * 10.0**power for first in firsts) if low <= np.log10(value) <= high]
        if len(shown) <= MOST_LOGARITHMIC:
            break
    if len(shown) < FEWEST:
        return linear((10.0**low, 10.0**high))
    return {"tickvals": shown, "ticktext": [shortest(value) for value in shown]}


def left(axis: Mapping[str, Any], look: Look) -> float:
    """Return the px that the numbers of an axis and the title beside them, on as many lines as it has, need at the left."""
    lines = lettering.line_count(axis["title"]["text"])
    return lettering.widest(list(axis["ticktext"]), look.text) + (STANDOFF + 0.3 + 1.3 * lines) * look.text + 6


def below(texts: Sequence[str], look: Look, title: bool = True) -> float:
    """Return the px that names or numbers, on as many lines as they have, and a title under them need."""
    lines = max((lettering.line_count(text) for text in texts), default=1)
    return (1.3 * lines + 0.5 + (STANDOFF + 1.3 if title else 0)) * look.text
