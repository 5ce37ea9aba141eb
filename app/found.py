"""What studies come to, computed once for all sessions and looked up by fingerprint: findings, counts, odd values, roles, units."""

from collections.abc import Mapping
from typing import Any

import streamlit as st

from analysis import analyse, counted
from analysis.findings import Findings
from analysis.implausible import Suspicion, suspicions
from analysis.refusals import Refusal
from analysis.roles import Roles, guess_roles
from analysis.study import Study
from analysis.table import Table
from analysis.unit_question import UnitAnswer, unit_answers


@st.cache_resource(max_entries=64, show_spinner=False)
def _findings(fingerprint: str, _study: Study) -> Findings:
    return analyse(_study)


def findings(study: Study | None) -> Findings | Refusal | None:
    """Return what a study comes to, the refusal where it cannot be analysed, None where there is none."""
    if study is None:
        return None
    try:
        return _findings(study.fingerprint, study)
    except Refusal as refusal:
        return refusal


@st.cache_resource(max_entries=16, show_spinner=False)
def _crossing(fingerprint: str, _study: Study) -> Mapping[str, Any]:
    return counted.crossing(_study)


def crossing(study: Study | None) -> Mapping[str, Any] | None:
    """Return the layout of a study with its counts, also where it cannot be analysed; None where there is nothing to count in."""
    found = findings(study)
    if study is None or isinstance(found, Findings):
        return found.design if isinstance(found, Findings) else None
    try:
        return _crossing(study.fingerprint, study)
    except Refusal:
        return None


@st.cache_resource(max_entries=16, show_spinner=False)
def _suspicions(fingerprint: str, _study: Study) -> tuple[Suspicion, ...]:
    return suspicions(_study)


def worth_a_look(study: Study | None) -> tuple[Suspicion, ...]:
    """Return the values of a study that deserve a second look; none where it cannot be analysed."""
    return () if study is None or isinstance(findings(study), Refusal) else _suspicions(study.fingerprint, study)


@st.cache_resource(max_entries=16, show_spinner=False)
def _roles(fingerprint: str, _table: Table) -> Roles:
    return guess_roles(_table)


def roles(table: Table) -> Roles:
    """Return the roles that the columns of a table suggest, with the reasons."""
    return _roles(table.fingerprint, table)


@st.cache_resource(max_entries=16, show_spinner=False)
def _unit_answers(fingerprint: str, _study: Study, column: str) -> tuple[UnitAnswer, UnitAnswer]:
    return unit_answers(_study, column)


def asked_units(study: Study | None) -> tuple[UnitAnswer, ...]:
    """Return what each answer to the question of the unit means, where a column names the units or looks as if it did."""
    if study is None or isinstance(findings(study), Refusal):
        return ()
    column = study.unit or roles(study.table).unit
    return (
        () if column is None or column in (study.response, study.block, *study.factors) else _unit_answers(study.fingerprint, study, column)
    )
