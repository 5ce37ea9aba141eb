"""Archives that hold nothing but their content: the same parts give the same bytes, whatever the clock says."""

import io
import re
import zipfile
from collections.abc import Mapping

_LONG_AGO = (1980, 1, 1, 0, 0, 0)  # the first moment that the format can tell
_CLOCK = re.compile(rb"<dcterms:(created|modified)\b[^>]*>[^<]*</dcterms:\1>")
_CORE = "docProps/core.xml"


def settled(archive: bytes, replaced: Mapping[str, bytes] | None = None) -> bytes:
    """Return an office file with some parts replaced, its parts undated and its times of writing removed."""
    packed = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(archive)) as old, zipfile.ZipFile(packed, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            content = (replaced or {}).get(name, old.read(name))
            content = _CLOCK.sub(b"", content) if name == _CORE else content
            new.writestr(zipfile.ZipInfo(name, _LONG_AGO), content, zipfile.ZIP_DEFLATED)
    return packed.getvalue()


def part(archive: bytes, name: str) -> bytes:
    """Return one part of an office file."""
    with zipfile.ZipFile(io.BytesIO(archive)) as parts:
        return parts.read(name)
