"""Which column is probably the response, which two are the factors, and which a block or a unit, each with a reason."""

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import combinations
from types import MappingProxyType

import numpy as np

from analysis import refusals
from analysis.reading import look_alikes, words
from analysis.relabelling import relabelled
from analysis.table import Codes, Column, Levels, Response, Table

_SAMPLE = 5000  # rows looked at before a long column is read as a whole
_MOST_CROSSED = 40  # columns tried as factors in pairs, those that look most like one
MOST_LEVELS = 30  # of a factor; a column with more is a number or an identifier
_BLOCK = re.compile(
    r"\b(block|blk|replicates?|replication|rep|batch|bench|site|run|day|date|shift|litter|farm|tray|plate|round|chamber|lot|sampled|"
    r"bloc|bloque|blocco|blok|wiederholung|wdh|répétition|repetición|charge|lote|lotto|datum|fecha|data|jour|tag)\b",
    re.IGNORECASE,
)
_UNIT = re.compile(
    r"\b(unit|plot|pot|plant|animal|subject|patient|cage|pen|tank|tree|vine|mouse|rat|sample|id|dish|vessel)s?\b", re.IGNORECASE
)
_ORDER = re.compile(
    r"\b(order|sequence|row|position|no|nr|number|index|obs|observation|leaf|leaves|reading|subsample|technical|time)\b", re.IGNORECASE
)


_PERSON = re.compile(
    r"\b(\w+ by|op|operator|observer|technician|person|reader|assessor|scorer|initials|who|opérateur|operateur|operador|operatore|"
    r"bearbeiter(in)?|prüfer|technicien|técnico|tecnico|waarnemer)\b",
    re.IGNORECASE,
)
_REMARK = re.compile(
    r"\b(remarks?|notes?|comments?|bemerkung(en)?|anmerkung|kommentar|remarques?|commentaires?|observaciones|nota|comentarios?|osservazioni|"
    r"opmerking(en)?)\b",
    re.IGNORECASE,
)


@dataclass(frozen=True)
class Roles:
    """The columns for each role, None where none suits; reasons maps each named column to a few words."""

    response: str | None
    row_factor: str | None
    column_factor: str | None
    block: str | None
    unit: str | None
    reasons: Mapping[str, str]


@dataclass(frozen=True, eq=False)
class Look:
    """What can be seen in one column."""

    column: Column
    place: int  # in the file, from 0
    rows: int

    @cached_property
    def levels(self) -> Levels:
        """The column as levels, those written in several ways taken for one: a typing error makes no level of a factor."""
        levels = self.column.as_levels()
        return relabelled(levels, look_alikes.merges(levels))

    @cached_property
    def response(self) -> Response | None:
        """The column as measurements, None where it is not."""
        try:
            return self.column.as_response() if self.column.looks_numeric else None
        except refusals.Refusal:
            return None

    @cached_property
    def is_many(self) -> bool:
        """Whether a look at the first rows already shows more different cells than a factor has levels."""
        return len(set(self.column.text(0, _SAMPLE))) > 4 * MOST_LEVELS

    @cached_property
    def count(self) -> int:
        """How many levels there are; in a long column of many different cells, how many the first rows would lead to expect."""
        if self.is_many and self.rows > _SAMPLE:
            return int(len(set(self.column.text(0, _SAMPLE))) / _SAMPLE * self.rows)
        return len(self.levels.labels)

    @cached_property
    def is_running_number(self) -> bool:
        """Whether the column counts its rows, or numbers them in another order."""
        if self.response is None or self.count != self.rows:
            return False
        return bool(np.all(np.diff(np.sort(self.response.values)) == 1))

    @cached_property
    def is_balanced(self) -> bool:
        """Whether all levels have about the same number of rows."""
        counts = np.bincount(self.levels.codes[self.levels.codes >= 0])
        return bool(counts.min() >= 0.8 * counts.max())

    @cached_property
    def has_blanks(self) -> bool:
        """Whether any row is blank, which a factor of an experiment hardly ever is."""
        return bool((self.levels.codes < 0).any())

    @cached_property
    def has_decimals(self) -> bool:
        """Whether any of the first numbers is not whole."""
        if self.response is None:
            return False
        values = self.response.values[:_SAMPLE]
        return bool((np.mod(values[np.isfinite(values)], 1) != 0).any())

    @cached_property
    def could_be_factor(self) -> bool:
        """Two levels or more, on average on at least two rows each, and not too many of them."""
        return 2 <= self.count <= MOST_LEVELS and 2 * self.count <= max(self.rows, 4) and not self.is_running_number

    def named(self, pattern: re.Pattern[str]) -> bool:
        """Whether the column's name speaks of something."""
        return pattern.search(re.sub(r"[_\W]+", " ", self.column.name)) is not None


def guess_roles(table: Table) -> Roles:
    """Guess the role of each column from its content, its name and its place; a role is None where no column suits."""
    looks = [Look(column, place, table.rows) for place, column in enumerate(table.columns)]
    response = max(looks, key=_response_score, default=None)
    if response is None or response.response is None:
        response = None
    factors = _factors([look for look in looks if look is not response and look.could_be_factor])
    others = [look for look in looks if look is not response and look not in factors]
    cells = _cells(factors, table.rows)
    block = next((look for look in others if _is_block(look, cells)), None)
    unit = next((look for look in others if look is not block and _is_unit(look, cells)), None)
    names = [look.column.name for look in factors]
    row, column = (*names, None, None)[:2]
    return Roles(_name(response), row, column, _name(block), _name(unit), _reasons(response, factors, block, unit))


def _name(look: Look | None) -> str | None:
    return None if look is None else look.column.name


def _response_score(look: Look) -> float:
    """How much a column looks like measurements: many different numbers, decimals, a telling name, a place to the right."""
    if look.response is None:
        return -9.0
    score = 2.0 * min(1.0, look.count / max(1, look.rows)) + 1.5 * look.has_decimals + 0.1 * look.place
    score += 1.5 * (look.named(words.MEASURED) or look.column.unit is not None)
    score -= 2.0 * (look.named(_BLOCK) or look.named(_UNIT) or look.named(_ORDER))
    return score - 3.0 * look.is_running_number - 2.0 * (look.could_be_factor and look.is_balanced)


def _factors(looks: Sequence[Look]) -> list[Look]:
    """The two columns that look most like crossed factors, in the order of the file."""
    if len(looks) < 2:
        return list(looks)
    scores = {look.place: _factor_score(look) for look in looks}
    looks = sorted(sorted(looks, key=lambda look: -scores[look.place])[:_MOST_CROSSED], key=lambda look: look.place)
    best = max(combinations(looks, 2), key=lambda pair: scores[pair[0].place] + scores[pair[1].place] + _crossing(*pair))
    return sorted(best, key=lambda look: look.place)


def _factor_score(look: Look) -> float:
    """How much a column looks like a factor: words or few numbers, balanced, not named like a block, a person, a unit or a run order."""
    score = 1.0 * (not look.column.looks_numeric) + 0.5 * look.is_balanced + 0.5 * (look.count <= 8) - 0.05 * look.place
    score -= 3.0 * (look.named(_BLOCK) or look.named(_PERSON) or look.named(_REMARK)) + 1.0 * look.has_blanks
    return score - 3.0 * (look.named(_UNIT) or look.named(_ORDER)) - 1.0 * look.has_decimals


def _crossing(left: Look, right: Look) -> float:
    """How fully two columns are crossed, whether combinations are repeated, and whether equally often, as chance hardly makes them."""
    counts = np.unique(_joint(left.levels.codes, right.levels.codes), return_counts=True)[1]
    share = counts.size / (left.count * right.count)
    equal = counts.size > 1 and counts.min() == counts.max() > 1
    return 3.0 * share + 0.5 * (counts.size <= left.rows / 2) + 1.0 * equal


def _joint(left: Codes, right: Codes) -> Codes:
    """One code for each combination of two columns."""
    return (left.astype(np.int64) + 1) * (int(right.max(initial=0)) + 2) + right + 1


def _cells(factors: Sequence[Look], rows: int) -> Codes:
    """The cell of each row, numbered from 0."""
    codes: Codes = np.zeros(rows, dtype=np.intp)
    for look in factors:
        codes = _joint(codes, look.levels.codes)
    return np.unique(codes, return_inverse=True)[1].astype(np.intp)


def _is_block(look: Look, cells: Codes) -> bool:
    """A column named like a block that meets most cells with most of its levels."""
    if not look.named(_BLOCK) or not 2 <= look.count <= look.rows / 2:
        return False
    met = len(np.unique(_joint(look.levels.codes, cells)))
    return met >= 0.5 * look.count * (int(cells.max()) + 1)


def _is_unit(look: Look, cells: Codes) -> bool:
    """A column whose labels stand on several rows of one cell each, as repeated readings of one unit do."""
    if look.column.looks_numeric and not look.named(_UNIT):
        return False
    if look.named(_ORDER) and not look.named(_UNIT):
        return False
    if not 2 <= look.count < look.rows:
        return False
    met = len(np.unique(_joint(look.levels.codes, cells)))
    in_one_cell = met == look.count >= int(cells.max()) + 1 + (not look.named(_UNIT))
    same_in_each = look.named(_UNIT) and met == look.count * (int(cells.max()) + 1)
    return (in_one_cell or same_in_each) and 2 * met <= look.rows


def _reasons(response: Look | None, factors: Sequence[Look], block: Look | None, unit: Look | None) -> Mapping[str, str]:
    """A few words for each column that got a role."""
    reasons: dict[str, str] = {}
    if response is not None:
        what = "decimal numbers" if response.has_decimals else "numbers"
        named = ", named like a measurement" if response.named(words.MEASURED) else ""
        reasons[response.column.name] = f"{what}, {response.count} different{named}"
    for look in factors:
        kind = "numbers" if look.levels.amounts is not None else "levels"
        balance = ", equally often" if look.is_balanced else ""
        spelled = "" if look.count == len(look.column.as_levels().labels) else ", look-alikes taken for one"
        reasons[look.column.name] = f"{look.count} {kind} that recur{balance}{spelled}"
    if block is not None:
        reasons[block.column.name] = f"named like a block, {block.count} levels across the cells"
    if unit is not None:
        reasons[unit.column.name] = f"{unit.count} labels, each on several rows of one cell"
    return MappingProxyType(reasons)
