"""The fold under an answer tells the engine's own table, and unequal cells show every type with its question."""

from analysis.rounding import significant
from app import how
from tests.app import designs, opening


def test_the_fold_tells_model_hypothesis_and_numbers() -> None:
    found = opening.findings(opening.sample())
    for answer in found.answers:
        told = how.known(found, answer)
        row = found.used_table.set_index("term").loc[answer.term]
        assert "yᵢⱼₖ = μ + αᵢ + βⱼ + (αβ)ᵢⱼ + εᵢⱼₖ" in told[0]
        assert significant(row["f"]) in told[3]
        assert "72 analysed" in told[-1]


def test_the_model_without_interaction_and_with_blocks_is_written_as_it_is() -> None:
    blocked = opening.findings(opening.sample("coating_primer_cure.csv"))
    assert "γₗ" in how.model(blocked)
    assert "(αβ)" not in how.model(designs.basil(model="additive"))


def test_an_answer_without_a_test_has_no_fold() -> None:
    found = designs.basil(model="additive")
    assert how.known(found, found.answers[0]) == ()


def test_unequal_cells_show_every_type() -> None:
    assert how.types(designs.basil()) is None
    found = designs.design("an empty cell")
    sheet = how.types(found)
    assert sheet is not None
    by_term = {row[0]: row[1:] for row in sheet.rows}
    for term in found.study.factors:
        told = found.tables["type_2"].set_index("term").loc[term, "f"]
        assert by_term[term][2].startswith(significant(told))
        assert by_term[term][3] == "–"  # Type III is not defined for the factors here
    assert len(how.questions(found)) == 4


def test_the_folds_are_on_the_page() -> None:
    page = opening.page(opening.station("answer", opening.sample()))
    assert page.count("<summary>How we know</summary>") == 3
