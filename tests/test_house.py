"""The laws of the house: who may know whom, how long things may get, and where each kind of thing lives."""

import ast
import graphlib
import re
import statistics
import sys
from collections.abc import Iterator
from importlib import metadata
from pathlib import Path

import pytest

from tests import sources
from tests.sources import ROOT, relative

CODE = sources.files("analysis", "app")
REFUSALS = sources.files("analysis/refusals")
EVERYTHING = sources.files("analysis", "app", "tests", "sample_data")
OLD_PYTHON = (3, 7)  # a start by a Python this old still gets as far as the sentence that asks for a newer one
STATISTICS = {"mean", "std", "var", "sem", "median", "quantile", "percentile", "nanmean", "nanstd"}


def test_analysis_never_knows_the_screen() -> None:
    found = [
        f"{relative(file)}:{i.line} {i.name}"
        for file in sources.files("analysis")
        for i in sources.imports(file)
        if i.top in {"streamlit", "plotly", "app"}
    ]
    assert not found


def test_the_screen_computes_no_statistic() -> None:
    imported = [
        f"{relative(file)}:{i.line} {i.name}"
        for file in sources.files("app")
        for i in sources.imports(file)
        if i.top in {"scipy", "statsmodels", "statistics"}
    ]
    called = [
        f"{relative(file)}:{node.lineno} {node.func.attr}"
        for file in sources.files("app")
        for node in ast.walk(sources.tree(file))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute) and node.func.attr in STATISTICS
    ]
    assert not imported + called


def test_only_the_desk_touches_the_session() -> None:
    found = [
        f"{relative(file)}:{node.lineno}"
        for file in sources.files("app")
        if file != ROOT / "app" / "desk.py"
        for node in ast.walk(sources.tree(file))
        if isinstance(node, ast.Attribute) and node.attr == "session_state"
    ]
    assert not found


def test_nothing_is_imported_inside_a_function() -> None:
    found = [
        f"{relative(file)}:{node.lineno}"
        for file in EVERYTHING
        for function in sources.functions(file)
        for node in ast.walk(function)
        if isinstance(node, ast.Import | ast.ImportFrom)
    ]
    assert not found


def test_imports_are_by_full_name() -> None:
    found = [f"{relative(file)}:{i.line} {i.name}" for file in EVERYTHING for i in sources.imports(file) if i.name.startswith(".")]
    assert not found


def test_no_two_modules_need_each_other() -> None:
    names = {_module(file): file for file in CODE}
    needs = {name: {_nearest(i.name, names) for i in sources.imports(file)} - {None, name} for name, file in names.items()}
    list(graphlib.TopologicalSorter(needs).static_order())  # raises CycleError, which names the circle


def _module(file: Path) -> str:
    return ".".join(file.relative_to(ROOT).with_suffix("").parts).removesuffix(".__init__")


def _nearest(name: str, names: dict[str, Path]) -> str | None:
    """Return the module that an import leads to: `analysis.cells` for "analysis.cells.Cells"."""
    return next((found for found in (name, name.rpartition(".")[0]) if found in names), None)


@pytest.mark.parametrize("file", sources.files("app/stops"), ids=relative)
def test_a_page_is_an_import_and_a_call(file: Path) -> None:
    """Streamlit runs a page anew each time: a class made there would be another class at every click."""
    bring, show = sources.tree(file).body
    assert isinstance(bring, ast.ImportFrom)
    assert ast.unparse(show) == f"{bring.names[0].name}.show()"


@pytest.mark.parametrize("file", [file for file in EVERYTHING if file.parent.name != "stops"], ids=relative)
def test_a_module_says_what_it_knows(file: Path) -> None:
    text = file.read_text(encoding="utf-8")
    assert len(text.splitlines()) <= 400
    assert ast.get_docstring(sources.tree(file)), "a module starts with the sentence that says what it knows"


def test_no_function_is_over_sixty_lines() -> None:
    found = [
        f"{relative(file)}:{f.lineno} {f.name} has {sources.body_lines(f)}"
        for file in EVERYTHING
        for f in sources.functions(file)
        if sources.body_lines(f) > 60
    ]
    assert not found


def test_most_functions_are_short() -> None:
    lengths = [sources.body_lines(function) for file in CODE for function in sources.functions(file)]
    deciles = statistics.quantiles(lengths, n=10)
    assert statistics.median(lengths) < 9
    assert deciles[-1] < 32


def test_public_things_say_what_they_are() -> None:
    found = [
        f"{relative(file)}:{node.lineno} {node.name}"
        for file in CODE
        for node in sources.tree(file).body
        if isinstance(node, sources.Function | ast.ClassDef) and not node.name.startswith("_") and not ast.get_docstring(node)
    ]
    assert not found


def test_no_fault_is_swallowed() -> None:
    broad = {None, "Exception", "BaseException"}
    found = [
        f"{relative(file)}:{node.lineno}"
        for file in CODE
        for node in ast.walk(sources.tree(file))
        if isinstance(node, ast.ExceptHandler)
        and (ast.unparse(node.type) if node.type else None) in broad
        and not isinstance(node.body[-1], ast.Raise)
    ]
    assert not found


def test_refusals_live_in_one_place() -> None:
    home = set(REFUSALS)
    known = {node.name for file in home for node in sources.tree(file).body if isinstance(node, ast.ClassDef)}
    found = [
        f"{relative(file)} {node.name}"
        for file in CODE
        if file not in home
        for node in ast.walk(sources.tree(file))
        if isinstance(node, ast.ClassDef) and {ast.unparse(base).rpartition(".")[2] for base in node.bases} & known
    ]
    assert not found


def _sentences() -> Iterator[tuple[str, str]]:
    """Yield the name of each refusal with its sentence, a digit standing for what is filled in."""
    for node in (node for file in REFUSALS for node in ast.walk(sources.tree(file))):
        if isinstance(node, ast.ClassDef):
            for call in ast.walk(node):
                if isinstance(call, ast.Call) and ast.unparse(call.func) == "super().__init__" and call.args:
                    yield node.name, _text(call.args[0])


def _text(node: ast.expr) -> str:
    match node:
        case ast.Constant(value=str(text)):
            return text
        case ast.JoinedStr(values=parts):
            return "".join(_text(part) for part in parts)
        case ast.BinOp(left=left, right=right):
            return _text(left) + _text(right)
        case ast.FormattedValue(value=ast.IfExp(body=body)):
            return _text(body)
    return "0"


@pytest.mark.parametrize(("name", "sentence"), list(_sentences()), ids=lambda value: value if value.isidentifier() else "")
def test_every_refusal_is_one_sentence(name: str, sentence: str) -> None:
    assert "\n" not in sentence
    assert len(sentence) <= 1000
    assert sentence[0].isupper() or sentence[0] in "“0", "a sentence starts with a capital letter or a quoted name"
    assert sentence[-1] in ".?0", "a sentence ends"
    assert not re.search(r"[.!?] [A-Z“]", sentence), "one sentence, not two"


def test_the_screen_shadows_no_other_module() -> None:
    """Streamlit puts the folder of app/main.py first on the path, so that app/x.py would be found as x."""
    known = sys.stdlib_module_names | set(metadata.packages_distributions())
    stems = {path.stem for path in (ROOT / "app").iterdir() if path.suffix == ".py" or path.is_dir()}
    assert not stems & known - {"__init__", "__main__", "app"}


def test_a_bare_python_can_read_the_start() -> None:
    """Everything that runs before the packages are there is standard library."""
    start = [file for file in sources.files("app/start") if file.name != "serve.py"]
    first = [ROOT / "app" / "__init__.py", ROOT / "app" / "__main__.py", ROOT / "tests" / "__main__.py"]
    found = [
        f"{relative(file)}:{i.line} {i.name}"
        for file in start + first
        for i in sources.imports(file)
        if i.top not in sys.stdlib_module_names and not i.name.startswith("app.start")
    ]
    assert not found


@pytest.mark.parametrize("command", ["app", "tests"])
def test_an_old_python_gets_its_sentence(command: str) -> None:
    text = (ROOT / command / "__main__.py").read_text(encoding="utf-8")
    ast.parse(text, feature_version=OLD_PYTHON)
    before_the_check = text.partition("sys.version_info")[0]
    assert set(re.findall(r"^(?:import|from) (\w+)", before_the_check, re.MULTILINE)) == {"sys", "pathlib"}
