"""What is still to do: which stops are settled for the open study, and the next step in words."""

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from analysis.findings import Findings
from app import desk, level_list
from app.stations import STATIONS

SEEN = "seen"  # for each stop, the study that it was last looked at with
STEPS: Mapping[str, str] = MappingProxyType(
    {
        "bring": "bring a table",
        "lay_out": "say which column is what",
        "answer": "read the three answers",
        "compare": "ask which differ",
        "doubt": "ask what would make one doubt it",
        "tell": "take it to the group",
        "plan": "plan the next experiment",
    }
)
OFFERS = "settle which levels are one"


@dataclass(frozen=True)
class Step:
    """The next thing to do, and the stop where it is done."""

    station: str
    words: str


@dataclass(frozen=True)
class Progress:
    """Which stops are settled, by name, and the next step; None where every stop is settled."""

    settled: frozenset[str]
    step: Step | None


def so_far(here: str) -> Progress:
    """Return how far the open study has come, the stop that is being looked at counted as seen.

    A table settles Bring; columns with roles and no open question about levels settle Lay out; a later stop is settled once
    it was looked at with the study as it is now, and open again after a change.
    """
    study = desk.study()
    if study is None:
        return Progress(frozenset(), Step("bring", STEPS["bring"]))
    if not isinstance(desk.findings(), Findings):
        return Progress(frozenset({"bring"}), Step("lay_out", STEPS["lay_out"]))
    seen = {**desk.view(SEEN, {}), here: study.fingerprint}
    desk.look_at(**{SEEN: seen})
    laid_out = not level_list.are_offered(study)
    later = {station.name for station in STATIONS[2:] if seen.get(station.name) == study.fingerprint}
    settled = frozenset({"bring", *(["lay_out"] if laid_out else []), *later})
    first = next((station.name for station in STATIONS if station.name not in settled), None)
    return Progress(settled, None if first is None else Step(first, STEPS[first] if first != "lay_out" else OFFERS))


def told(progress: Progress) -> str:
    """Return which stops are settled, for someone who does not see the marks in the bar."""
    done = [station.title for station in STATIONS if station.name in progress.settled]
    rest = [station.title for station in STATIONS if station.name not in progress.settled]
    return " ".join(f"{word}: {', '.join(titles)}." for word, titles in (("Settled", done), ("Still open", rest)) if titles)
