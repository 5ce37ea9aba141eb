"""What a unit of measurement looks like behind a number, in a row of units, or in brackets."""

import re

PERCENT = "%"
_LETTERS = r"A-Za-zÀ-ÖØ-öø-ÿµΩΑ-Ωα-ω°℃℉%‰€£$¥″′\""
_POWER = r"(?:\^?[-−–+]?[0-9]{1,2}|[⁺⁻]?[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,2})?"
_WORD = rf"[{_LETTERS}]+\.?{_POWER}"
_UNIT = re.compile(rf"{_WORD}(?:(?: ?[/·*×] ?| ){_WORD}){{0,5}}")
_MOST = 30  # characters; a longer text behind a number is a remark
_KNOWN = re.compile(  # for a row of units, where an ordinary word would be a level
    r"(?:[fpnµumcdhkMGT]?(?:g|m|l|L|s|mol|M|Pa|J|W|V|A|K|N|Hz|Bq|Gy|Sv|eV|cal|Da|bar|t|ha|Ω)|%|‰|°|°C|°F|℃|℉|deg|degC|C|F|K|min|h|hr|hrs|d|day|days|wk|week|weeks|"
    r"months?|yr|years?|a|sec|ppm|ppb|rpm|pH|cfu|CFU|IU|U|kU|inch|in|ft|lb|oz|gal|ac|acre|bu|mmHg|psi|dB|lx|lux|count|counts|n|no|log10|log|ln|score|a\.?u\.?|"
    r"index|ratio|plants?|fruits?|eggs?|seeds?|leaves|cells?|plots?|fw|dw|FW|DW|w|v|€|£|\$)" + _POWER
)


def normal(text: str) -> str | None:
    """Return a unit in one spelling ("" for none), or None where the text is no unit.

    The micro sign and the Greek letter are one, brackets around the unit are dropped.
    """
    unit = text.replace("μ", "µ").strip()
    if unit[:1] + unit[-1:] in ("()", "[]"):
        unit = unit[1:-1].strip()
    if not unit:
        return ""
    return unit if len(unit) <= _MOST and _UNIT.fullmatch(unit) else None


def is_known(text: str) -> bool:
    """Whether text is a unit in its own right, as a row of units under the header holds them."""
    unit = normal(text)
    if not unit:
        return False
    if text.strip()[:1] in "([":
        return True
    return all(_KNOWN.fullmatch(word) for word in re.split(r"[ /·*×]+", unit) if word)
