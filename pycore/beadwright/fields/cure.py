"""Inputs of the cure clock: settings, runs sealed, weather, cut tests, two-part figures, the room."""

from __future__ import annotations

from typing import Any

from ..quantity import INCH, METRIC
from .spec import (
    AIR,
    DURATION,
    SURFACE,
    VOLUME,
    Choice,
    Field,
    Group,
    length_field,
    percent_field,
    span_field,
    temperature_field,
)

_WHEN = "2026-11-24 10:40"
_HUMID: dict[str, Any] = {"hard_min": 0.0, "hard_max": 1.0, "soft_min": 0.05, "soft_reason": "So dry a reading is rare; check the instrument."}
_SHORT: dict[str, Any] = {"units": DURATION, "hard_min": 0.0, "hard_max": 24.0 * 365.0}
_COOL: dict[str, Any] = {"example": {METRIC: "10 degC", INCH: "50 degF"}, **SURFACE}

CURE = Group(
    "cure", "Cure", "cure",
    (
        Field("zone", "Time zone", "text", section="Clock", example="Europe/Berlin",
              help="Name from the IANA list, such as America/New_York. It keeps hours right when the clocks change. Empty: clock times as they stand."),
        Field("model", "Weather changes the rate by", "choice", default="cautious", section="Clock",
              choices=(
                  Choice("cautious", "The slower of both models", "Vapour pressure alone below 23 °C, with the permeability above."),
                  Choice("vapour", "Vapour pressure alone"),
                  Choice("permeation", "Vapour pressure and permeability"),
              ), source="sign of the heat of permeation read (De Buyl, Comyn et al.), its size from memory"),
        Field("permeation", "Heat of permeation, kJ/mol", "number", section="Clock", advanced=True, example="-12", hard_min=-60.0, hard_max=60.0,
              soft_min=-25.0, soft_max=5.0, soft_reason="For silicones about -8 to -20.", help="Empty: -12 for silicones, 0 for the rest."),
        percent_field("uncertainty", "Uncertainty of the rate", default="40 %", section="Clock", hard_min=0.0, hard_max=0.9, example="40 %",
                 help="Up and down. A cut test of your own narrows it.", source="recommended for rates without a cut test, from memory"),
        Field("after", "After the weather given", "choice", default="mean", section="Clock",
              choices=(Choice("mean", "The mean of the days given goes on"), Choice("last", "The last day given repeats"), Choice("reference", "23 °C and 50 % humidity"))),
        Field("work_from", "Work begins", "text", default="07:00", section="Best hour", example="07:00"),
        Field("work_to", "Work ends", "text", default="17:00", section="Best hour", example="17:00"),
        percent_field("movement_limit", "Movement allowed while green", section="Best hour", hard_min=0.0, hard_max=1.0, example="10 %", advanced=True,
                 help="Share of the width, either way. Empty: as set for the site."),
        Field("skin_time", "Skin time", "duration", section="Data sheet", advanced=True, above=True, example="20 min", **_SHORT,
              help="At 23 °C and 50 % humidity. Empty: the usual for one-part sealants."),
        Field("tack_time", "Tack-free time", "duration", section="Data sheet", advanced=True, above=True, example="1 h", **_SHORT),
        Field("pasted", "Weather as text", "note", multiline=True, section="Weather", example="2026-11-24, 4, 12, 70",
              help="Lines of day, lowest, highest, humidity; or of day and time, air, humidity. °C and %, or °F in an inch job. Used with the rows."),
    ),
)  # fmt: skip

WEATHER = Group(
    "weather", "Weather", "cure.weather[]",
    (
        Field("day", "Day", "date", required=True, section="Weather", example="2026-11-24"),
        Field("time", "Time", "text", section="Weather", advanced=True, example="10:40", help="Only for a reading: it then holds until the next one."),
        temperature_field("least", "Lowest", section="Weather", **(AIR | {"example": {METRIC: "4 degC", INCH: "40 degF"}}), help="Air in the night. For a reading: the air then."),
        temperature_field("most", "Highest", section="Weather", **(AIR | {"example": {METRIC: "12 degC", INCH: "54 degF"}})),
        percent_field("humidity", "Relative humidity", section="Weather", example="70 %", help="Mean of the day.", **_HUMID),
        temperature_field("dew", "Dew point", section="Weather", advanced=True, **(AIR | {"example": {METRIC: "5 degC", INCH: "41 degF"}}), help="Instead of the humidity."),
        temperature_field("surface_least", "Coldest surface", section="Weather", advanced=True, **_COOL, help="Empty: as the air."),
        temperature_field("surface_most", "Hottest surface", section="Weather", advanced=True, example={METRIC: "25 degC", INCH: "77 degF"}, **SURFACE),
        Field("rain", "Rain", "flag", section="Weather"),
    ),
)  # fmt: skip

SEALED = Group(
    "sealed", "Run sealed", "cure.sealed[]",
    (
        Field("name", "Run", "text", required=True, section="Run", example="North face, grid 3 to 4"),
        Field("joint", "Joint", "reference", table="joints", required=True, section="Run"),
        Field("when", "Sealed on", "text", section="Run", example=_WHEN, help="Local clock. Empty: planned; the best hour of the weather is taken."),
        span_field("length", "Length", section="Run", above=True, hard_min=0.0, hard_max=1e7, example={METRIC: "12 m", INCH: "40 ft"}),
        Field("place", "It cures in", "choice", default="weather", section="Run",
              choices=(Choice("weather", "The weather"), Choice("room", "The room, in its own air", "Air and humidity are those entered for the room."))),
        Field("shape", "Bead", "choice", default="joint", section="Bead",
              choices=(Choice("joint", "As the joint"), Choice("fillet", "Fillet in a corner"))),
        length_field("leg_a", "Leg A", section="Bead", show_when={"shape": ("fillet",)}, above=True, hard_min=0.0, hard_max=100.0, example={METRIC: "8 mm", INCH: "5/16 in"}),
        length_field("leg_b", "Leg B", section="Bead", show_when={"shape": ("fillet",)}, above=True, hard_min=0.0, hard_max=100.0, example={METRIC: "8 mm", INCH: "5/16 in"}),
        length_field("bulge", "Face bulges by", section="Bead", show_when={"shape": ("fillet",)}, hard_min=-50.0, hard_max=50.0, example={METRIC: "1 mm", INCH: "1/32 in"},
                help="Minus for a hollow face. Empty: flat."),
        Field("front", "Front of the bead", "choice", default="open", section="Bead",
              choices=(Choice("open", "Open to the air"), Choice("covered", "Covered: no air gets to it"))),
        Field("back", "Second way for moisture", "choice", default="none", section="Bead",
              choices=(
                  Choice("none", "None counted"),
                  Choice("back", "The back breathes", "Open-cell rod in a ventilated gap."),
                  Choice("sides", "The faces breathe", "Dry, porous stone, brick or concrete."),
                  Choice("both", "Back and faces breathe"),
              ), help="What the joint's rod and materials may add is shown beside the answer, but not counted unless you choose it here.",
              source="from memory of sealing guidance: a bonus, not a basis"),
        temperature_field("surface", "Surface", section="Record", **SURFACE),
        temperature_field("air", "Air", section="Record", **AIR),
        percent_field("humidity", "Relative humidity", section="Record", example="65 %", **_HUMID),
        Field("primer_at", "Primer put on", "text", section="Record", example="2026-11-24 10:05"),
        Field("primer_least", "Primer waits at least", "duration", section="Record", advanced=True, example="30 min", **_SHORT, help="From the primer's data sheet."),
        Field("primer_most", "Primer good for", "duration", section="Record", advanced=True, above=True, example="4 h", **_SHORT, help="After that clean and prime again."),
        Field("crew", "Crew", "text", section="Record"),
        Field("lot", "Lot", "text", section="Record", example="B-2207"),
        Field("expiry", "Use by", "date", section="Record", example="2027-03-31"),
        Field("photos", "Photos", "text", section="Record", advanced=True, example="IMG 12 to 15"),
        Field("note", "Notes", "note", multiline=True, section="Record"),
    ),
)  # fmt: skip

CUT = Group(
    "cut", "Cut test", "cure.cuts[]",
    (
        Field("sealant", "Sealant", "reference", table="sealants", required=True, section="Cut test"),
        length_field("depth", "Cured depth found", section="Cut test", above=True, hard_min=0.0, hard_max=50.0, example={METRIC: "3.5 mm", INCH: "0.14 in"},
                help="Cut a bead across and measure the skin at its open face."),
        length_field("error", "Reading good to", section="Cut test", default={METRIC: "0.3 mm", INCH: "0.012 in"}, hard_min=0.0, hard_max=5.0, example={METRIC: "0.3 mm", INCH: "0.012 in"}),
        Field("time", "After", "duration", section="Cut test", above=True, example="48 h", **_SHORT),
        temperature_field("air", "Air meanwhile", section="Cut test", **(AIR | {"hard_min": 0.01, "hard_max": 60.0, "example": {METRIC: "18 degC", INCH: "64 degF"}})),
        percent_field("humidity", "Humidity meanwhile", section="Cut test", above=True, example="60 %", **_HUMID),
    ),
)  # fmt: skip

TWO_PART = Group(
    "two_part", "Two-part figures", "cure.two_part[]",
    (
        Field("sealant", "Sealant", "reference", table="sealants", required=True, section="Two-part"),
        temperature_field("warm", "Warm", section="Two-part", example={METRIC: "23 degC", INCH: "73 degF"}, hard_min=-20.0, hard_max=60.0),
        Field("warm_pot", "Pot life when warm", "duration", section="Two-part", above=True, example="2 h", **_SHORT),
        Field("warm_cure", "Cured when warm", "duration", section="Two-part", above=True, example="48 h", **_SHORT),
        temperature_field("cool", "Cool", section="Two-part", example={METRIC: "10 degC", INCH: "50 degF"}, hard_min=-20.0, hard_max=60.0),
        Field("cool_pot", "Pot life when cool", "duration", section="Two-part", above=True, example="5 h", **_SHORT),
        Field("cool_cure", "Cured when cool", "duration", section="Two-part", above=True, example="120 h", **_SHORT),
    ),
)  # fmt: skip

ROOM = Group(
    "room", "Room", "cure.room",
    (
        Field("name", "Room", "text", section="Room", example="Changing room"),
        span_field("length", "Length", section="Room", above=True, hard_min=0.0, hard_max=200000.0, example={METRIC: "2.4 m", INCH: "8 ft"}),
        span_field("width", "Width", section="Room", above=True, hard_min=0.0, hard_max=200000.0, example={METRIC: "1.8 m", INCH: "6 ft"}),
        span_field("height", "Height", section="Room", above=True, hard_min=0.0, hard_max=50000.0, example={METRIC: "2.5 m", INCH: "8 ft"}),
        Field("air_change", "Air changes an hour", "number", default="0.5", section="Air", hard_min=0.0, hard_max=200.0, soft_max=30.0,
              soft_reason="More is a strong wind.", example="0.5", help="Closed room 0.2 to 0.5, window ajar 1 to 3, fan 5 to 15.", source="common practice, no source"),
        Field("mixing", "Mixing factor", "number", default="3", section="Air", hard_min=1.0, hard_max=10.0, example="3",
              help="1 is perfect mixing; at the bead in a corner 3 is usual.", source="common practice in industrial ventilation, from memory"),
        temperature_field("air", "Air", section="Air", default={METRIC: "23 degC", INCH: "73.4 degF"}, **AIR),
        percent_field("humidity", "Relative humidity", section="Air", default="50 %", example="50 %", **_HUMID),
        Field("sealant", "Sealant", "reference", table="sealants", section="Sealant"),
        Field("joint", "Joint", "reference", table="joints", section="Sealant", help="Its section sets how fast the vapour comes off."),
        Field("packages", "Packages used in a shift", "number", default="1", section="Sealant", hard_min=0.0, hard_max=10000.0, example="2"),
        Field("package", "Package size", "volume", units=VOLUME, default={METRIC: "300 ml", INCH: "10.1 US fl oz"}, section="Sealant", above=True, hard_min=0.0, hard_max=1e6,
              example={METRIC: "300 ml", INCH: "10.1 US fl oz"}),
        Field("spread", "Used over", "duration", default="0 h", section="Sealant", example="3 h", units=DURATION, hard_min=0.0, hard_max=16.0,
              help="0: all at once, which gives the highest figures."),
        percent_field("share", "Crosslinker share", section="Sealant", advanced=True, above=True, hard_min=0.0, hard_max=0.2, example="5 %",
                 help="By mass, from the safety data sheet. Empty: the upper end of the usual range."),
        Field("density", "Density, g/ml", "number", section="Sealant", advanced=True, hard_min=0.5, hard_max=3.0, example="1.02"),
    ),
)  # fmt: skip
