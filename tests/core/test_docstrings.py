"""Every public physics function says its units, its source and an example that runs; a test reads the docstrings."""

from __future__ import annotations

import ast
import doctest
import importlib
import inspect
import pkgutil
import re

import pytest

from beadwright import physics

# A name's ending and the unit it promises, longest ending first.
UNIT_BY_ENDING = {
    "_per_k": "1/K",
    "_mg_m3": "mg/m3",
    "_g_mol": "g/mol",
    "_g_ml": "g/ml",
    "_per_mol": "1",
    "_per_h": "1/h",
    "_mg_h": "mg/h",
    "_ppm": "ppm",
    "_m3": "m3",
    "_ml": "ml",
    "_h": "h",
    "_g": "g",
    "_w_m2k": "W/m2K",
    "_w_m2": "W/m2",
    "_j_mol": "J/mol",
    "_fraction": "1",
    "_mm2": "mm2",
    "_mm": "mm",
    "_pa": "Pa",
    "_c": "degC",
    "_k": "K",
}
UNIT_BY_NAME = {"days": "d", "factor": "1", "arc": "word", "face": "word", "open_faces": "word", "argument": "1", "value": "1", "solved": "record", "picture": "record"}
SECTION = re.compile(r"^(?P<title>[A-Z][a-z]+)\n-+$", re.MULTILINE)
ENTRY = re.compile(r"^(?P<name>\*?\w+) : (?P<kind>\w+)$", re.MULTILINE)
UNIT = re.compile(r"\[(?P<unit>[\w/]+)\]$")


def modules() -> list[object]:
    """All modules of the package, private helpers left out."""
    names = sorted(item.name for item in pkgutil.iter_modules(physics.__path__) if not item.name.startswith("_"))
    return [importlib.import_module(f"{physics.__name__}.{name}") for name in names]


def public_functions() -> list[object]:
    """Functions that a module defines itself under a public name."""
    return [
        member
        for module in modules()
        for name, member in inspect.getmembers(module, inspect.isfunction)
        if not name.startswith("_") and member.__module__ == module.__name__
    ]


def sections(text: str) -> dict[str, str]:
    """Docstring cut at its underlined titles; the text before the first one is 'Summary'."""
    text = inspect.cleandoc(text)
    marks = list(SECTION.finditer(text))
    found = {"Summary": text[: marks[0].start()] if marks else text}
    for mark, following in zip(marks, [*marks[1:], None], strict=False):
        found[mark["title"]] = text[mark.end() : following.start() if following else len(text)].strip("\n")
    return found


def entries(text: str) -> dict[str, str]:
    """Name and description of each entry in a Parameters or Returns section."""
    marks = list(ENTRY.finditer(text))
    return {
        mark["name"].lstrip("*"): text[mark.end() : following.start() if following else len(text)].strip()
        for mark, following in zip(marks, [*marks[1:], None], strict=False)
    }


def promised_unit(name: str) -> str | None:
    """Unit that the name's ending stands for."""
    if name in UNIT_BY_NAME:
        return UNIT_BY_NAME[name]
    return next((unit for ending, unit in UNIT_BY_ENDING.items() if name.endswith(ending)), None)


def faults(function: object) -> list[str]:
    """All that the docstring of a function lacks; empty when it keeps the template."""
    text = function.__doc__ or ""
    parts = sections(text)
    found: list[str] = []
    summary = parts["Summary"].strip()
    if not summary.endswith(".") or "\n" in summary:
        found.append("the summary is not one line that ends with a full stop")
    described = entries(parts.get("Parameters", ""))
    wanted = list(inspect.signature(function).parameters)
    if list(described) != wanted:
        found.append(f"Parameters describes {list(described)}, the function takes {wanted}")
    returned = entries(parts.get("Returns", ""))
    if len(returned) != 1:
        found.append("Returns does not name one result")
    for name, line in {**described, **returned}.items():
        unit = UNIT.search(line)
        if not unit:
            found.append(f"{name} has no [unit] at its end")
        elif promised_unit(name) is None:
            found.append(f"the name {name} promises no unit")
        elif promised_unit(name) != unit["unit"]:
            found.append(f"{name} promises [{promised_unit(name)}] and says [{unit['unit']}]")
    if "ValueError" not in parts.get("Raises", ""):
        found.append("Raises does not name ValueError")
    notes = parts.get("Notes", "")
    references = parts.get("References", "")
    if not references.strip().startswith(".. [1]") and "Definition" not in notes:
        found.append("neither a reference nor the word Definition")
    for number in set(re.findall(r"\[(\d+)\]_", text)):
        if f".. [{number}]" not in references:
            found.append(f"[{number}] is cited and not listed")
    for number in set(re.findall(r"\.\. \[(\d+)\]", references)):
        if f"[{number}]_" not in text:
            found.append(f"[{number}] is listed and not cited")
    if ">>> " not in parts.get("Examples", ""):
        found.append("no example")
    return found


# These work on single floats before numpy is loaded.
SCALAR = {"thermal", "humidity", "strain", "section", "cure", "room_air"}
# These solve a field over a section: they need numpy's arrays inside and give a record, so the two rules on plain types and on
# imports are wider for them, and for them alone.
FIELD = {"section_solve"}
FIELD_IMPORTS = {"numpy", "typing", "functools"}
FUNCTIONS = public_functions()


@pytest.mark.parametrize("function", FUNCTIONS, ids=lambda f: f"{f.__module__.rsplit('.', 1)[-1]}.{f.__name__}")
def test_docstring_keeps_the_template(function):
    assert faults(function) == []


@pytest.mark.parametrize("function", FUNCTIONS, ids=lambda f: f"{f.__module__.rsplit('.', 1)[-1]}.{f.__name__}")
def test_examples_run(function):
    module = inspect.getmodule(function)
    tests = doctest.DocTestFinder(recurse=False).find(function, function.__name__, module=module)
    assert [test for test in tests if test.examples], "no example was found"
    output: list[str] = []
    runner = doctest.DocTestRunner(verbose=False)
    for test in tests:
        runner.run(test, out=output.append)
    assert runner.summarize(verbose=False).failed == 0, "".join(output)


@pytest.mark.parametrize("function", FUNCTIONS, ids=lambda f: f"{f.__module__.rsplit('.', 1)[-1]}.{f.__name__}")
def test_types_are_plain(function):
    hints = inspect.get_annotations(function)
    returned = hints.pop("return")
    assert set(hints.values()) <= {"float", "str"}, hints
    is_field = function.__module__.rsplit(".", 1)[-1] in FIELD
    assert returned in ({"Solved", "Picture"} if is_field else {"float"})


def test_the_checker_itself_can_fail():
    def bad(width_mm, air_c):
        """Says little

        Parameters
        ----------
        width_mm : float
            Width. [in]
        """

    text = " | ".join(faults(bad))
    for part in ("full stop", "Parameters describes", "promises [mm] and says [in]", "Returns", "Raises", "Definition", "no example"):
        assert part in text


def test_all_modules_of_the_plan_are_here():
    assert {module.__name__.rsplit(".", 1)[-1] for module in modules()} >= SCALAR | FIELD
    assert len(FUNCTIONS) >= 46


@pytest.mark.parametrize("module", modules(), ids=lambda m: m.__name__.rsplit(".", 1)[-1])
def test_physics_stands_on_the_ground(module):
    """A physics module imports mathematics and its own neighbours, nothing of ours above it."""
    outside: set[str] = set()
    for node in ast.walk(ast.parse(inspect.getsource(module))):
        if isinstance(node, ast.Import):
            outside |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.level != 1:
            outside.add("." * node.level + (node.module or ""))
    assert outside <= {"math", "__future__"} | (FIELD_IMPORTS if module.__name__.rsplit(".", 1)[-1] in FIELD else set())


@pytest.mark.parametrize("module", [m for m in modules() if m.__name__.rsplit(".", 1)[-1] in FIELD], ids=lambda m: m.__name__.rsplit(".", 1)[-1])
def test_a_field_module_loads_without_numpy(module):
    """numpy comes in only inside the functions, so that the room opens before numpy has arrived."""
    top = ast.parse(inspect.getsource(module)).body
    named = {alias.name for node in top if isinstance(node, ast.Import) for alias in node.names}
    named |= {node.module or "" for node in top if isinstance(node, ast.ImportFrom)}
    assert "numpy" not in named
