"""How far a zip archive may unpack, and how its parts are read without trusting what it says about itself."""

import io
import zipfile
import zlib
from xml.parsers import expat

from analysis import refusals
from analysis.reading.limits import UNPACKED_BYTES

_MOST_ENTRIES = 10_000
_DEFLATE_RATIO = 1032  # no deflate stream unpacks to more than so many times its size
_STEP = 1 << 20
FAULTS = (zipfile.BadZipFile, zlib.error, OSError, ValueError, NotImplementedError, RuntimeError, EOFError, KeyError)


def check(data: bytes) -> None:
    """Turn down an archive that unpacks beyond the limit, is encrypted, or is damaged; its own word for its sizes is checked."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            entries = archive.infolist()
            if any(entry.flag_bits & 1 for entry in entries):
                raise refusals.Encrypted()
            if sum(entry.file_size for entry in entries) > UNPACKED_BYTES or len(entries) > _MOST_ENTRIES:
                raise refusals.UnpacksTooLarge(UNPACKED_BYTES)
            if sum(entry.compress_size for entry in entries) * _DEFLATE_RATIO > UNPACKED_BYTES:
                _hold_to_its_word(data, entries)
            if "META-INF/manifest.xml" in archive.namelist() and b"encryption-data" in archive.read("META-INF/manifest.xml"):
                raise refusals.Encrypted()
    except FAULTS as error:
        raise refusals.DamagedFile("workbook") from error


def _hold_to_its_word(data: bytes, entries: list[zipfile.ZipInfo]) -> None:
    """Unpack every part, step by step and keeping nothing, until one of them turns out larger than it says."""
    for entry in entries:
        start = entry.header_offset + 30 + sum(data[entry.header_offset + at] + 256 * data[entry.header_offset + at + 1] for at in (26, 28))
        packed = data[start : start + entry.compress_size]
        if entry.compress_type not in (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED):
            raise refusals.DamagedFile("workbook")
        stored = entry.compress_type == zipfile.ZIP_STORED
        if (len(packed) if stored else _unpacked(packed, entry.file_size)) > entry.file_size:
            raise refusals.UnpacksBeyondItsWord(UNPACKED_BYTES)


def _unpacked(packed: bytes, most: int) -> int:
    """How many bytes a stream unpacks to, as far as beyond a limit."""
    inflater, total = zlib.decompressobj(-15), 0
    while packed and not inflater.eof and total <= most:
        total += len(inflater.decompress(packed, _STEP))
        packed = inflater.unconsumed_tail
    return total


def part(data: bytes, name: str) -> bytes:
    """Return one part of an archive, b"" where it has none of that name (capitals aside)."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            names = {known.lower(): known for known in archive.namelist()}
            known = names.get(name.lower())
            return archive.read(known) if known is not None else b""
    except FAULTS as error:
        raise refusals.DamagedFile("workbook") from error


def parse(xml: bytes, parser: expat.XMLParserType) -> None:
    """Run a parser with its handlers over a part; a document type, which no workbook needs, is turned down with damage."""
    parser.StartDoctypeDeclHandler = _refuse_doctype
    try:
        parser.Parse(xml, True)
    except expat.ExpatError as error:
        raise refusals.DamagedFile("workbook") from error


def _refuse_doctype(*_: object) -> None:
    raise refusals.DamagedFile("workbook")


def local(name: str) -> str:
    """The name of an element without its namespace prefix."""
    return name.rpartition(":")[2]
