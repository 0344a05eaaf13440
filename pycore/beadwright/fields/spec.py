"""What an input is: its spec, and the builders that keep the declarations short.

Hard limits refuse, soft limits warn with a reason; nothing is clipped and nothing is guessed.
Limits are in core units (mm, °C, K, 1/K, fractions, h).
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from attrs import field, frozen

from ..quantity import INCH, METRIC

TEXT_LIMIT = 200
NOTE_LIMIT = 4000


@frozen
class Choice:
    """One allowed value of a choice field."""

    value: str
    label: str
    help: str = ""


@frozen
class Field:
    """One input of the job, as the form shows it and as the reader checks it."""

    key: str
    label: str
    kind: str
    symbol: str | None = None
    units: Mapping[str, tuple[str, ...]] = field(factory=dict)
    default: str | Mapping[str, str] | None = None
    required: bool = False
    choices: tuple[Choice, ...] = ()
    table: str | None = None
    section: str = ""
    show_when: Mapping[str, tuple[str, ...]] | None = None
    help: str = ""
    example: str | Mapping[str, str] = ""
    source: str = ""
    hard_min: float | None = None
    hard_max: float | None = None
    soft_min: float | None = None
    soft_max: float | None = None
    soft_reason: str = ""
    above: bool = False
    multiline: bool = False
    advanced: bool = False

    def default_for(self, system: str) -> str | None:
        """The default text in one unit system, or None where the field has none."""
        if isinstance(self.default, Mapping):
            return self.default.get(system)
        return self.default

    def units_for(self, system: str) -> tuple[str, ...]:
        """Unit labels offered, the first is the one that a bare number takes."""
        return self.units.get(system, ())


@frozen
class Group:
    """A set of fields that belong to one place of the job file."""

    key: str
    label: str
    path: str
    fields: tuple[Field, ...]

    def __getitem__(self, key: str) -> Field:
        for item in self.fields:
            if item.key == key:
                return item
        raise KeyError(key)


SMALL = {METRIC: ("mm", "in"), INCH: ("in", "mm")}
SPAN = {METRIC: ("m", "mm", "ft", "in"), INCH: ("ft", "in", "m", "mm")}
TEMPERATURE = {METRIC: ("degC", "degF"), INCH: ("degF", "degC")}
DIFFERENCE = {METRIC: ("K", "degF"), INCH: ("degF", "K")}
EXPANSION = {METRIC: ("e-6/K", "e-6/degF"), INCH: ("e-6/degF", "e-6/K")}
PERCENT = {METRIC: ("%",), INCH: ("%",)}
STRAIN = {METRIC: ("%", "mm/m"), INCH: ("%", "mm/m")}
DURATION = {METRIC: ("h", "d", "min"), INCH: ("h", "d", "min")}
SUN = {METRIC: ("W/m2", "BTU/h/ft2"), INCH: ("BTU/h/ft2", "W/m2")}
VOLUME = {METRIC: ("ml", "l", "US fl oz", "US gal"), INCH: ("US fl oz", "US gal", "ml", "l")}
BULK = {METRIC: ("l", "US gal"), INCH: ("US gal", "l")}
COVERAGE = {METRIC: ("m2/l", "ft2/gal"), INCH: ("ft2/gal", "m2/l")}
PACE = {METRIC: ("m/h", "ft/h"), INCH: ("ft/h", "m/h")}
FILM = {METRIC: ("W/m2K", "BTU/h/ft2/degF"), INCH: ("BTU/h/ft2/degF", "W/m2K")}

EX_SMALL = {METRIC: "16 mm", INCH: "5/8 in"}
EX_SPAN = {METRIC: "3.2 m", INCH: "12' 6 1/2\""}
EX_TEMP = {METRIC: "34 °C", INCH: "94 °F"}


def length_field(key: str, label: str, **more: Any) -> Field:
    """A joint-sized length."""
    more.setdefault("example", EX_SMALL)
    return Field(key, label, "length", units=SMALL, **more)


def span_field(key: str, label: str, **more: Any) -> Field:
    """An element-sized length."""
    more.setdefault("example", EX_SPAN)
    return Field(key, label, "length", units=SPAN, **more)


def temperature_field(key: str, label: str, **more: Any) -> Field:
    """A temperature reading."""
    more.setdefault("example", EX_TEMP)
    return Field(key, label, "temperature", units=TEMPERATURE, **more)


def percent_field(key: str, label: str, **more: Any) -> Field:
    """A share, typed as a percentage."""
    more.setdefault("example", "25 %")
    return Field(key, label, "percent", units=more.pop("units", PERCENT), **more)


SURFACE = {"hard_min": -90.0, "hard_max": 130.0, "soft_min": -50.0, "soft_max": 95.0,
           "soft_reason": "Building surfaces seldom leave this range."}  # fmt: skip
AIR = {"hard_min": -90.0, "hard_max": 60.0, "soft_min": -45.0, "soft_max": 50.0,
       "soft_reason": "Few places on earth have air outside this range."}  # fmt: skip
TOLERANCE = {"hard_min": 0.0, "hard_max": 200.0, "soft_max": 25.0,
             "soft_reason": "A tolerance this large is unusual for a sealed joint."}  # fmt: skip
