"""How the reader's notes name things, and what the names of columns speak of."""

import re
from collections.abc import Sequence

MEASURED = re.compile(  # names that speak of a measurement
    r"\b(yield|response|y|value|weight|mass|height|length|count|score|growth|conc\w*|rate|result|measure\w*|outcome|biomass|gain|"
    r"strength|activity|absorbance|od|survival|loss|content|ratio|area|volume|diameter|width|titre|titer)\b",
    re.IGNORECASE,
)
NUMBERED_THING = re.compile(  # names that count repetitions
    r"(rep|reps|replicate|replication|repeat|block|blk|plot|pot|plant|sample|run|no|nr|n|id|batch)\.?", re.IGNORECASE
)


def several(items: Sequence[str], most: int = 4) -> str:
    """Write quoted items for a sentence: “a”, “b” and “c”, or “a”, “b” and 7 more."""
    quoted = [f"“{short(item)}”" for item in items]
    if len(quoted) > most:
        return f"{', '.join(quoted[:most])} and {len(quoted) - most} more"
    return " and ".join(part for part in (", ".join(quoted[:-1]), *quoted[-1:]) if part)


def short(text: str, most: int = 40) -> str:
    """Cut long text for a sentence."""
    return text if len(text) <= most else text[: most - 1] + "…"


def counted(n: int, one: str, many: str | None = None) -> str:
    """Write a count with its noun."""
    return f"{n} {one if n == 1 else many or one + 's'}"
