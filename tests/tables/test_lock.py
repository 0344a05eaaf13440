"""A released table is never edited: its hash is locked, and an edit, a loss or a stray file shows."""

import hashlib
import json
import shutil
from pathlib import Path

import pytest

from beadwright import catalogue

DATA = Path(catalogue.__file__).parent / "data"
LOCK = "LOCK.json"


def faults(folder: Path) -> list[str]:
    """What in a data folder does not agree with its lock."""
    locked = json.loads((folder / LOCK).read_text(encoding="utf-8"))
    present = {path.name for path in folder.glob("*.json")} - {LOCK}
    found = [f"{name} is missing" for name in sorted(locked.keys() - present)]
    found += [f"{name} is not locked" for name in sorted(present - locked.keys())]
    for name in sorted(present & locked.keys()):
        digest = hashlib.sha256((folder / name).read_bytes()).hexdigest()
        if digest != locked[name]:
            found.append(f"{name} has changed, its sha256 is now {digest}")
    return found


@pytest.fixture
def copied(tmp_path):
    folder = tmp_path / "data"
    shutil.copytree(DATA, folder)
    return folder


def test_every_data_file_has_its_locked_hash():
    assert faults(DATA) == []


def test_every_edition_in_force_is_locked():
    locked = json.loads((DATA / LOCK).read_text(encoding="utf-8"))
    assert {f"{name}-{edition}.json" for name, edition in catalogue.EDITIONS.items()} <= locked.keys()


def test_one_changed_digit_is_found(copied):
    path = copied / "substrates-2026-1.json"
    text = path.read_text(encoding="utf-8")
    assert text.count("23.4e-6") == 1
    path.write_text(text.replace("23.4e-6", "23.5e-6"), encoding="utf-8")
    (found,) = faults(copied)
    assert found.startswith("substrates-2026-1.json has changed")


def test_a_removed_row_is_found(copied):
    path = copied / "cautions-2026-1.json"
    whole = json.loads(path.read_text(encoding="utf-8"))
    whole["rows"].pop()
    path.write_text(json.dumps(whole), encoding="utf-8")
    (found,) = faults(copied)
    assert found.startswith("cautions-2026-1.json has changed")


def test_a_removed_file_is_found(copied):
    (copied / "classes-2026-1.json").unlink()
    assert faults(copied) == ["classes-2026-1.json is missing"]


def test_a_stray_file_is_found(copied):
    (copied / "classes-2026-2.json").write_text("{}", encoding="utf-8")
    assert faults(copied) == ["classes-2026-2.json is not locked"]
