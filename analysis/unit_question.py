"""What the answer to “what is one independent unit?” means for a study: how many units, and how many residual degrees of freedom."""

from dataclasses import dataclass, replace

from analysis.findings import analyse
from analysis.refusals import Refusal
from analysis.study import Study


@dataclass(frozen=True)
class UnitAnswer:
    """One answer: what counts as a unit, and what is left to judge chance by."""

    unit: str | None  # the column that names the units, None where each row is one
    units: int | None  # analysed; None where the answer cannot be analysed
    residual_df: int | None
    refusal: str | None = None  # why it cannot be analysed


def unit_answers(study: Study, column: str) -> tuple[UnitAnswer, UnitAnswer]:
    """Return what follows where each row is a unit, and where a column names the units whose readings are averaged.

    Source: common practice; Hurlbert (1984) on readings counted as replicates.
    """
    return _answer(study, None), _answer(study, column)


def _answer(study: Study, unit: str | None) -> UnitAnswer:
    try:
        findings = analyse(replace(study, unit=unit))
        return UnitAnswer(unit, findings.observed.size, int(findings.model.residual_df))
    except Refusal as refusal:
        return UnitAnswer(unit, None, None, str(refusal))
