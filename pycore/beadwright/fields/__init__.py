"""Every input, declared once: key, label, kind, units, limits, choices, help and source."""

from __future__ import annotations

from .cure import CURE, CUT, ROOM, SEALED, TWO_PART, WEATHER
from .job import JOB, SEALANT, SITE
from .joint import CAUSE, FACE, JOINT, SIDE
from .reader import Reads, Tables, read_group
from .spec import Choice, Field, Group
from .takeoff import EXTRA, PACK, RATE, RUN, TAKEOFF

__all__ = ["CAUSE", "CURE", "CUT", "EXTRA", "FACE", "GROUPS", "JOB", "JOINT", "PACK", "RATE", "ROOM", "RUN", "SEALANT", "SEALED", "SIDE", "SITE", "TAKEOFF", "TWO_PART", "WEATHER", "Choice", "Field", "Group", "Reads", "Tables", "group", "read_group"]

GROUPS: tuple[Group, ...] = (JOB, SITE, SEALANT, JOINT, SIDE, CAUSE, FACE, TAKEOFF, RUN, PACK, EXTRA, RATE, CURE, SEALED, WEATHER, CUT, TWO_PART, ROOM)


def group(key: str) -> Group:
    """The field group by key (KeyError for an unknown one)."""
    for item in GROUPS:
        if item.key == key:
            return item
    raise KeyError(key)
