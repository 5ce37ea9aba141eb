"""How numbers are written for people: one rule for digits, one for p-values, one for percentages."""

import math

MINUS = "\u2212"  # the typographic minus; a hyphen would break from its number at a line end
NARROW_SPACE = "\u202f"  # between groups of three digits and before a percent sign
P_FLOOR = 0.001  # smaller p-values are told as "< 0.001"
NOT_KNOWN = "\u2013"  # stands where a number is not defined


def decimals_for(spread: float | None) -> int:
    """Return how many decimals leave two significant digits of a standard error (or other spread).

    Negative results never occur: whole numbers are the coarsest that is shown. Source: common practice in metrology (two
    digits of the uncertainty).
    """
    if spread is None or not math.isfinite(spread) or spread <= 0:
        return 2
    return max(0, min(12, 1 - math.floor(math.log10(spread))))


def fixed(value: float | None, decimals: int) -> str:
    """Write a number with a fixed count of decimals, a true minus sign and grouped thousands."""
    if value is None or not math.isfinite(value):
        return NOT_KNOWN
    text = f"{abs(value):,.{decimals}f}".replace(",", NARROW_SPACE)
    negative = value < 0 and any(digit in "123456789" for digit in text)
    return MINUS + text if negative else text


def measured(value: float | None, spread: float | None) -> str:
    """Write a number in units of the response with the digits that its standard error supports."""
    return fixed(value, decimals_for(spread))


def signed(value: float | None, spread: float | None) -> str:
    """Write a change with its sign, plus as well as minus, and the digits that its standard error supports."""
    text = measured(value, spread)
    above_zero = value is not None and value > 0 and any(digit in "123456789" for digit in text)
    return f"+{text}" if above_zero else text


def significant(value: float | None, digits: int = 3) -> str:
    """Write a number without a standard error of its own (F, t, a ratio) with a count of significant digits."""
    if value is None or not math.isfinite(value):
        return NOT_KNOWN
    if value == 0:
        return "0"
    magnitude = math.floor(math.log10(abs(float(f"{value:.{digits - 1}e}"))))
    return fixed(value, max(0, min(12, digits - 1 - magnitude)))


def shortest(value: float) -> str:
    """Write one observed value as briefly as its digits allow."""
    return f"{value:.12g}".replace("-", MINUS)


def p_value(p: float | None) -> str:
    """Write a p-value as "p = 0.023", or "p < 0.001" below the floor (SAMPL guideline: two or three digits, exact)."""
    if p is None or not math.isfinite(p):
        return f"p {NOT_KNOWN}"
    return f"p < {P_FLOOR}" if p < P_FLOOR else f"p = {p_number(p)}"


def p_number(p: float | None) -> str:
    """Write the number of a p-value alone, for a column headed p: "0.023", "< 0.001"."""
    if p is None or not math.isfinite(p):
        return NOT_KNOWN
    if p < P_FLOOR:
        return f"< {P_FLOOR}"
    return f"{p:.3f}" if p < 0.0995 else f"{p:.2f}"


def percent_number(share: float | None) -> str:
    """Write a share between 0 and 1 as the whole number of percent alone, where the sign follows later."""
    return NOT_KNOWN if share is None or not math.isfinite(share) else fixed(100 * share, 0)


def percent(share: float | None) -> str:
    """Write a share between 0 and 1 as whole percent."""
    number = percent_number(share)
    return number if number == NOT_KNOWN else f"{number}{NARROW_SPACE}%"
