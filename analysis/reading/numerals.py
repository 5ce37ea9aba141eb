"""How one number is written in a cell: sign, digits and their marks, exponent, unit, footnote mark, detection limit."""

import re
from dataclasses import dataclass
from functools import lru_cache

from analysis.reading import units

MINUS_SIGNS = "-\u2212\u2013\u2012\ufe63\uff0d"
_SIGN = "[+" + re.escape(MINUS_SIGNS) + "]"
FOOTNOTES = "*\u2020\u2021\u00a7\u00b6#"
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")
_CELL = re.compile(
    rf"(?P<before>[*†‡]?) ?(?P<bound>[<>≤≥]=?)? ?(?P<money>[$€£¥]?)(?P<sign>{_SIGN}?) ?"
    r"(?P<body>[0-9]+(?:[ '’.,][0-9]+)*[.,]?|[.,][0-9]+)"
    rf"(?P<exponent>[eE]{_SIGN}?[0-9]+| ?[x×·] ?10(?:\^{_SIGN}?[0-9]+|[⁺⁻]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+))?"
    r" ?(?P<rest>.*)",
    re.DOTALL,
)
_SPACED = re.compile(r"[0-9]{1,3}(?:[ '’][0-9]{3})+(?![0-9 '’])")
_GROUPED = {mark: re.compile(rf"[1-9][0-9]{{0,2}}(?:\{mark}[0-9]{{3}})+") for mark in ",."}
_LONGEST = 120  # characters; longer text is prose, not a number


@dataclass(frozen=True)
class Shape:
    """What the marks of one number say: which is certainly decimal, certainly thousands, or could be either."""

    decimal: str = ""
    thousands: str = ""
    either: str = ""


@dataclass(frozen=True)
class Numeral:
    """A number as found in a cell, its marks not yet decided."""

    sign: str  # "" or "-"
    body: str  # digits with "," and "." as written; spaces and apostrophes are gone
    exponent: int
    shape: Shape
    unit: str  # "" where none is written
    footnote: bool
    bound: str  # "<" or ">" where only a limit is known, else ""

    def plain(self, comma: str, point: str) -> str:
        """Return the number in plain decimal notation, an ambiguous mark being "decimal" or "thousands"."""
        decimal = self.shape.decimal
        if self.shape.either and {",": comma, ".": point}[self.shape.either] == "decimal":
            decimal = self.shape.either
        whole, _, fraction = self.body.rpartition(decimal) if decimal else (self.body, "", "")
        whole = whole.replace(",", "").replace(".", "")
        return f"{self.sign}{whole or '0'}{'.' + fraction if fraction else ''}{f'e{self.exponent}' if self.exponent else ''}"


@lru_cache(maxsize=65536)
def find(text: str) -> Numeral | None:
    """Return the number written in tidy text, or None where the text is not one number."""
    if len(text) > _LONGEST or not any(character.isdigit() for character in text):
        return None
    match = _CELL.fullmatch(text)
    if match is None:
        return None
    body, spaced = _without_spaces(match["body"])
    shape = _shape(body, settled=spaced or bool(match["exponent"])) if body else None
    unit, after = _unit_and_footnote(match["rest"])
    if shape is None or unit is None or (unit and match["money"]):
        return None
    return Numeral(
        sign="-" if match["sign"] and match["sign"] in MINUS_SIGNS else "",
        body=body,
        exponent=_exponent(match["exponent"] or ""),
        shape=shape,
        unit=match["money"] or unit,
        footnote=bool(match["before"]) or after,
        bound=(match["bound"] or "").replace("≤", "<").replace("≥", ">")[:1],
    )


def _unit_and_footnote(rest: str) -> tuple[str | None, bool]:
    """Tell the unit (None where the rest is no unit) from a footnote mark; a raised 2 behind a unit belongs to it (m²)."""
    unit = units.normal(rest)
    if unit is not None:
        return unit, False
    return units.normal(rest.rstrip(FOOTNOTES + "¹²³").rstrip()), True


def _without_spaces(body: str) -> tuple[str, bool]:
    """Take out the spaces or apostrophes between groups of three; "" where they stand elsewhere."""
    if not any(mark in body for mark in " '’"):
        return body, False
    match = _SPACED.match(body)
    rest = body[match.end() :] if match else " "
    if match is None or any(mark in rest for mark in " '’"):
        return "", False
    return re.sub(r"[ '’]", "", match[0]) + rest, True


def _shape(body: str, settled: bool) -> Shape | None:
    """Tell what the marks of a number say, or None where no reading makes them a number.

    settled: an exponent, or a thousands mark of another kind, leaves a single mark no meaning but the decimal one.
    """
    commas, points = body.count(","), body.count(".")
    if commas and points:
        return _shape_of_both(body)
    mark, count = ("," if commas else "."), commas or points
    if not count:
        return Shape()
    grouped = _GROUPED[mark].fullmatch(body) is not None
    if count > 1:
        return Shape(thousands=mark) if grouped and not settled else None
    return Shape(either=mark) if grouped and not settled else Shape(decimal=mark)


def _shape_of_both(body: str) -> Shape | None:
    decimal = max(",.", key=body.rfind)
    thousands = "." if decimal == "," else ","
    whole = body[: body.rfind(decimal)]
    if decimal in whole or _GROUPED[thousands].fullmatch(whole) is None:
        return None
    return Shape(decimal=decimal, thousands=thousands)


def _exponent(text: str) -> int:
    """Return the power of ten of "e-3", "× 10^5" or "·10⁻³"."""
    digits = re.sub(r"^ ?([eE]|[x×·] ?10\^?)", "", text).translate(_SUPERSCRIPTS)
    for sign in MINUS_SIGNS:
        digits = digits.replace(sign, "-")
    return int(digits) if digits else 0
