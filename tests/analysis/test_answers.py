"""The sentences for 22 invented situations, each reviewed once and held to the word."""

import pytest

from tests.analysis.experiments import analysed, crossed
from tests.analysis.scenarios import SCENARIOS, Scenario

EXPECTED = {
    "the effect grows": (
        ("differs", "Yes: what feed does depends on soil: from none to full dose yield changes by +4.00 with dry and +8.00 with moist."),
        ("differs", "Soil matters with half dose and full dose; with none no difference is shown."),
        ("differs", "Feed matters at every level of soil, and not by the same amount."),
    ),
    "the order turns": (
        (
            "differs",
            "Yes: what feed does depends on soil, and the order of the levels of feed and of soil changes:"
            " from none to full dose yield changes by +8.00 with dry and −8.00 with moist.",
        ),
        ("differs", "Soil matters with none and full dose; with half dose no difference is shown."),
        ("differs", "Feed matters at every level of soil, and not by the same amount."),
    ),
    "only the row factor": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters: yield is 8.00 (7.11 to 8.89) higher with wet than with dry."),
        ("undecided", "Not decided: the data do not show a difference between the levels of feed, nor that there is none."),
    ),
    "only the column factor": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("differs", "Feed matters: yield is 8.00 (6.88 to 9.12) higher with full dose than with none."),
    ),
    "both, side by side": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters: yield is 3.00 (2.28 to 3.72) higher with moist than with dry."),
        ("differs", "Feed matters: yield is 4.00 (3.28 to 4.72) higher with half dose than with none."),
    ),
    "nothing shown": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("undecided", "Not decided: the data do not show a difference between the levels of feed, nor that there is none."),
    ),
    "nothing that matters": (
        ("no_difference_that_matters", "Not by an amount that matters: feed does much the same at every level of soil."),
        ("no_difference_that_matters", "Soil makes no difference that matters."),
        ("no_difference_that_matters", "Feed makes no difference that matters."),
    ),
    "nothing shown, and D leaves it open": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("undecided", "Not decided: the data do not show a difference between the levels of feed, nor that there is none."),
    ),
    "many observations, tiny effects": (
        ("no_difference_that_matters", "Not by an amount that matters: feed does much the same at every level of soil."),
        ("differs_but_small", "Soil makes a difference, but one too small to matter."),
        ("differs_but_small", "Feed makes a difference, but one too small to matter."),
    ),
    "many observations, tiny interaction": (
        ("differs_but_small", "Yes: what feed does depends on soil, but by less than what matters."),
        ("differs_but_small", "Soil makes a difference, but one too small to matter."),
        ("differs_but_small", "Feed makes a difference, but one too small to matter."),
    ),
    "two a cell": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("differs", "Feed matters: yield is 6.0 (0.1 to 11.9) higher with half dose than with none."),
    ),
    "one a cell": (
        ("not_tested", "Cannot be told: with one observation in each cell, interaction and chance cannot be separated."),
        ("differs", "Soil matters: yield is 8.67 (7.13 to 10.20) higher with wet than with dry."),
        ("differs", "Feed matters: yield is 4.67 (3.13 to 6.20) higher with full dose than with none."),
    ),
    "an empty cell": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters, judged beside the other factor; its means cannot be averaged while combinations are missing."),
        ("differs", "Feed matters: yield is 5.00 (3.93 to 6.07) higher with full dose than with none."),
    ),
    "unequal cells": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters: yield is 4.00 (3.14 to 4.86) higher with moist than with dry."),
        ("differs", "Feed matters: yield is 5.00 (3.79 to 6.21) higher with full dose than with none."),
    ),
    "log scale, ratios": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters: yield is 2.01 times (1.87 to 2.16) as high with moist as with dry."),
        ("differs", "Feed matters: yield is 4.04 times (3.63 to 4.50) as high with full dose as with none."),
    ),
    "log scale, interaction": (
        (
            "differs",
            "Yes: what feed does depends on soil: from none to full dose yield changes by the factor 4.07 with dry and 20.1 with moist.",
        ),
        ("differs", "Soil matters at every level of feed, and not by the same amount."),
        ("differs", "Feed matters at every level of soil, and not by the same amount."),
    ),
    "without interaction by choice": (
        ("not_tested", "Not asked: the model without interaction was chosen."),
        ("differs", "Soil matters: yield is 4.00 (2.96 to 5.04) higher with moist than with dry."),
        ("differs", "Feed matters: yield is 3.00 (1.96 to 4.04) higher with half dose than with none."),
    ),
    "larger than matters": (
        ("no_difference_that_matters", "Not by an amount that matters: feed does much the same at every level of soil."),
        ("larger_than_matters", "Soil matters: yield is 10.00 (9.32 to 10.68) higher with moist than with dry."),
        ("larger_than_matters", "Feed matters: yield is 6.00 (4.99 to 7.01) higher with full dose than with none."),
    ),
    "small in one slice": (
        (
            "larger_than_matters",
            "Yes: what feed does depends on soil: from none to full dose yield changes by 0.00 with dry and +10.00 with moist.",
        ),
        ("differs", "Soil matters with half dose and full dose; with none any difference is too small to matter."),
        ("differs", "Feed matters with moist; with dry any difference is too small to matter."),
    ),
    "overall but no single pair": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("differs", "Feed makes a difference overall, though no two of its levels can be told apart one by one."),
    ),
    "levels that are numbers": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("undecided", "Not decided: the data do not show a difference between the levels of soil, nor that there is none."),
        ("differs", "Feed matters: yield is 7.90 (6.78 to 9.02) higher with feed 60 than with feed 20."),
    ),
    "against a control": (
        ("undecided", "Not decided: the data do not show that what feed does depends on soil, nor that it does not."),
        ("differs", "Soil matters: yield is 1.00 (0.32 to 1.68) higher with moist than with dry."),
        ("differs", "Feed matters: yield is 8.00 (7.05 to 8.95) higher with full dose than with none."),
    ),
}


@pytest.mark.parametrize("scenario", SCENARIOS, ids=str)
def test_sentences_as_reviewed(scenario: Scenario) -> None:
    told = tuple((answer.verdict, answer.sentence) for answer in scenario.findings().answers)
    assert told == EXPECTED[scenario.name]


@pytest.mark.parametrize("scenario", SCENARIOS, ids=str)
def test_a_large_p_is_never_told_as_no_effect(scenario: Scenario) -> None:
    for answer in scenario.findings().answers:
        if answer.p is not None and answer.p >= 0.05 and answer.verdict == "undecided":
            assert answer.sentence.startswith("Not decided")
            assert "no effect" not in answer.sentence


def test_the_interaction_comes_first_and_the_factors_refer_to_it() -> None:
    first, *factors = next(s for s in SCENARIOS if s.name == "the effect grows").findings().answers
    assert first.term == "interaction"
    assert all("because of the first answer" in answer.statistic for answer in factors)


def test_a_largest_difference_among_gaps_says_that_it_is_one() -> None:
    frame = crossed([[3, 3], [3, 0], [3, 3]])
    told = next(answer.statistic for answer in analysed(frame).answers if answer.term == "a")
    assert "largest difference that can be estimated" in told
    assert "that can be estimated" not in analysed(crossed([[3, 3], [3, 3], [3, 3]])).answers[1].statistic
