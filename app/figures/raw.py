"""The raw data: every observation by its combination, before any mean or model."""

import plotly.graph_objects as go

from analysis.findings import Findings
from app import original, records, tabled, words
from app.figures import interaction, lines
from app.figures.scene import View
from app.look import Look

STRONG = 0.75  # how opaque a point is where no mean stands before it


def raw(findings: Findings, look: Look) -> go.Figure:
    """Draw the observations as the interaction figure places them, without lines and intervals."""
    drawn = interaction.interaction(findings, look)
    points = [trace for trace in drawn.data if trace.mode == "markers"]
    layout = drawn.layout.update(shapes=())
    return go.Figure(data=points, layout=layout).update_traces(marker={"opacity": STRONG, "size": look.point * 1.25})


def raw_caption(findings: Findings) -> str:
    """Say what the points are."""
    scene = View(findings)
    some = " Of a cell with very many, only some are drawn, evenly by size." if scene.is_thinned else ""
    log = lines.scale_told(findings)
    return f"Points: every {words.unit_word(findings)}, {words.n_per_cell(findings)}, moved aside to be seen.{some}{log}"


def raw_alt(findings: Findings) -> str:
    """Describe the figure for someone who does not see it: axes, smallest and largest value, n."""
    ends, counts = " to ".join(lowest_and_highest(findings)), tabled.numbers(findings)
    return f"Observations of {original.label(findings)} by {tabled.factors_with_levels(findings)}: {ends}; {counts}."


def lowest_and_highest(findings: Findings) -> tuple[str, str]:
    """Return the smallest and the largest observation, each with its combination, in the units told."""
    seen = original.observations(findings, findings.observations)
    lowest, highest = next(records.lines(seen.nsmallest(1, "value"))), next(records.lines(seen.nlargest(1, "value")))
    unit = findings.observed.unit
    low, high = (
        f"{original.number(findings, float(line.value), findings.fit['sigma'])}{f' {unit}' if unit else ''} ({line.row}, {line.column})"
        for line in (lowest, highest)
    )
    return low, high
