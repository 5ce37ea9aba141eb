"""The story of a study: its boards in the order in which they are told, with what the user kept, reworded, moved and left out."""

from analysis.findings import Findings
from analysis.story import Story
from app import closing_boards, factor_boards, opening_boards
from app.board import Board


def story(findings: Findings, changes: Story | None = None) -> tuple[Board, ...]:
    """Return the boards that are told, in their order and in the user's words."""
    changes = changes or Story()
    return tuple(board.as_told(changes) for board in every(findings, changes) if board.key not in changes.dropped)


def every(findings: Findings, changes: Story) -> tuple[Board, ...]:
    """Return all boards in the order told, those that are left out among them, in the engine's words."""
    made = {board.key: board for board in made_of(findings, changes)}
    return tuple(made[key] for key in changes.in_order(list(made)))


def made_of(findings: Findings, changes: Story) -> tuple[Board, ...]:
    """Return the boards that the findings make: question, raw data, answers, what was kept, how far to believe it, what next."""
    kept = (factor_boards.kept(findings, one) for one in changes.kept)
    return (
        opening_boards.question(findings),
        opening_boards.raw_data(findings),
        opening_boards.depends(findings),
        *factor_boards.factors(findings),
        *(board for board in kept if board is not None),
        closing_boards.belief(findings),
        closing_boards.next_steps(findings),
    )
