"""How a value inside the object is named: keys joined by "/", where "key=value&key=value" picks the row of a list."""

from collections.abc import Iterator, Mapping
from typing import Any

NAMING = (("row", "column"), ("left", "right", "within"), ("factor", "within"), ("rows", "columns"), ("term",), ("level",))


def at(whole: Any, path: str) -> Any:
    """Return the value under a path; raises LookupError naming the step that leads nowhere."""
    for step in path.split("/"):
        whole = one(whole, step) if isinstance(whole, list) else whole[step]
    return whole


def one(rows: list[dict[str, Any]], step: str) -> dict[str, Any]:
    """The row of a list that fits every key=value, or the row at a place."""
    if step.isdecimal():
        return rows[int(step)]
    wanted = dict(part.split("=", 1) for part in step.split("&"))
    found = [row for row in rows if all(word(row[key]) == value for key, value in wanted.items())]
    if len(found) != 1:
        raise LookupError(f"{len(found)} rows for {step}")
    return found[0]


def word(value: Any) -> str:
    """A label as a path writes it: a pair as two words with a comma."""
    return ",".join(map(str, value)) if isinstance(value, list | tuple) else str(value)


def leaves(whole: Any, path: str = "") -> Iterator[tuple[str, Any]]:
    """Every value with its path; rows of lists go by what names them, else by their place."""
    if isinstance(whole, Mapping):
        steps = whole.items()
    elif isinstance(whole, list) and not (whole and all(isinstance(part, str) for part in whole)):
        steps = [(name_of(row) or place, row) for place, row in enumerate(whole)]
    else:
        yield path, whole
        return
    for step, part in steps:
        yield from leaves(part, f"{path}/{step}" if path else str(step))


def name_of(row: Any) -> str | None:
    """What names a row among the others of its list."""
    if not isinstance(row, Mapping):
        return None
    keys = next((keys for keys in NAMING if all(key in row for key in keys)), None)
    return None if keys is None else "&".join(f"{key}={word(row[key])}" for key in keys)
