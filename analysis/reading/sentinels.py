"""Which numbers look like codes for a missing value because they stand far outside the rest."""

import numpy as np
import numpy.typing as npt

from analysis.table import Floats

_NINES = (9.0, 99.0, 999.0, 9999.0, 99999.0, 999999.0, 99.99, 999.9, 999.99, 9999.99)
_CODES = np.array([-1.0, *_NINES, *(-code for code in _NINES)])
_FAR = 3.0  # ranges of the rest between a code and the nearest other value


def find(values: Floats) -> npt.NDArray[np.intp]:
    """Return where values equal a customary code and stand far outside the rest of the column."""
    coded = np.isin(values, _CODES)
    rest = values[~coded & np.isfinite(values)]
    if not coded.any() or rest.size < 3:
        return np.empty(0, dtype=np.intp)
    low, high = float(rest.min()), float(rest.max())
    reach = _FAR * max(high - low, 1e-9 * max(abs(low), abs(high), 1.0))
    with np.errstate(invalid="ignore"):
        return np.flatnonzero(coded & ((values < low - reach) | (values > high + reach)))
