"""Imports run one way, floor by floor; field, takeoff and curing never import each other."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[2] / "pycore" / "beadwright"
# Each room may import rooms of a lower number, and its own.
FLOOR = {
    "working": 0, "physics": 0, "quantity": 1, "fields": 2, "catalogue": 3, "job": 3,
    "design": 4, "field": 5, "takeoff": 5, "curing": 5, "sheet": 6, "desk": 7, "__main__": 8, "__init__": 0,
}  # fmt: skip
SAME_FLOOR_ALLOWED = {("quantity", "working"), ("design", "job")}
MODULES = sorted(PACKAGE.rglob("*.py"))


def room_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imported_rooms(path: Path) -> set[str]:
    """Rooms of our own package that a module imports, wherever in the file the import stands."""
    depth = len(path.relative_to(PACKAGE).parts)
    found = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.ImportFrom):
            if node.level == 0 and (node.module or "").split(".")[0] != "beadwright":
                continue
            if node.level == 0:
                parts = (node.module or "").split(".")[1:]
            elif node.level == depth:
                parts = (node.module or "").split(".") if node.module else []
            else:
                continue
            found |= {parts[0]} if parts and parts[0] else {name.name for name in node.names if name.name in FLOOR}
        elif isinstance(node, ast.Import):
            found |= {name.name.split(".")[1] for name in node.names if name.name.startswith("beadwright.")}
    return found & set(FLOOR)


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_go_down(path):
    room = room_of(path)
    for other in imported_rooms(path) - {room}:
        assert FLOOR[other] < FLOOR[room] or (room, other) in SAME_FLOOR_ALLOWED, f"{room} imports {other}"


def test_physics_imports_nothing_of_ours_and_no_library():
    for path in (PACKAGE / "physics").glob("*.py"):
        assert not imported_rooms(path) - {"physics"}
        names = {alias.name for node in ast.walk(ast.parse(path.read_text())) if isinstance(node, ast.Import) for alias in node.names}
        # The field over a section needs arrays; it takes numpy inside its functions only (test_docstrings holds that), so that
        # the room opens, and everything else in it works, before numpy has arrived.
        allowed = {"math", "numpy"} if path.name == "section_solve.py" else {"math"}
        assert names <= allowed, f"{path.name} imports {names}"


def test_the_finder_sees_each_form_of_import(tmp_path, monkeypatch):
    monkeypatch.setattr(__name__ + ".PACKAGE", tmp_path)
    (tmp_path / "physics").mkdir()
    module = tmp_path / "physics" / "odd.py"
    module.write_text("from ..design.width import needs\nfrom .. import catalogue\nimport beadwright.desk\nfrom beadwright.sheet import x\nfrom . import thermal\n")
    assert imported_rooms(module) == {"design", "catalogue", "desk", "sheet"}
