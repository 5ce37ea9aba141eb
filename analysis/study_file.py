"""A study with its history and the file it was made of as one file: how that is packed, and how it is opened without trusting it."""

import hashlib
import io
import json
import zipfile
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields, replace
from typing import Any, get_type_hints

from analysis.findings import VERSION
from analysis.reading import archives
from analysis.reading.choices import Reading
from analysis.reading.entry import read_table
from analysis.refusals import Refusal, StudyFileDamaged, StudyFileNewer, StudyFileTooLarge
from analysis.shapes import fits
from analysis.study import ROLES, Study
from analysis.table import Table

ENDING = ".crossgrain"
FORMAT, FORMAT_VERSION = "crossgrain study", 1
RECORD, CONTENT = "crossgrain.json", "file"  # the parts of the archive, in this order
LARGEST_RECORD, LARGEST_CONTENT = 32 * 2**20, 256 * 2**20  # bytes
MOST_STUDIES, MOST_READINGS = 300, 20
_SHAPES: Mapping[str, Any] = {
    "format": str, "version": int, "written_by": str, "name": str, "content": str, "open": int, "studies": list[dict[str, Any]], "seal": str
}  # fmt: skip


@dataclass(frozen=True, eq=False)
class Saved:
    """Studies of one file, one after the other, with the file itself."""

    name: str  # of the file
    content: bytes
    studies: tuple[Study, ...]
    place: int  # of the open study among them

    @property
    def study(self) -> Study:
        """The open study."""
        return self.studies[self.place]


def is_one(data: bytes) -> bool:
    """Return whether the bytes of a file begin as a study file does."""
    return data[:4] == b"PK\3\4" and data[30 : 30 + len(RECORD)] == RECORD.encode()


def packed(saved: Saved) -> bytes:
    """Return a study file: an archive of the record and the file that was brought."""
    filled = io.BytesIO()
    with zipfile.ZipFile(filled, "w", zipfile.ZIP_DEFLATED, compresslevel=4) as archive:
        for name, part in ((RECORD, record(saved)), (CONTENT, saved.content)):
            archive.writestr(zipfile.ZipInfo(name), part, zipfile.ZIP_DEFLATED)
    return filled.getvalue()


def opened(data: bytes) -> Saved:
    """Return what a study file holds; raises StudyFileDamaged, StudyFileNewer or StudyFileTooLarge."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            if archive.namelist() != [RECORD, CONTENT]:
                raise StudyFileDamaged
            told, content = (_part(archive, name, limit) for name, limit in ((RECORD, LARGEST_RECORD), (CONTENT, LARGEST_CONTENT)))
    except archives.FAULTS as error:
        raise StudyFileDamaged from error
    return restored(told, content)


def _part(archive: zipfile.ZipFile, name: str, limit: int) -> bytes:
    """Return one part; what the archive says about its size is not believed."""
    with archive.open(name) as part:
        found = part.read(limit + 1)
    if len(found) > limit:
        raise StudyFileTooLarge(limit)
    return found


def record(saved: Saved) -> bytes:
    """Return the record of studies: for each how its file is read and what changed since the one before, with fingerprints to check."""
    studies, place = _recent(saved)
    told: dict[str, Any] = {
        "format": FORMAT,
        "version": FORMAT_VERSION,
        "written_by": VERSION,
        "name": saved.name,
        "content": hashlib.sha256(saved.content).hexdigest(),
        "open": place,
        "studies": [_step(before, study) for before, study in zip([Study(studies[0].table), *studies], studies, strict=False)],
    }
    plain = json.loads(json.dumps(told))  # numbers that are keys become texts, as they come back
    return json.dumps({**plain, "seal": _seal(plain)}, ensure_ascii=False).encode("utf-8", "surrogatepass")


def _recent(saved: Saved) -> tuple[Sequence[Study], int]:
    """Return the studies around the open one that a record has room for, and the place of the open one among them."""
    studies, place = saved.studies[-MOST_STUDIES:], saved.place - max(0, len(saved.studies) - MOST_STUDIES)
    while len({study.table.reading for study in studies}) > MOST_READINGS and place > 0:
        studies, place = studies[1:], place - 1
    return (studies, place) if place >= 0 else ((saved.study,), 0)


def _step(before: Study, study: Study) -> dict[str, Any]:
    old, new = before.choices(), study.choices()
    changes = {name: value for name, value in new.items() if value != old[name]}
    return {"reading": study.table.reading.to_plain(), "table": study.table.fingerprint, "study": study.fingerprint, "changes": changes}


def _seal(told: Mapping[str, Any]) -> str:
    return hashlib.sha256(json.dumps(told, sort_keys=True).encode()).hexdigest()


def restored(told: bytes, content: bytes) -> Saved:
    """Return the studies that a record tells of a file; raises StudyFileDamaged or StudyFileNewer."""
    found = _checked(told)
    if hashlib.sha256(content).hexdigest() != found["content"]:
        raise StudyFileDamaged
    tables: dict[str, Table] = {}
    studies: list[Study] = []
    try:
        for step in found["studies"]:
            table = _table(step["reading"], content, found["name"], tables)
            before = replace(studies[-1], table=table) if studies else Study(table)
            studies.append(_changed(before, step["changes"]))
            if found["written_by"] == VERSION and (step["table"], step["study"]) != (table.fingerprint, studies[-1].fingerprint):
                raise StudyFileDamaged
    except (Refusal, KeyError, TypeError, ValueError, AttributeError) as error:  # whatever a forged record makes of the constructors
        raise StudyFileDamaged from error
    return Saved(found["name"], content, tuple(studies), found["open"])


def _checked(told: bytes) -> dict[str, Any]:
    """Return a record whose parts have the right shapes and whose seal is unbroken."""
    try:
        found = json.loads(told.decode("utf-8", "surrogatepass"))
    except (ValueError, RecursionError) as error:
        raise StudyFileDamaged from error
    if not isinstance(found, dict) or found.get("format") != FORMAT or type(found.get("version")) is not int:
        raise StudyFileDamaged
    if found["version"] > FORMAT_VERSION:
        raise StudyFileNewer(str(found.get("written_by", "")))
    if not all(fits(found.get(name), shape) for name, shape in _SHAPES.items()) or _seal(_unsealed(found)) != found["seal"]:
        raise StudyFileDamaged
    if not 0 <= found["open"] < len(found["studies"]) <= MOST_STUDIES:
        raise StudyFileDamaged
    return found


def _unsealed(found: Mapping[str, Any]) -> dict[str, Any]:
    return {name: value for name, value in found.items() if name != "seal"}


def _table(reading: Mapping[str, Any], content: bytes, name: str, tables: dict[str, Table]) -> Table:
    """Return the file read in one way; each way is read once."""
    key = json.dumps(reading, sort_keys=True)
    if key not in tables:
        if len(tables) == MOST_READINGS:
            raise StudyFileDamaged
        tables[key] = read_table(content, name=name, reading=Reading.from_plain(reading))
    return tables[key]


def _changed(study: Study, changes: Mapping[str, Any]) -> Study:
    """Return a study with changes that have the shapes of its fields and name columns of its table."""
    hints = get_type_hints(Study)
    known = {field.name for field in fields(Study)} - {"table"}
    if not all(name in known and fits(value, hints[name]) for name, value in changes.items()):
        raise StudyFileDamaged
    new = replace(study, **changes)
    named = {getattr(new, role) for role in ROLES} | {*new.keep, *new.relabel, *new.control, *new.apart, *new.amounts}
    if not named - {None} <= set(new.table.names):
        raise StudyFileDamaged
    return new
