"""The boards of a story take their claims from the answers and never say more than the numbers do."""

import re

import pytest

from app import boards, speaker, tabled
from app.look import SLIDE
from tests.app import designs, opening


@pytest.mark.parametrize("name", designs.DESIGNS)
def test_claims_are_the_engines_own_sentences(name: str) -> None:
    findings = designs.design(name)
    first, *factors = findings.answers
    question, interaction, answers, comparisons = boards.story(findings)
    assert question.claim == first.question
    assert interaction.claim == first.sentence
    assert {answers.claim, comparisons.claim} == {answer.sentence for answer in factors}


@pytest.mark.parametrize("name", designs.DESIGNS)
def test_every_board_has_what_is_needed_to_tell_it(name: str) -> None:
    for board in boards.story(designs.design(name)):
        assert board.evidence.strip()
        assert board.alt.strip()
        assert (board.figure is None) != (board.table is None)
        assert "no effect" not in f"{board.claim} {board.evidence} {board.notes}".lower()
        assert not re.search(r"\d ?\*+", board.evidence)


def test_the_interaction_board_draws_its_figure_in_any_look() -> None:
    board = boards.story(designs.design("3 by 4"))[1]
    assert board.figure is not None
    assert {"Full sun", "Half shade", "Deep shade"} <= {trace.name for trace in board.figure(SLIDE).data}


def test_with_an_interaction_comparisons_stay_inside_the_slices() -> None:
    findings = designs.design("3 by 4")
    assert boards.depends(findings)
    assert list(tabled.comparisons(findings, boards.families_told(findings))["within"].unique()) == list(designs.LIGHT)


@pytest.mark.parametrize("choices", [{"adjust": "dunnett"}, {"adjust": "holm"}, {"scale": "sqrt"}, {"matters": 2.0}, {"confidence": 0.9}])
def test_the_story_follows_the_choices(choices: dict[str, object]) -> None:
    findings = designs.basil(**choices)
    told = boards.story(findings)[3]
    assert told.table is not None
    assert len(told.table) == (9 if choices.get("adjust") == "dunnett" else 18)
    assert speaker.family_line(findings, boards.families_told(findings)) in told.notes
    assert ("Bonferroni" in told.notes.partition("\n\n")[0]) == (choices.get("adjust") == "holm")


def test_differences_carry_the_unit_of_the_response() -> None:
    findings = opening.findings(opening.sample())
    assert tabled.difference_head(findings).startswith("difference in g (95")
