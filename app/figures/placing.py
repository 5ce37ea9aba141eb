"""Where marks go in a figure: side by side, spread so that none hides, thinned, and labels that do not touch."""

import numpy as np
import pandas as pd
from numpy.typing import NDArray

Positions = NDArray[np.float64]
MOST_POINTS = 2_000  # of one cell; more hide each other and slow the page
MOST_DRAWN = 12_000  # of all cells together, once a cell holds more than can be drawn
GOLDEN = 0.6180339887498949  # steps of this share of a turn never bunch, and need no random numbers


def dodge(count: int) -> Positions:
    """Return the offsets that put `count` lines side by side around each place of the axis (places are 1 apart)."""
    offsets: Positions = (np.arange(count, dtype=np.float64) - (count - 1) / 2) * step(count)
    return offsets


def step(count: int) -> float:
    """Return the distance between neighbouring lines at one place of the axis."""
    return min(0.12, 0.66 / max(count, 1))


def spread(count: int, half_width: float) -> Positions:
    """Return offsets within ± half_width that keep points with the same value apart; the same count gives the same offsets."""
    offsets: Positions = ((np.arange(count, dtype=np.float64) * GOLDEN + 0.5) % 1.0 - 0.5) * 2 * half_width
    return offsets


def most_of_a_cell(largest: int, cells: int) -> int:
    """Return how many observations of a cell are drawn at most, given the largest count and the number of filled cells."""
    return MOST_POINTS if largest <= MOST_POINTS else max(2, min(MOST_POINTS, MOST_DRAWN // cells))


def thinned(points: pd.DataFrame, most: int) -> pd.DataFrame:
    """Return at most so many rows of one cell's observations, evenly along their order of size, both ends kept."""
    if len(points) <= most:
        return points
    places = np.linspace(0, len(points) - 1, most).round().astype(np.intp)
    kept = np.sort(np.argsort(points["value"].to_numpy(), kind="stable")[places])
    return points.iloc[kept]


def apart(wanted: Positions, gaps: Positions) -> Positions:
    """Return places as near the wanted ones as their order allows, neighbours at least half the sum of their gaps apart.

    wanted and gaps are (k,), in the same units. Neighbours that are too near are pushed into one block around their
    common middle (pooling of adjacent violators, as in isotonic regression).
    """
    order = np.argsort(wanted, kind="stable")
    offset = np.concatenate([[0.0], np.cumsum((gaps[order][1:] + gaps[order][:-1]) / 2)])
    blocks: list[tuple[float, int]] = []
    for target in wanted[order] - offset:
        blocks.append((float(target), 1))
        while len(blocks) > 1 and blocks[-2][0] > blocks[-1][0]:
            (low, low_count), (high, high_count) = blocks[-2:]
            blocks[-2:] = [((low * low_count + high * high_count) / (low_count + high_count), low_count + high_count)]
    placed = np.empty_like(wanted)
    placed[order] = np.concatenate([np.full(count, middle) for middle, count in blocks]) + offset
    return placed
