"""The linters as tests: one green line then stands for all checks, and a part of the suite can leave them out."""

import subprocess
import sys

from tests.sources import ROOT


def _run(*words: str) -> str:
    """Run a linter over the checkout and return its complaints, empty where there are none."""
    run = subprocess.run([sys.executable, "-m", *words], cwd=ROOT, capture_output=True, text=True, check=False)
    return run.stdout + run.stderr if run.returncode else ""


def test_ruff_has_nothing_to_say() -> None:
    assert not _run("ruff", "check", "--quiet", ".")


def test_the_code_is_laid_out_by_the_formatter() -> None:
    assert not _run("ruff", "format", "--check", "--quiet", ".")


def test_mypy_has_nothing_to_say() -> None:
    assert not _run("mypy", "--no-error-summary")
