"""How the bytes of a text file become characters: byte-order marks, UTF-8, UTF-16, Windows-1252, line endings."""

import codecs
import re
from dataclasses import dataclass

from analysis import refusals
from analysis.table import Decision

_SAMPLE = 65536  # bytes looked at for the signs of UTF-16 and of binary data
_CONTROL = re.compile(rb"[\x01-\x08\x0e-\x19\x1b-\x1f\x7f]")
_MOST_CONTROL = 0.01  # share of control characters above which a file is no text
_UTF16 = {"utf-16-le": "UTF-16", "utf-16-be": "UTF-16"}


@dataclass(frozen=True)
class Decoded:
    """A text file as UTF-8 with \\n line ends, without a byte-order mark."""

    data: bytes
    decisions: tuple[Decision, ...]


def decode(data: bytes) -> Decoded:
    """Decode a text file; raises NulBytes, or NotATable for binary data."""
    encoding = _marked(data) or _unmarked_utf16(data)
    if encoding is None:
        _refuse_binary(data)
        encoding = "utf-8" if _is_utf8(data) else "windows-1252"
    if encoding != "utf-8":
        data = _recoded(data, encoding)
        _refuse_binary(data)
    data = data.removeprefix(codecs.BOM_UTF8)
    if b"\r" in data:
        data = data.replace(b"\r\n", b"\n").replace(b"\r", b"\n")
    return Decoded(data.rstrip(b"\x1a"), _decisions(encoding))


def _decisions(encoding: str) -> tuple[Decision, ...]:
    if encoding == "utf-8":
        return ()
    told = _UTF16.get(encoding, encoding.replace("windows", "Windows").replace("utf", "UTF"))
    return (Decision("encoding", f"The text was read as {told}."),)


def _marked(data: bytes) -> str | None:
    """The encoding that a byte-order mark names."""
    marks = (
        (codecs.BOM_UTF32_LE, "utf-32"),
        (codecs.BOM_UTF32_BE, "utf-32"),
        (codecs.BOM_UTF16_LE, "utf-16"),
        (codecs.BOM_UTF16_BE, "utf-16"),
    )
    return next((encoding for mark, encoding in marks if data.startswith(mark)), None)


def _unmarked_utf16(data: bytes) -> str | None:
    """UTF-16 without a mark: nearly every other byte of western text is zero, always on the same side."""
    sample = data[: min(len(data), _SAMPLE) // 2 * 2]
    pairs = len(sample) // 2
    if pairs < 4:
        return None
    even, odd = sample[0::2].count(0), sample[1::2].count(0)
    if odd > 0.7 * pairs and even < 0.02 * pairs:
        return "utf-16-le"
    return "utf-16-be" if even > 0.7 * pairs and odd < 0.02 * pairs else None


def _is_utf8(data: bytes) -> bool:
    if data.isascii():
        return True
    try:
        data.decode("utf-8")
    except UnicodeDecodeError:
        return False
    return True


def _recoded(data: bytes, encoding: str) -> bytes:
    if encoding == "windows-1252":  # five of its codes are unassigned; they become the replacement sign
        return data.decode(encoding, errors="replace").encode("utf-8")
    try:
        return data.decode(encoding).encode("utf-8")
    except UnicodeError as error:
        raise refusals.DamagedFile("text file") from error


def _refuse_binary(data: bytes) -> None:
    sample = data[:_SAMPLE]
    if len(_CONTROL.findall(sample)) + sample.count(0) > max(2, _MOST_CONTROL * len(sample)):
        raise refusals.NotATable("binary data")
    place = data.find(b"\0")
    if place >= 0:
        raise refusals.NulBytes(data.count(b"\n", 0, place) + 1)
