"""How a story opens: the question with the layout of the experiment, the raw data, and whether one factor depends on the other."""

from functools import partial

import pandas as pd
import plotly.graph_objects as go

from analysis.findings import Findings
from analysis.rounding import measured
from app import records, speaker, tabled, words
from app.board import Board
from app.figures import grid, interaction, raw
from app.look import Look


def question(findings: Findings) -> Board:
    """Tell what was asked and how the experiment was laid out."""
    first, *_ = findings.answers
    return Board(
        "question",
        "question",
        first.question,
        speaker.design_line(findings),
        speaker.notes(findings, speaker.design_notes(findings)),
        tabled.counts_alt(findings),
        figure=partial(_layout, findings),
        table=tabled.counts(findings),
        caption="How many observations each combination holds.",
    )


def _layout(findings: Findings, look: Look) -> go.Figure:
    return grid.counts(findings.design, look)


def raw_data(findings: Findings) -> Board:
    """Show every observation before any mean or model, with the smallest and the largest value."""
    low, high = raw.lowest_and_highest(findings)
    return Board(
        "raw data",
        "raw",
        f"The raw data: {findings.observed.word} runs from {low} to {high}.",
        f"every {words.unit_word(findings)} · {tabled.numbers(findings)} · {speaker.left_out_line(findings)}",
        speaker.notes(findings, [raw.raw_caption(findings), *tabled.read_cells(findings)]),
        raw.raw_alt(findings),
        figure=partial(raw.raw, findings),
        table=own_cells(findings),
        caption=raw.raw_caption(findings),
    )


def own_cells(findings: Findings) -> pd.DataFrame:
    """Return count, mean and spread of each cell by itself as told, on the scale analysed."""
    cells, (row, column) = findings.cells, findings.study.factors
    rows = [
        (
            cell.row,
            cell.column,
            str(cell.n),
            measured(cell.mean, cell.sd if pd.notna(cell.sd) else cell.se) if cell.n else words.EMPTY,
            words.spread(cell.sd, cell.se),
        )
        for cell in records.lines(cells)
    ]
    return pd.DataFrame(rows, columns=[row, column, "n", f"mean of {words.response_label(findings)}", "sd"], dtype=object)


def depends(findings: Findings) -> Board:
    """Tell whether the effect of one factor depends on the other."""
    first, *_ = findings.answers
    return Board(
        "interaction",
        "interaction",
        first.sentence,
        f"{speaker.short_statistic(first)} · {speaker.bars_line(findings)}",
        speaker.notes(findings, [first.statistic, interaction.interaction_caption(findings), *tabled.read_cells(findings)]),
        interaction.interaction_alt(findings),
        figure=partial(interaction.interaction, findings),
        caption=interaction.interaction_caption(findings),
    )
