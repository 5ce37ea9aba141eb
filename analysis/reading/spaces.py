"""How the text of a cell is made comparable: white space, Unicode form, invisible characters."""

import re
import unicodedata

import pyarrow as pa
import pyarrow.compute as pc

# Every kind of blank that word processors, web pages and instruments leave behind, and the zero-width ones.
BLANKS = "\u0009-\u000d\u0020\u0085\u00a0\u1680\u2000-\u200b\u2028\u2029\u202f\u205f\u2060\u3000\ufeff"
_RUN = re.compile(f"[{BLANKS}]+")
# The same set for the regular expressions of Arrow, which know no \u escapes.
_ARROW_RUN = r"[\x{9}-\x{d}\x{20}\x{85}\x{a0}\x{1680}\x{2000}-\x{200b}\x{2028}\x{2029}\x{202f}\x{205f}\x{2060}\x{3000}\x{feff}]+"


def tidy(text: str) -> str:
    """Return text in Unicode form NFC, trimmed, with every run of white space as one space."""
    if text.isascii() and text.isprintable() and "  " not in text:
        return text.strip()
    return _RUN.sub(" ", unicodedata.normalize("NFC", text)).strip()


def tidy_array(texts: pa.StringArray) -> pa.StringArray:
    """Tidy every entry of an Arrow array of text."""
    normal = pc.utf8_normalize(texts, form="NFC")
    return pc.utf8_trim(pc.replace_substring_regex(normal, _ARROW_RUN, " "), characters=" ")


def is_blank(text: str) -> bool:
    """Whether nothing but white space stands in a cell."""
    return not text or not tidy(text)
