"""In which order doubts are told: the most serious first."""

from scipy import stats

from analysis.doubting.kinds import KINDS, STRICT, outlying
from analysis.doubting.signs import AMBER, Doubt, Signs


def doubts(signs: Signs) -> tuple[Doubt, ...]:
    """Return every doubt, amber before notes, and inside each the ones that bring about the others first.

    An observation that stands far out also makes spread and shape odd, a drift also widens the spread; so they come before.
    Nothing is doubted where the model fits every observation.
    """
    if signs.layout.analysed.residual_ms == 0:
        return ()
    kinds = sorted(KINDS, key=lambda kind: kind is outlying) if _odd_elsewhere(signs) else KINDS
    found = [doubt for kind in kinds if (doubt := kind(signs)) is not None]
    return tuple(sorted(found, key=lambda doubt: doubt.level != AMBER))


def _odd_elsewhere(signs: Signs) -> bool:
    """Return whether shape or spread is as odd outside the cell of the farthest observation, which then is one of many."""
    if signs.outlying_p == 1:
        return False
    cell = signs.observations["row"] + "\0" + signs.observations["column"]
    others = (cell != cell.iloc[signs.farthest]).to_numpy(bool)
    residual, fitted = signs.residual[others], signs.observations["fitted"].to_numpy(float)[others]
    if others.sum() < 8 or residual.min() == residual.max() or fitted.min() == fitted.max():
        return False
    return bool(stats.shapiro(residual).pvalue < STRICT or stats.spearmanr(fitted, abs(residual)).pvalue < STRICT)
