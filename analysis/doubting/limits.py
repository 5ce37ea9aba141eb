"""What the data cannot show: too few observations for the checks, and answers that another analysis would change."""

from analysis.doubting.signs import NOTE, Doubt, Signs
from analysis.doubting.spreads import Spread
from analysis.holding import agreement

FEW = 4  # observations in a cell below which spread and shape cannot be seen


def few(signs: Signs, _: Spread | None) -> Doubt | None:
    """Note that with few observations in a cell no check of spread or shape can see much."""
    counts = signs.layout.cells.n[signs.layout.cells.n > 0]
    fewest, most = int(counts.min()), int(counts.max())
    if fewest >= FEW:
        return None
    where = f"No cell holds more than {_count(most)}" if most < FEW else f"Some cells hold no more than {_count(fewest)}"
    return Doubt(
        "few_observations",
        NOTE,
        f"{where}: checks of spread and shape cannot see much here, so their silence is no assurance. Rely on what is known of this "
        "kind of measurement.",
    )


def _count(n: int) -> str:
    return "one observation" if n == 1 else f"{n} observations"


def depends(signs: Signs, _: Spread | None) -> Doubt | None:
    """Note that another defensible analysis answers otherwise."""
    if not agreement.dissenting(signs.holds):
        return None
    return Doubt("answer_depends", NOTE, f"{agreement.told(signs.holds)} Say which analysis was planned, and tell the others beside it.")
