"""What the user changed in the telling of a study: comparisons kept, boards dropped, put in order, reworded, noted beside."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, fields, replace
from types import MappingProxyType
from typing import Any


@dataclass(frozen=True)
class Kept:
    """One question asked of the comparisons and kept: its family, the slice asked about, and the cells by their two levels."""

    family: str
    within: str | None = None
    cells: tuple[tuple[str, str], ...] = ()

    @property
    def key(self) -> str:
        """The name of the board that tells it."""
        return " / ".join(("kept", self.family, self.within or "", *(" with ".join(cell) for cell in self.cells)))


@dataclass(frozen=True)
class Story:
    """Every change that the user made to the story; boards are named by their keys, and names of boards no longer there stay unused."""

    kept: tuple[Kept, ...] = ()
    order: tuple[str, ...] = ()  # boards in the order told, as far as the user moved any
    dropped: tuple[str, ...] = ()
    claims: Mapping[str, str] = field(default_factory=dict)  # the user's own words for a board's claim
    notes: Mapping[str, str] = field(default_factory=dict)  # the user's own note beside a board

    def __post_init__(self) -> None:
        """Take plain values as they come back from a file, and freeze them."""
        object.__setattr__(self, "kept", tuple(_kept(one) for one in self.kept))
        for name in ("order", "dropped"):
            object.__setattr__(self, name, tuple(getattr(self, name)))
        for name in ("claims", "notes"):
            object.__setattr__(
                self, name, MappingProxyType({key: " ".join(str(text).split()) for key, text in getattr(self, name).items()})
            )

    def plain(self) -> dict[str, Any]:
        """Return the changes as lists, texts and dicts."""
        kept = [[one.family, one.within, [list(cell) for cell in one.cells]] for one in self.kept]
        return {
            "kept": kept, "order": list(self.order), "dropped": list(self.dropped), "claims": dict(self.claims), "notes": dict(self.notes)
        }  # fmt: skip

    def keeping(self, one: Kept) -> "Story":
        """Return the story with a question kept, or without it where it was kept already."""
        without = tuple(other for other in self.kept if other != one)
        return replace(self, kept=without if len(without) < len(self.kept) else (*self.kept, one))

    def dropping(self, key: str) -> "Story":
        """Return the story without a board, or with it again."""
        without = tuple(other for other in self.dropped if other != key)
        return replace(self, dropped=without if len(without) < len(self.dropped) else (*self.dropped, key))

    def moving(self, keys: Sequence[str], key: str, by: int) -> "Story":
        """Return the story with a board moved so many places among all boards, which stand in the order of `keys`."""
        others = [other for other in keys if other != key]
        others.insert(min(max(list(keys).index(key) + by, 0), len(others)), key)
        return replace(self, order=tuple(others))

    def saying(self, key: str, claim: str) -> "Story":
        """Return the story with a claim in the user's own words; no words take the engine's again."""
        return replace(self, claims=_with(self.claims, key, claim))

    def noting(self, key: str, note: str) -> "Story":
        """Return the story with a note beside a board; no words take it away."""
        return replace(self, notes=_with(self.notes, key, note))

    def in_order(self, keys: Sequence[str]) -> list[str]:
        """Return the keys of boards in the order told; a board that was never moved follows the one that it followed before."""
        told = [key for key in self.order if key in keys]
        for place, key in enumerate(keys):
            if key not in told:
                before = [other for other in keys[:place] if other in told]
                told.insert(told.index(before[-1]) + 1 if before else 0, key)
        return told


def story_of(told: "Story | Mapping[str, Any]") -> Story:
    """Return a story from itself or from its plain values; what it does not know is passed over."""
    if isinstance(told, Story):
        return told
    known = {one.name for one in fields(Story)}
    return Story(**{name: value for name, value in told.items() if name in known})


def _kept(one: Kept | Sequence[Any]) -> Kept:
    if isinstance(one, Kept):
        return one
    family, within, cells = one
    return Kept(family, within, tuple((str(row), str(column)) for row, column in cells))


def _with(texts: Mapping[str, str], key: str, text: str) -> dict[str, str]:
    changed = {**texts, key: text.strip()}
    return {name: told for name, told in changed.items() if told}
