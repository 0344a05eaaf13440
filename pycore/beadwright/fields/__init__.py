"""Every input, declared once: key, label, kind, units, limits, choices, help and source."""

from __future__ import annotations

from .job import JOB, SEALANT, SITE
from .joint import CAUSE, FACE, JOINT, SIDE
from .reader import Reads, Tables, read_group
from .spec import Choice, Field, Group
from .takeoff import EXTRA, PACK, RATE, RUN, TAKEOFF

__all__ = ["CAUSE", "EXTRA", "FACE", "GROUPS", "JOB", "JOINT", "PACK", "RATE", "RUN", "SEALANT", "SIDE", "SITE", "TAKEOFF", "Choice", "Field", "Group", "Reads", "Tables", "group", "read_group"]

GROUPS: tuple[Group, ...] = (JOB, SITE, SEALANT, JOINT, SIDE, CAUSE, FACE, TAKEOFF, RUN, PACK, EXTRA, RATE)


def group(key: str) -> Group:
    """The field group by key (KeyError for an unknown one)."""
    for item in GROUPS:
        if item.key == key:
            return item
    raise KeyError(key)
