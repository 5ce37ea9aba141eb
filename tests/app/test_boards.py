"""The boards of a story take their claims from the answers and never say more than the numbers do."""

import re

import pandas as pd
import pytest

from analysis import verdicts
from analysis.rounding import p_number
from analysis.story import Kept, Story
from app import asking, board, boards, closing_boards, factor_boards, tabled
from app.look import SLIDE
from tests.app import designs, opening

every_design = pytest.mark.parametrize("name", designs.DESIGNS)


def keys(findings, changes: Story | None = None) -> list[str]:
    return [told.key for told in boards.story(findings, changes)]


@every_design
def test_the_story_runs_from_the_question_to_what_is_next(name: str) -> None:
    findings = designs.design(name)
    told = boards.story(findings)
    assert [one.kind for one in told[:3]] == ["question", "raw", "interaction"]
    assert [one.kind for one in told[-2:]] == ["belief", "next"]
    assert told[0].claim == findings.answers[0].question
    assert told[2].claim == findings.answers[0].sentence
    assert len({one.key for one in told}) == len(told)
    if not factor_boards.depends(findings):
        assert [one.claim for one in told[3:5]] == [answer.sentence for answer in findings.answers[1:]]


@every_design
def test_every_board_has_what_is_needed_to_tell_it(name: str) -> None:
    for told in boards.story(designs.design(name)):
        assert told.evidence.strip()
        assert re.search(r"\bn = \d+", told.alt)
        assert told.figure is not None or told.table is not None
        assert told.caption
        assert "no effect" not in f"{told.claim} {told.evidence} {told.notes}".lower()
        assert not re.search(r"\d ?\*+", told.evidence)
        assert not re.search(r"[.!?] [A-Z]", told.claim.removeprefix("The raw data: ")), "a claim is one sentence"


@every_design
def test_every_figure_is_drawn_in_any_look(name: str) -> None:
    for told in boards.story(designs.design(name)):
        if told.figure is not None:
            assert told.figure(SLIDE).data or told.kind == "question"


def test_raw_data_are_all_observations_and_nothing_else() -> None:
    findings = designs.design("3 by 4")
    drawn = boards.story(findings)[1].figure(SLIDE)
    values = sorted(float(value) for trace in drawn.data for value in trace.y)
    assert values == pytest.approx(sorted(findings.observations["value"]))
    assert {trace.mode for trace in drawn.data} == {"markers"}


def test_with_an_interaction_each_slice_has_a_board() -> None:
    findings = designs.design("3 by 4")
    slices = [told for told in boards.story(findings) if told.key.startswith("slice")]
    assert [told.key for told in slices] == [f"slice / feed within light / {level}" for level in designs.LIGHT]
    effects = findings.simple_effects.set_index(["factor", "within"])
    for told, level in zip(slices, designs.LIGHT, strict=True):
        assert ("matters:" in told.claim) == (effects.at[("feed", level), "p_adjusted"] < 0.05)
        assert f"{effects.at[('feed', level), 'f']:.3g}"[:4] in told.evidence
        assert len(told.table) == 6
    assert slices[0].claim == "With Full sun feed matters: Feed A+B minus No feed is 8.9 (6.1 to 11.6)."
    assert slices[2].claim == "With Deep shade a difference between the levels of feed is not shown, nor that there is none."


def test_very_many_slices_share_a_table() -> None:
    frame = designs.frame([f"r{k}" for k in range(8)], [f"c{k}" for k in range(8)], lambda i, j: 4.0 * (i == j), lambda i, j: 2, 0.5)
    told = boards.story(designs.findings_of(frame))[3]
    assert told.kind == "slices"
    assert list(told.table.columns[:2]) == ["within", "compared"]


def test_the_board_with_a_figure_of_many_comparisons_says_how_many_it_draws() -> None:
    told = next(one for one in boards.story(designs.design("6 by 8")) if one.kind == "compared")
    assert told.drawn.endswith("the 8 largest of 28")
    assert len(told.table) == 28
    assert len(told.figure(SLIDE).data[0].x) == 8


@pytest.mark.parametrize("choices", [{"adjust": "dunnett"}, {"adjust": "holm"}, {"scale": "sqrt"}, {"matters": 2.0}, {"confidence": 0.9}])
def test_the_story_follows_the_choices(choices: dict[str, object]) -> None:
    findings = designs.basil(**choices)
    told = boards.story(findings)[3]
    assert len(told.table) == (3 if choices.get("adjust") == "dunnett" else 6)
    assert ("Bonferroni" in told.notes.partition("\n\n")[0]) == (choices.get("adjust") == "holm")


def test_a_small_difference_is_told_as_one_that_does_not_matter() -> None:
    findings = designs.basil(matters=5.5)
    shade = next(told for told in boards.story(findings) if told.key.endswith("Deep shade"))
    frame = findings.comparisons["feed within light"]
    assert set(frame.loc[frame["within"] == "Deep shade", "verdict"]) <= {verdicts.NONE_THAT_MATTERS, verdicts.SMALL}
    assert shade.claim == "With Deep shade feed makes no difference that matters."


@every_design
def test_belief_shows_every_analysis_with_its_p(name: str) -> None:
    findings = designs.design(name)
    table = closing_boards.analyses(findings).set_index("analysis")
    assert list(table.index) == list(dict.fromkeys(findings.holds["analysis"]))
    for line in findings.holds.itertuples():
        told = table.at[line.analysis, line.term]
        assert told.removesuffix(closing_boards.OTHERWISE) == p_number(line.p)
        assert told.endswith(closing_boards.OTHERWISE) == (line.same is False)


def test_open_doubts_come_first_in_what_is_next() -> None:
    table = designs.frame(designs.LIGHT, designs.FEED, lambda i, j: designs.MEANS[i, j], lambda i, j: 6, 1.5)
    table.loc[0, "yield"] += 40.0  # a slip of the hand
    findings = designs.findings_of(table)
    assert (findings.doubts["level"] == "amber").any()
    told = boards.story(findings)[-1]
    assert told.claim == "Next: settle what is in doubt before this is told any further."
    assert told.table["why"].iloc[0] == findings.doubts["sentence"].iloc[0]


def test_what_was_kept_is_told_and_what_is_gone_is_not() -> None:
    findings = designs.design("3 by 4")
    changes = Story().keeping(Kept("light")).keeping(Kept("chosen cells", None, (("Full sun", "Feed A"), ("Deep shade", "Feed B"))))
    changes = changes.keeping(Kept("light within feed", "a level that is gone")).keeping(Kept("cells", None, ()))
    kept = [told for told in boards.story(findings, changes) if told.key.startswith("kept")]
    assert [told.key for told in kept] == [one.key for one in (*changes.kept[:2], changes.kept[3])]
    assert len(kept[0].table) == 3
    contrast = findings.contrast({("Deep shade", "Feed B"): 1.0, ("Full sun", "Feed A"): -1.0})
    assert tabled.rounding.measured(contrast.estimate, contrast.se) in kept[1].table.iloc[0, 1]
    asked = factor_boards.asked_again(findings, changes.kept[1])
    assert asked == asking.Asked("chosen cells", None, ((0, 1), (2, 2)))
    assert factor_boards.keepable(findings, asked) == changes.kept[1]


def test_a_trend_can_be_kept() -> None:
    frame = pd.DataFrame({"y": [1.0, 1.2, 2.1, 2.0, 3.4, 3.1, 1.1, 0.9, 2.6, 2.4, 4.1, 4.4], "a": list("pppppp") + list("qqqqqq")})
    findings = opening.findings_of(frame.assign(b=[0, 0, 10, 10, 20, 20] * 2))
    told = next(one for one in boards.story(findings, Story().keeping(Kept("trend of b"))) if one.key.startswith("kept"))
    assert told.claim == "Y rises with b."


def test_boards_move_are_left_out_and_come_back() -> None:
    findings = designs.design("3 by 4")
    order = keys(findings)
    moved = Story().moving(order, "belief", -9)
    assert keys(findings, moved)[0] == "belief"
    dropped = moved.dropping("raw data")
    assert keys(findings, dropped) == [key for key in keys(findings, moved) if key != "raw data"]
    assert keys(findings, dropped.dropping("raw data")) == keys(findings, moved)


def test_own_words_are_marked_and_the_evidence_stays() -> None:
    findings = designs.design("3 by 4")
    plain = boards.story(findings)[2]
    told = boards.story(findings, Story().saying("interaction", "Feed pays in the sun.").noting("interaction", "Ask."))[2]
    assert told.claim == "Feed pays in the sun."
    assert told.replaced == plain.claim
    assert told.evidence == f"{plain.evidence} · {board.OWN_WORDS}"
    assert plain.claim in told.notes
    assert "Own note: Ask." in told.notes


def test_differences_carry_the_unit_of_the_response() -> None:
    findings = opening.findings(opening.sample())
    assert tabled.difference_head(findings).startswith("difference in g (95")
