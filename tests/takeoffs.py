"""Small take-offs for tests, made of what a user would type."""

from __future__ import annotations

import copy
from typing import Any

from beadwright import desk
from jobs import make_job


def make_takeoff(runs: list[dict[str, Any]], *, packs: list[dict[str, Any]] | None = None, units: str = "metric", joint: dict[str, Any] | None = None, **settings: Any) -> dict[str, Any]:
    """A job with one joint and these runs; a run that says nothing else is a plain bed of sealant `s`."""
    job = make_job(joint or {"width": "20 mm", "width_is": "built", "neck": "10 mm"}, units=units)
    job["takeoff"] = {"waste": "0 %", **settings, "runs": [{"id": f"r{index}", "sealant": "s", **row} for index, row in enumerate(runs)]}
    if packs is not None:
        job["takeoff"]["packs"] = [{"id": f"p{index}", **row} for index, row in enumerate(packs)]
    return job


def bed(width: str = "12 mm", depth: str = "6 mm", length: str = "100 m", **more: Any) -> dict[str, Any]:
    """A run of plain rectangle: width × depth × length."""
    return {"section": "bed", "width": width, "depth": depth, "length": length, **more}


def taken(job: dict[str, Any]) -> dict[str, Any]:
    """The take-off of a job, which must hold no error."""
    answer = desk.evaluate(copy.deepcopy(job))
    errors = [issue for issue in answer["issues"] if issue["severity"] == "error"]
    assert not errors, errors
    return answer["takeoff"]


def takeoff_issues(job: dict[str, Any]) -> dict[str, str]:
    """Code of the errors by path, inside the take-off."""
    found = desk.evaluate(job)["issues"]
    return {issue["path"]: issue["code"] for issue in found if issue["path"].startswith("/takeoff") and issue["severity"] == "error"}
