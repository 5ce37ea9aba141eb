"""The words of Tell: the story and how it may be changed, the walk-through, and what is taken away."""

from collections.abc import Mapping
from types import MappingProxyType

STORY = "The story"
STORY_HELP = (
    "Walk-through, slides and report are made of these boards. Reword a claim and its evidence stays; the words are marked as yours."
)
CHANGE, UP, DOWN, DROP, TAKE_BACK = "Change", "Earlier", "Later", "Leave out", "Take back in"
CLAIM, NOTE = "The claim in your own words", "Your note, for the speaker and the report"
CLAIM_HELP = "Empty: the program’s sentence."
KEEP, KEPT = "Keep for the story", "Kept for the story: take out"
LOOK_FIRST = "Look first: what do you see?"
HIDE, SPEAKER = "Hide or show the claim (H)", "Speaker’s window"
STILL_HIDDEN = "the claim is still hidden from the room"
AFTER = "Next:"
NOTHING_FOLLOWED = "There is no walk-through to follow: start one, and open this window from there."
PAPERS: Mapping[bool, str] = MappingProxyType({False: "Light slides", True: "Dark slides"})
TEMPLATE = "Your own template (.pptx), if any"
WIDTHS: Mapping[float, str] = MappingProxyType(
    {89.0: "single column, 89 mm", 140.0: "one and a half, 140 mm", 183.0: "double column, 183 mm", 308.0: "slide, 308 mm"}
)
POINTS: Mapping[float, str] = MappingProxyType(
    {6.0: "6 pt", 7.0: "7 pt", 8.0: "8 pt", 9.0: "9 pt", 10.0: "10 pt", 12.0: "12 pt", 18.0: "18 pt"}
)
RESOLUTIONS: Mapping[int, str] = MappingProxyType({300: "300 dpi", 600: "600 dpi", 1000: "1 000 dpi"})
GROUNDS: Mapping[bool, str] = MappingProxyType({False: "light ground", True: "transparent"})
CAMERAS: Mapping[str, str] = MappingProxyType({"png": "camera: PNG", "svg": "camera: SVG"})
FIGURES, PAPER = "Figures", "The paper of the slides"
WIDTH, TYPE, RESOLUTION, GROUND, CAMERA = "Width", "Type", "Resolution", "Ground", "The camera above the figure"
