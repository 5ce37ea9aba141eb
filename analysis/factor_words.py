"""The second and third answers in words: whether a factor matters, by how much, and within which levels of the other."""

from analysis import verdicts
from analysis.evidence import Evidence
from analysis.families import within_name
from analysis.frames import estimable
from analysis.observations import Factor
from analysis.rounding import measured, significant
from analysis.sizes import SMALL_ENOUGH, Size


def inside(evidence: Evidence, factor: Factor, other: Factor) -> tuple[str, str]:
    """Return verdict and sentence where the effect depends on the other factor: within which of its levels it is shown."""
    frame = evidence.simple_effects[evidence.simple_effects["factor"] == factor.name]
    where = frame.loc[frame["p_adjusted"] < evidence.alpha, "within"].tolist()
    rest = frame.loc[frame["p_adjusted"] >= evidence.alpha, "within"].tolist()
    open_ = frame.loc[frame["p_adjusted"].isna(), "within"].tolist()
    if not where:
        return verdicts.UNDECIDED, f"Not decided within any single level of {other.word}, though its effect changes with {other.word}."
    if not rest and not open_:
        return verdicts.DIFFERS, f"{_capital(factor)} matters at every level of {other.word}, and not by the same amount."
    sentence = f"{_capital(factor)} matters with {other.told(*where)}"
    if rest:
        ending = "any difference is too small to matter" if _only_small(evidence, factor, other, rest) else "no difference is shown"
        sentence += f"; with {other.told(*rest)} {ending}"
    return verdicts.DIFFERS, f"{sentence}; with {other.told(*open_)} it cannot be told." if open_ else f"{sentence}."


def shown(evidence: Evidence, factor: Factor, size: Size | None) -> tuple[str, str]:
    """Return verdict and sentence where the factor's own test is decided."""
    if size is not None and size.all_small:
        return verdicts.SMALL, f"{_capital(factor)} makes a difference, but one too small to matter."
    verdict = verdicts.LARGER if size is not None and size.verdict == verdicts.LARGER else verdicts.DIFFERS
    means = estimable(evidence.marginal_means[factor.name], "mean")
    if size is None or means.empty:
        missing = "its means cannot be averaged while combinations are missing"
        return verdict, f"{_capital(factor)} matters, judged beside the other factor; {missing}."
    if size.verdict == verdicts.UNDECIDED:
        return verdict, f"{_capital(factor)} makes a difference overall, though no two of its levels can be told apart one by one."
    levels, values = means["level"].tolist(), means["mean"].to_numpy(float)
    return verdict, f"{_capital(factor)} matters: {_highest(evidence, factor, size, levels[values.argmax()], levels[values.argmin()])}."


def not_shown(factor: Factor, size: Size | None) -> tuple[str, str]:
    """Return verdict and sentence where the factor's own test is not decided; never that it does nothing."""
    if size is not None and size.all_small:
        return verdicts.NONE_THAT_MATTERS, f"{_capital(factor)} makes no difference that matters."
    what = f"a difference between the levels of {factor.word}"
    return verdicts.UNDECIDED, f"Not decided: the data do not show {what}, nor that there is none."


def _only_small(evidence: Evidence, factor: Factor, other: Factor, levels: list[str]) -> bool:
    frame = evidence.comparisons[within_name(factor.name, other.name)]
    if frame is None:
        return False
    found = frame.loc[frame["within"].isin(levels), "verdict"]
    return bool(len(found)) and bool(found.isin(SMALL_ENOUGH).all())


def _highest(evidence: Evidence, factor: Factor, size: Size, high: str, low: str) -> str:
    """Say by how much the highest mean lies above the lowest, where the scale can tell it and that pair is compared."""
    if {high, low} != set(size.levels) or not evidence.tells_sizes:
        return f"{evidence.response} is highest with {factor.told(high)} and lowest with {factor.told(low)}"
    if evidence.scale.tells_ratios:
        ratio = f"{significant(size.effect)} times ({significant(size.lower)} to {significant(size.upper)})"
        return f"{evidence.response} is {ratio} as high with {factor.told(high)} as with {factor.told(low)}"
    ends = f"{measured(size.lower, size.se)} to {measured(size.upper, size.se)}"
    difference = f"{measured(size.effect, size.se)}{evidence.unit} ({ends})"
    return f"{evidence.response} is {difference} higher with {factor.told(high)} than with {factor.told(low)}"


def _capital(factor: Factor) -> str:
    return factor.word[:1].upper() + factor.word[1:]
