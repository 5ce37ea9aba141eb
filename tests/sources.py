"""The project's own Python files as syntax trees, for the tests that hold the house to its laws."""

import ast
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
Function = ast.FunctionDef | ast.AsyncFunctionDef


def files(*folders: str) -> list[Path]:
    """Return the Python files of some folders of the checkout, sorted."""
    return sorted(file for folder in folders for file in (ROOT / folder).rglob("*.py"))


def relative(file: Path) -> str:
    """Return a file's path as told in a failure: "analysis/cells.py"."""
    return file.relative_to(ROOT).as_posix()


@cache
def tree(file: Path) -> ast.Module:
    """Return the syntax tree of a file."""
    return ast.parse(file.read_text(encoding="utf-8"), str(file))


@dataclass(frozen=True)
class Import:
    """One name that a file imports, in full: "app.desk" for `from app import desk`."""

    name: str
    line: int

    @property
    def top(self) -> str:
        """The package that it comes from."""
        return self.name.partition(".")[0]


def imports(file: Path) -> list[Import]:
    """Return everything that a file imports, inside functions as well; a relative import starts with a dot."""
    return [found for node in ast.walk(tree(file)) for found in _imports(node)]


def _imports(node: ast.AST) -> Iterator[Import]:
    if isinstance(node, ast.Import):
        yield from (Import(alias.name, node.lineno) for alias in node.names)
    elif isinstance(node, ast.ImportFrom):
        source = "." * node.level + (node.module or "")
        yield from (Import(f"{source}.{alias.name}", node.lineno) for alias in node.names)


def functions(file: Path) -> list[Function]:
    """Return all functions and methods of a file."""
    return [node for node in ast.walk(tree(file)) if isinstance(node, Function)]


def body_lines(function: Function) -> int:
    """Return how many lines a function's body takes, its docstring apart."""
    body: Sequence[ast.stmt] = function.body[1:] if ast.get_docstring(function) is not None else function.body
    return (body[-1].end_lineno or 0) - body[0].lineno + 1 if body else 0
