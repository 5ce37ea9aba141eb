"""What one board of a story is: a claim, what shows it, a line of evidence and the notes behind, and what the user made of it."""

from collections.abc import Callable
from dataclasses import dataclass, replace

import pandas as pd
import plotly.graph_objects as go

from analysis.story import Story
from app.look import Look

OWN_WORDS = "claim in the user’s own words"


@dataclass(frozen=True, eq=False)
class Board:
    """One claim and what shows it: a figure drawn in any look, a table of text as it is told, or both of the same."""

    key: str  # by which changes to the story name it
    kind: str
    claim: str  # one sentence
    evidence: str  # one line
    notes: str  # for the speaker: model, numbers, method, caveats
    alt: str  # what the figure or table shows, for someone who does not see it
    figure: Callable[[Look], go.Figure] | None = None
    table: pd.DataFrame | None = None
    drawn: str = ""  # what the bars of the figure are, and how many of the whole it draws
    caption: str = ""  # what marks, bars and numbers are
    replaced: str = ""  # the engine's own claim, where the user chose other words
    note: str = ""  # the user's

    def __repr__(self) -> str:
        return f"Board({self.kind}: {self.claim!r})"

    def as_told(self, story: Story) -> "Board":
        """Return the board with the user's words and note; its evidence stays, and the words are marked as the user's own."""
        words, note = story.claims.get(self.key, ""), story.notes.get(self.key, "")
        told = replace(self, note=note, notes=f"Own note: {note}\n\n{self.notes}") if note else self
        if not words or words == self.claim:
            return told
        said = f"The claim is in the user’s own words. The program’s sentence: {self.claim}"
        return replace(
            told, claim=words, replaced=self.claim, evidence=f"{self.evidence} · {OWN_WORDS}", notes=f"{said}\n\n{told.notes}"
        )  # fmt: skip
