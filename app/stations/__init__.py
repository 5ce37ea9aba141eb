"""The stops of the road, in order; each shows one page."""

from dataclasses import dataclass


@dataclass(frozen=True)
class Station:
    """One stop: its name in the address and in `app/stops`, and what the bar calls it."""

    name: str
    title: str


STATIONS = (
    Station("bring", "Bring"),
    Station("lay_out", "Lay out"),
    Station("answer", "Answer"),
    Station("compare", "Compare"),
    Station("doubt", "Doubt"),
    Station("tell", "Tell"),
)
