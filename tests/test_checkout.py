"""What lies in the checkout: nothing at the top that does not belong there, exact pins, no trace of one machine."""

import re
import subprocess
import sys
from importlib import metadata
from pathlib import Path

import pytest
from packaging.requirements import Requirement

from tests import sources
from tests.sources import ROOT, relative

TOP = {"README.md", "DEVELOPERS.md", "requirements.txt", "analysis", "app", "tests", "sample_data"}
PINS = {"app": ROOT / "requirements.txt", "tests": ROOT / "tests" / "requirements.txt"}
OWN = {"analysis", "app", "tests", "sample_data"}
# Written so that the pattern does not find itself.
TRACES = re.compile(
    rb"py[p]i\.org|python[h]osted|np[m]js\.|deb\.debia[n]\.org|index-ur[l]|/w[o]rk/|/h[o]me/\w|/r[o]ot/|/Us[e]rs/\w|/tm[p]/|C:\\\\?Us[e]rs"
)


def tracked() -> list[Path]:
    """Return the files that git keeps; a copy without git skips what asks for them."""
    run = subprocess.run(["git", "ls-files", "-z"], cwd=ROOT, capture_output=True, text=True, check=False)
    if run.returncode != 0:
        pytest.skip("this is not a git checkout, so nobody knows which files belong to it")
    return [ROOT / name for name in run.stdout.split("\0") if name and (ROOT / name).is_file()]


def pinned(file: Path) -> list[Requirement]:
    """Return the pins of a file."""
    lines = (line.partition("#")[0].strip() for line in file.read_text(encoding="utf-8").splitlines())
    return [Requirement(line) for line in lines if line]


def test_the_top_holds_only_what_belongs_there() -> None:
    found = {path.relative_to(ROOT).parts[0] for path in tracked()}
    assert {name for name in found if not name.startswith(".")} <= TOP


def test_no_file_names_one_machine_or_a_registry() -> None:
    found = [f"{relative(file)}: {hit[0].decode()}" for file in tracked() if (hit := TRACES.search(file.read_bytes()))]
    assert not found


@pytest.mark.parametrize("whose", PINS)
def test_every_requirement_is_pinned_exactly(whose: str) -> None:
    loose = [str(r) for r in pinned(PINS[whose]) if not re.fullmatch(r"==[\w.]+", str(r.specifier)) or r.extras or r.url]
    assert not loose


@pytest.mark.parametrize(("whose", "folders"), [("app", ("app", "analysis")), ("tests", ("tests", "sample_data"))])
def test_whatever_is_imported_is_pinned(whose: str, folders: tuple[str, ...]) -> None:
    pins = {_plain(r.name) for key in ("app", whose) for r in pinned(PINS[key])}
    owners = metadata.packages_distributions()
    foreign = {i.top for file in sources.files(*folders) for i in sources.imports(file)} - sys.stdlib_module_names - OWN
    assert not {name for name in foreign if not {_plain(owner) for owner in owners[name]} & pins}


@pytest.mark.parametrize("requirement", [r for file in PINS.values() for r in pinned(file)], ids=lambda r: r.name)
def test_no_requirement_binds_by_copyleft(requirement: Requirement) -> None:
    """The GPL and AGPL would bind the whole program; what a requirement needs itself is looked at as well."""
    for name in _with_needs(requirement.name, set()):
        about = metadata.metadata(name)
        told = [about.get("License-Expression") or "", *(line for line in about.get_all("Classifier") or () if line.startswith("License"))]
        assert not [line for line in told if re.search(r"\bA?GPL|Affero|General Public License", line) and "Lesser" not in line], name


def _with_needs(name: str, seen: set[str]) -> set[str]:
    """Return a distribution and everything installed that it needs, by plain name."""
    if (plain := _plain(name)) not in seen and _installed(plain):
        seen.add(plain)
        for need in map(Requirement, metadata.requires(plain) or ()):
            if need.marker is None or need.marker.evaluate({"extra": ""}):
                _with_needs(need.name, seen)
    return seen


def _installed(name: str) -> bool:
    return any(True for _ in metadata.distributions(name=name))


def _plain(name: str) -> str:
    return re.sub(r"[-_.]+", "-", name).lower()


def test_the_readme_opens_with_the_job_in_one_paragraph() -> None:
    title, paragraph, *_ = re.split(r"\n{2,}", (ROOT / "README.md").read_text(encoding="utf-8"))
    assert title == "# Crossgrain"
    assert paragraph.endswith(".")
    assert not paragraph.startswith(("#", "-", "*", "!", "|", ">", "`"))


@pytest.mark.parametrize("page", ["README.md", "DEVELOPERS.md"])
def test_every_path_in_the_pages_exists(page: str) -> None:
    text = (ROOT / page).read_text(encoding="utf-8")
    linked = re.findall(r"\]\(([^)#:]+)\)", text)
    quoted = re.findall(r"`((?:app|analysis|tests|sample_data|\.\w+)/[\w./-]*)`", text)
    assert not [path for path in linked + quoted if not (ROOT / path).exists()]


def test_the_environment_is_never_kept() -> None:
    assert not [relative(file) for file in tracked() if ".environment" in file.parts]
