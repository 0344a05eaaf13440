"""Steps that bring an older job file to the newest version.

Numbered pure functions, `MIGRATIONS[n]` turns version n into n + 1; never renumbered or
edited once released. Version 1 is the first, so the table is empty today.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from .limits import VERSION

MIGRATIONS: dict[int, Callable[[dict[str, Any]], dict[str, Any]]] = {}


def migrate(job: dict[str, Any], version: int) -> dict[str, Any]:
    """The same job in the newest version; the input is left alone.

    Raises
    ------
    KeyError
        When a step is missing, which is a fault of the program.
    """
    for step in range(version, VERSION):
        job = {**MIGRATIONS[step](job), "version": step + 1}
    return job
