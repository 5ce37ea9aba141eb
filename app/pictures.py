"""The figures that Answer and Compare offer, each with its caption and description, drawn once and kept."""

from collections.abc import Mapping
from types import MappingProxyType

from analysis.findings import Findings
from app import answer_words, stage
from app.figures import distributions, effects, interaction, main_effects, trend
from app.figures import grid as grids
from app.stage import Picture

# The key of each figure's place on the page.
KEYS: Mapping[str, str] = MappingProxyType(
    {
        answer_words.LINES: "interaction", answer_words.SPREAD: "distributions",
        answer_words.AVERAGES: "main_effects", answer_words.EFFECTS: "effects",
    }
)  # fmt: skip


def grid(findings: Findings) -> Picture:
    """Return the grid of cell means."""
    return stage.picture(
        findings, "grid", (), lambda look: Picture(grids.grid(findings, look), grids.grid_caption(findings), grids.grid_alt(findings))
    )


def of_answer(findings: Findings, name: str, turned: bool, boxes: bool) -> Picture | None:
    """Return the figure that was picked; None for effects where they are not defined."""
    if name == answer_words.AVERAGES:
        return averages(findings)
    if name == answer_words.EFFECTS:
        return of_effects(findings) if not findings.design["empty_cells"] else None
    return spread(findings, turned, boxes) if name == answer_words.SPREAD else lines(findings, turned)


def lines(findings: Findings, turned: bool) -> Picture:
    """Return the interaction figure."""
    return stage.picture(
        findings, "lines", (turned,),
        lambda look: Picture(
            interaction.interaction(findings, look, turned),
            interaction.interaction_caption(findings, turned),
            interaction.interaction_alt(findings, turned),
        ),
    )  # fmt: skip


def suits_boxes(findings: Findings) -> bool:
    """Return whether the distributions are first shown as boxes."""
    return distributions.suits_boxes(findings)


def spread(findings: Findings, turned: bool, boxes: bool) -> Picture:
    """Return the distributions by cell."""
    return stage.picture(
        findings, "spread", (turned, boxes),
        lambda look: Picture(
            distributions.distributions(findings, look, turned, boxes),
            distributions.distributions_caption(findings, turned, boxes),
            distributions.distributions_alt(findings),
        ),
    )  # fmt: skip


def averages(findings: Findings) -> Picture:
    """Return the main effects."""
    return stage.picture(
        findings, "averages", (),
        lambda look: Picture(
            main_effects.main_effects(findings, look), main_effects.main_effects_caption(findings), main_effects.main_effects_alt(findings)
        ),
    )  # fmt: skip


def of_effects(findings: Findings) -> Picture:
    """Return the effects as bars."""
    return stage.picture(
        findings, "effects", (),
        lambda look: Picture(effects.effects(findings, look), effects.effects_caption(findings), effects.effects_alt(findings)),
    )  # fmt: skip


def along(findings: Findings, factor: str) -> Picture:
    """Return the trend along the amounts of a factor."""
    return stage.picture(
        findings, "trend", (factor,),
        lambda look: Picture(trend.trend(findings, look, factor), trend.trend_caption(findings, factor), trend.trend_alt(findings, factor)),
    )  # fmt: skip
