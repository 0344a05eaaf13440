"""Which cautions speak about a joint and about the job as a whole."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from .. import catalogue
from .inputs import Project
from .joint import Judgement

_FLAGS = ("old_sealant", "enclosed_room", "grinding", "painted", "bitumen_contact", "other_sealant_contact")


def _context(project: Project) -> dict[str, Any]:
    return {"region": project.region, "year": project.site["building_year"]}


def cautions_of_job(project: Project) -> list[catalogue.Caution]:
    """Cautions that hold for the whole job: its region and the age of the building."""
    return [item for item in catalogue.matching(_context(project)) if item.scope == "job"]


def cautions_of_joint(judged: Judgement, project: Project) -> list[catalogue.Caution]:
    """Cautions about one joint: its use, sealant, materials and circumstances."""
    values = judged.joint.values
    substrates = [project.tables["substrates"].get(side["substrate"]) for side in (judged.joint.side_a, judged.joint.side_b) if side["substrate"]]
    family = judged.sealant.family if judged.sealant else None
    flags = {flag for flag in _FLAGS if values[flag]}
    if values["works"] == "still":
        flags.add("still")
    context: Mapping[str, Any] = _context(project) | {
        "use": values["use"],
        "kind": values["kind"],
        "family": family.id if family else None,
        "family_tags": family.tags if family else frozenset(),
        "substrate_tags": frozenset(tag for item in substrates if item is not None for tag in item.tags),
        "flags": frozenset(flags),
        "joint": True,
    }
    return [item for item in catalogue.matching(dict(context)) if item.scope == "joint"]
