"""Small jobs for tests, made of what a user would type."""

from __future__ import annotations

import copy
from typing import Any

from beadwright import desk

TOL0 = {"fabrication_tolerance": "0 mm", "erection_tolerance": "0 mm", "spacing_tolerance": "0 mm"}


def make_job(joint: dict[str, Any] | None = None, *, site: dict[str, Any] | None = None, sealant: dict[str, Any] | None = None, units: str = "metric") -> dict[str, Any]:
    """One butt joint between two direct-temperature sides; parts can be overridden."""
    side = {"substrate": "concrete-precast", "length": "6 m", "fixity": "middle", "expansion": "10 e-6/K", "summer_surface": "50 degC", "winter_surface": "-20 degC",
            "moisture_reversible": "0 %", "moisture_irreversible": "0 %"}  # fmt: skip
    base: dict[str, Any] = {
        "id": "j", "name": "Joint", "kind": "butt", "use": "weather", "sealant": "s", "side_a": dict(side), "side_b": dict(side), "causes": [], **TOL0,
    }  # fmt: skip
    for key, value in (joint or {}).items():
        if key in ("side_a", "side_b"):
            base[key] = base[key] | value
        else:
            base[key] = value
    return {
        "format": "beadwright-job", "version": 1, "id": "t", "title": "Test", "units": units, "region": "other",
        "site": {"summer_air": "35 degC", "winter_air": "-15 degC", "convention": "each-way", "increment": "1 mm"} | (site or {}),
        "sealants": [{"id": "s", "name": "Sealant", "family": "alkoxy-silicone", "class": "c920-50"} | (sealant or {})],
        "joints": [base],
    }  # fmt: skip


def only_joint(job: dict[str, Any]) -> dict[str, Any]:
    """The answer for the single joint of a job; fails when an error stands against it."""
    answer = desk.evaluate(copy.deepcopy(job))
    errors = [issue for issue in answer["issues"] if issue["severity"] == "error"]
    assert not errors, errors
    return answer["joints"]["j"]


def issues_at(job: Any, path: str) -> list[dict[str, Any]]:
    """Findings of an evaluation at one place."""
    return [issue for issue in desk.evaluate(job)["issues"] if issue["path"] == path]
