"""Upper tails of the F, t and chi-square distributions, as the special functions that give them directly.

The distribution objects of scipy.stats call these very functions, after checks of shapes and bounds that take a hundred times as long.
"""

from typing import Any

import numpy as np
from scipy import special


def f_upper(f: Any, df1: Any, df2: Any) -> Any:
    """Return P(F > f); numbers or arrays, NaN where an argument is."""
    return special.fdtrc(df1, df2, f)


def t_two_sided(t: Any, df: Any) -> Any:
    """Return P(|T| > |t|); df may be infinite."""
    return 2 * special.stdtr(df, -np.abs(t))


def t_quantile(tail: Any, df: Any) -> Any:
    """Return the t that is exceeded with probability `tail`, above 0 for a tail below one half; df may be infinite."""
    return -special.stdtrit(df, tail)
