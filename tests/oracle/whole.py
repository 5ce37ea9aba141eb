"""The whole answer to one case, laid out as the engine's object is, every number at 50 digits."""

from collections import defaultdict
from dataclasses import dataclass, field
from fractions import Fraction

from mpmath import mp, mpf

from tests.oracle import doubts, families, means, tables
from tests.oracle.layout import Experiment, Reading

SCALES = {"log": mp.log, "sqrt": mp.sqrt, "reciprocal": lambda y: 1 / y}


@dataclass(frozen=True)
class Case:
    """Rows as written, and the choices; row, column and block names are fixed: a, b, block."""

    name: str
    rows: tuple[tuple[str, str, str, str, str], ...]  # a, b, block, unit, y; block and unit empty when not used
    choices: dict[str, object] = field(default_factory=dict)
    checks: bool = True  # spread tests and the like, only where there are no blocks

    @property
    def has_blocks(self) -> bool:
        """Tell whether rows name a block."""
        return bool(self.rows[0][2])

    @property
    def has_units(self) -> bool:
        """Tell whether rows name a unit."""
        return bool(self.rows[0][3])


def experiment(case: Case) -> Experiment:
    """Read the rows exactly, average the readings of a unit, then change the scale."""
    rows, columns = ordered(case, 0), ordered(case, 1)
    blocks = ordered(case, 2) if case.has_blocks else ()
    units: dict[tuple[object, ...], list[Fraction]] = defaultdict(list)
    for place, (a, b, block, unit, y) in enumerate(case.rows):
        units[a, b, block, unit if case.has_units else place].append(Fraction(y))
    scale = str(case.choices.get("scale", "none"))
    readings = [
        Reading(rows.index(a), columns.index(b), blocks.index(block) if blocks else 0, scaled(sum(values) / len(values), scale))
        for (a, b, block, _), values in units.items()
        if a in rows and b in columns
    ]
    return Experiment(rows, columns, blocks, tuple(readings))


def ordered(case: Case, place: int) -> tuple[str, ...]:
    """Levels in the order kept, else by name: the cases use names whose alphabetical order is the natural one."""
    kept = case.choices.get("keep", {})
    assert isinstance(kept, dict)
    return tuple(kept.get("ab"[place] if place < 2 else "", ())) or tuple(sorted({row[place] for row in case.rows}))


def scaled(y: Fraction, scale: str) -> Fraction:
    """The value on the analysis scale, exact to 50 digits."""
    if scale == "none":
        return y
    power = scale.removeprefix("power=")
    change = SCALES.get(scale, lambda value: mp.power(value, mpf(power)))
    value = change(mpf(y.numerator) / y.denominator)
    return Fraction(mp.nstr(value, 48))


def answer(case: Case) -> dict[str, object]:
    """Everything the oracle knows about a case."""
    x, names = experiment(case), tables.Names("a", "b", "block" if case.has_blocks else None)
    confidence = mpf(str(case.choices.get("confidence", "0.95")))
    full = case.choices.get("model", "full") == "full" and len(x.readings) > x.full.rank  # without replication the additive model answers
    a = means.Analysis(x, full, confidence)
    wanted = families.Wanted(str(case.choices.get("adjust", "tukey")))
    whole = {
        "tables": tables.four_tables(x, names, full, confidence),
        "tables_additive": tables.four_tables(x, names, False, confidence),
        "fit": tables.fit_summary(x, full, str(case.choices.get("scale", "none"))),
        "cells": means.cells(a),
        "marginal_means": {"a": means.marginal_means(a, True), "b": means.marginal_means(a, False)},
        "additive_means": means.additive_means(a),
        "effects": means.effects(a),
        "comparisons": families.comparisons(a, "a", "b", wanted),
        "simple_effects": families.simple_effects(a, "a", "b"),
        "interaction_contrasts": families.interaction_contrasts(a, wanted),
    }
    return whole | {"checks": checks(a, names)} if case.checks else whole


def checks(a: means.Analysis, names: tables.Names) -> dict[str, object]:
    """The part that doubts."""
    return {
        "levene": doubts.levene(a.x),
        "brown_forsythe": doubts.brown_forsythe(a.x),
        "bartlett": doubts.bartlett(a.x),
        "nonadditivity": doubts.nonadditivity(a.x),
        "hc3": doubts.hc3(a, names),
        "influence": doubts.influence(a),
    }


def written(value: object) -> object:
    """The answer as JSON holds it: numbers as text with 20 digits."""
    if isinstance(value, mpf):
        return mp.nstr(value, 20)
    if isinstance(value, dict):
        return {key: written(part) for key, part in value.items()}
    return [written(part) for part in value] if isinstance(value, list | tuple) else value
