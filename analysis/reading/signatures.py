"""What a file is, told by its first bytes and not by its name."""

import io
import re
import zipfile
from typing import Literal

from analysis import refusals
from analysis.reading import archives

Kind = Literal["text", "xlsx", "xls", "ods", "parquet"]

_PICTURES_AND_DOCUMENTS: tuple[tuple[bytes, str], ...] = (
    (b"\x89PNG", "a PNG picture"),
    (b"\xff\xd8\xff", "a JPEG picture"),
    (b"GIF8", "a GIF picture"),
    (b"BM", "a bitmap picture"),
    (b"II*\0", "a TIFF picture"),
    (b"MM\0*", "a TIFF picture"),
    (b"%PDF", "a PDF document"),
    (b"{\\rtf", "a text document (RTF)"),
    (b"\x1f\x8b", "a gzip archive"),
    (b"BZh", "a bzip2 archive"),
    (b"7z\xbc\xaf", "a 7-Zip archive"),
    (b"\xfd7zXZ", "an xz archive"),
    (b"Rar!", "a RAR archive"),
    (b"(\xb5/\xfd", "a Zstandard archive"),
    (b"\x7fELF", "a program"),
    (b"MZ\x90", "a program"),
    (b"SQLite format 3", "a database"),
    (b"\x89HDF", "an HDF5 file"),
    (b"ARROW1", "an Arrow file"),
    (b"OggS", "a sound or film"),
    (b"ID3", "a sound"),
    (b"fLaC", "a sound"),
    (b"RIFF", "a sound, a film or a picture"),
    (b"%!PS", "a PostScript document"),
)
_OLE = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_NOTHING = b"\0\t\r\n \xef\xbb\xbf\xff\xfe"  # blanks and the bytes of byte-order marks
_HTML = re.compile(rb"\s*(<!--.*?-->\s*)*<(!doctype\s+html|html|head|body|table|div|meta|style)\b", re.IGNORECASE | re.DOTALL)
_JSON = re.compile(rb"\s*[\[{]\s*[\[{\"]")
_XML = re.compile(rb"\s*<\?xml|\s*<[A-Za-z][\w:.-]*[^<>]*>\s*<", re.DOTALL)


def kind_of(data: bytes) -> Kind:
    """Tell how a file is to be read; raises a refusal for an empty file and for what holds no table."""
    if not data[:4096].strip(_NOTHING) and not data.translate(None, _NOTHING):
        raise refusals.EmptyFile()
    if data[:4] == b"PK\x03\x04" or data[:4] == b"PK\x05\x06":
        return _kind_of_archive(data)
    if data[:8] == _OLE:
        return _kind_of_ole(data)
    if data[:4] == b"PAR1":
        return "parquet"
    if data[:4] == b"PARE":
        raise refusals.Encrypted()
    _refuse_other(data)
    return "text"


def _kind_of_archive(data: bytes) -> Kind:
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            names = set(archive.namelist())
            mimetype = archive.read("mimetype")[:200] if "mimetype" in names and archive.getinfo("mimetype").file_size < 1000 else b""
    except archives.FAULTS as error:
        raise refusals.DamagedFile("workbook") from error
    if b"opendocument.spreadsheet" in mimetype:
        return "ods"
    if any(name.lower().startswith("xl/") for name in names):
        if not any(name.lower().endswith("workbook.xml") for name in names):
            raise refusals.NotATable("a binary workbook (.xlsb)")
        return "xlsx"
    if any(name.startswith("word/") for name in names) or b"opendocument.text" in mimetype:
        raise refusals.NotATable("a text document")
    if any(name.startswith("ppt/") for name in names) or b"opendocument" in mimetype:
        raise refusals.NotATable("a presentation or another document")
    raise refusals.NotATable("a zip archive without a workbook in it")


def _kind_of_ole(data: bytes) -> Kind:
    """An old workbook, an encrypted new one, or another office document."""
    if "EncryptedPackage".encode("utf-16-le") in data:
        raise refusals.Encrypted()
    if "Workbook".encode("utf-16-le") in data or "Book".encode("utf-16-le") in data:
        return "xls"
    for stream, what in (("WordDocument", "a text document"), ("PowerPoint", "a presentation")):
        if stream.encode("utf-16-le") in data:
            raise refusals.NotATable(what)
    raise refusals.DamagedFile("workbook")


def _refuse_other(data: bytes) -> None:
    start = data[:4096].removeprefix(b"\xef\xbb\xbf")
    for signature, what in _PICTURES_AND_DOCUMENTS:
        if start.startswith(signature) and (len(signature) > 2 or b"\0" in data[:64]):
            raise refusals.NotATable(what)
    if start[4:8] == b"ftyp":
        raise refusals.NotATable("a film or a picture")
    if _HTML.match(start):
        raise refusals.NotATable("a web page (HTML)")
    if _JSON.match(start):
        raise refusals.NotATable("a JSON document")
    if _XML.match(start):
        raise refusals.NotATable("an XML document")
