"""Every input, declared once: key, label, kind, units, limits, choices, help and source.

Hard limits refuse, soft limits warn with a reason; nothing is clipped and nothing is guessed.
Limits are in core units (mm, degC, K, 1/K, fractions, h). Choices that come from a catalogue
table are named by table, and the caller brings the tables' ids.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from functools import lru_cache
from typing import Any

from attrs import field, frozen

from . import quantity
from .quantity import INCH, METRIC
from .working import InputError, Issue

TEXT_LIMIT = 200
NOTE_LIMIT = 4000
QUANTITY_KINDS = frozenset(quantity.KINDS)


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


_SMALL = {METRIC: ("mm", "in"), INCH: ("in", "mm")}
_SPAN = {METRIC: ("m", "mm", "ft", "in"), INCH: ("ft", "in", "m", "mm")}
_TEMPERATURE = {METRIC: ("degC", "degF"), INCH: ("degF", "degC")}
_DIFFERENCE = {METRIC: ("K", "degF"), INCH: ("degF", "K")}
_EXPANSION = {METRIC: ("e-6/K", "e-6/degF"), INCH: ("e-6/degF", "e-6/K")}
_PERCENT = {METRIC: ("%",), INCH: ("%",)}
_STRAIN = {METRIC: ("%", "mm/m"), INCH: ("%", "mm/m")}
_DURATION = {METRIC: ("h", "d", "min"), INCH: ("h", "d", "min")}
_SUN = {METRIC: ("W/m2", "BTU/h/ft2"), INCH: ("BTU/h/ft2", "W/m2")}
_FILM = {METRIC: ("W/m2K", "BTU/h/ft2/degF"), INCH: ("BTU/h/ft2/degF", "W/m2K")}

_EX_SMALL = {METRIC: "16 mm", INCH: "5/8 in"}
_EX_SPAN = {METRIC: "3.2 m", INCH: "12' 6 1/2\""}
_EX_TEMP = {METRIC: "34 degC", INCH: "94 degF"}


def _length(key: str, label: str, **more: Any) -> Field:
    more.setdefault("example", _EX_SMALL)
    return Field(key, label, "length", units=_SMALL, **more)


def _span(key: str, label: str, **more: Any) -> Field:
    more.setdefault("example", _EX_SPAN)
    return Field(key, label, "length", units=_SPAN, **more)


def _temperature(key: str, label: str, **more: Any) -> Field:
    more.setdefault("example", _EX_TEMP)
    return Field(key, label, "temperature", units=_TEMPERATURE, **more)


def _percent(key: str, label: str, **more: Any) -> Field:
    more.setdefault("example", "25 %")
    return Field(key, label, "percent", units=more.pop("units", _PERCENT), **more)


_SURFACE = {"hard_min": -90.0, "hard_max": 130.0, "soft_min": -50.0, "soft_max": 95.0,
            "soft_reason": "Building surfaces seldom leave this range."}  # fmt: skip
_AIR = {"hard_min": -90.0, "hard_max": 60.0, "soft_min": -45.0, "soft_max": 50.0,
        "soft_reason": "Few places on earth have air outside this range."}  # fmt: skip
_TOLERANCE = {"hard_min": 0.0, "hard_max": 200.0, "soft_max": 25.0,
              "soft_reason": "A tolerance this large is unusual for a sealed joint."}  # fmt: skip

JOB = Group(
    "job", "Job", "",
    (
        Field("title", "Job title", "text", required=True, example="North stair tower", section="Title block"),
        Field("reference", "Reference", "text", example="NST-07", section="Title block"),
        Field("revision", "Revision", "text", default="A", section="Title block"),
        Field("date", "Date", "date", example="2026-11-24", section="Title block"),
        Field("prepared_by", "Prepared by", "text", section="Title block"),
        Field("responsible", "Responsible person", "text", section="Title block",
              help="Who answers for these numbers where the law calls this engineering."),
        Field("units", "Units shown", "choice", required=True, default=METRIC, section="Title block",
              choices=(Choice(METRIC, "Metric (mm, °C)"), Choice(INCH, "Inch (in, °F)")),
              help="What you type keeps its own unit; this chooses how answers read."),
        Field("region", "Region", "choice", table="regions", default="other", section="Title block",
              help="Chooses the cautions and the standards named. It changes no number."),
        Field("note", "Notes", "note", multiline=True, section="Title block"),
    ),
)  # fmt: skip

SITE = Group(
    "site", "Site", "site",
    (
        Field("place", "Place", "text", section="Climate", example="Harbour side, 3 storeys"),
        _temperature("summer_air", "Summer design air", symbol="T_air", required=True, section="Climate", **_AIR,
                     help="Warm design air temperature of the place, from your climate data."),
        _temperature("winter_air", "Winter design air", symbol="T_win", required=True, section="Climate", **_AIR,
                     example={METRIC: "-12 degC", INCH: "10 degF"},
                     help="Cold design air temperature of the place."),
        Field("temperature_method", "Surface temperature by", "choice", default="tabulated", section="Climate",
              choices=(
                  Choice("tabulated", "Sun table: air + absorption × heat constant"),
                  Choice("sol-air", "Sol-air: absorbed sun over the film coefficient"),
              ),
              help="A surface temperature entered at a side always wins over either."),
        Field("night_sky", "Night-sky cooling", "temperature_difference", units=_DIFFERENCE,
              default={METRIC: "0 K", INCH: "0 degF"}, example={METRIC: "5 K", INCH: "9 degF"},
              section="Climate", advanced=True, hard_min=0.0, hard_max=25.0, soft_max=12.0,
              soft_reason="Clear-sky cooling is of the order of 5 to 10 K.",
              help="How far a face open to the night sky falls below the winter air. Roofs and ledges: 5 to 10 K.",
              source="from memory of the movement guide's climate notes"),
        Field("irradiance", "Sun on the face", "irradiance", symbol="I", units=_SUN, section="Climate",
              show_when={"temperature_method": ("sol-air",)}, example={METRIC: "600 W/m2", INCH: "190 BTU/h/ft2"},
              hard_min=0.0, hard_max=1500.0, soft_max=1100.0, soft_reason="Sun at ground level seldom passes this."),
        Field("film", "Surface film coefficient", "film", symbol="h_o", units=_FILM, section="Climate",
              show_when={"temperature_method": ("sol-air",)}, default={METRIC: "17 W/m2K", INCH: "3 BTU/h/ft2/degF"},
              hard_min=1.0, hard_max=100.0, soft_min=5.0, soft_max=40.0, soft_reason="Outdoor faces lie between these.",
              source="17 W/m2K is the usual summer design value for a wind of 3.4 m/s"),
        Field("longwave", "Long-wave loss to the sky", "temperature_difference", units=_DIFFERENCE, section="Climate",
              show_when={"temperature_method": ("sol-air",)}, default={METRIC: "0 K", INCH: "0 degF"},
              hard_min=0.0, hard_max=15.0, help="About 4 K for a roof, 0 for a wall."),
        _temperature("seal_from", "Sealing not below", section="Sealing", **_SURFACE,
                     example={METRIC: "5 degC", INCH: "40 degF"},
                     help="Coldest element temperature at which joints will be sealed. Empty: any temperature, so the full range counts both ways."),
        _temperature("seal_to", "Sealing not above", section="Sealing", **_SURFACE,
                     example={METRIC: "30 degC", INCH: "86 degF"},
                     help="Warmest element temperature at which joints will be sealed."),
        _temperature("reference", "Reference temperature", section="Sealing", default={METRIC: "20 degC", INCH: "68 degF"},
                     hard_min=-30.0, hard_max=50.0, help="Widths read on different days are brought to this temperature."),
        Field("convention", "Convention of the class", "choice", required=True, default="each-way", section="Rules",
              choices=(
                  Choice("each-way", "Each way about the width when sealed",
                         "Class 25 lets the bead open by 25 % and close by 25 % of the width at sealing."),
                  Choice("total-swing", "Total swing",
                         "Class 25 lets opening and closing together reach 25 % of the width."),
              ),
              help="The two differ by a factor of two for the same number. Neither is ever turned into the other.",
              source="ASTM C920 and ISO 11600 test each way; some national design practice limits the total."),
        Field("depth_rule", "Depth rule set", "choice", table="depth_rules", default="detailing-half", section="Rules",
              help="Published depth rules disagree. This one is used; the others are shown beside it."),
        Field("rod_series", "Rod sizes", "choice", section="Rules", default={METRIC: "metric", INCH: "inch"},
              choices=(Choice("metric", "Metric sizes"), Choice("inch", "Inch sizes"))),
        Field("tolerance_method", "Tolerances add by", "choice", default="worst-case", section="Rules",
              choices=(
                  Choice("worst-case", "Worst case: the plain sum"),
                  Choice("root-sum-square", "Root of the sum of squares"),
              ),
              help="Both are shown; this one sets the design width."),
        _length("increment", "Round widths up to", default={METRIC: "1 mm", INCH: "1/16 in"}, section="Rules",
                above=True, hard_min=0.0, hard_max=25.4, example={METRIC: "1 mm", INCH: "1/16 in"}),
        _length("fabrication_tolerance", "Fabrication tolerance", default={METRIC: "0 mm", INCH: "0 in"}, section="Tolerances",
                example={METRIC: "3 mm", INCH: "1/8 in"}, **_TOLERANCE, help="How much wider a part may come than drawn. Each joint may have its own."),
        _length("erection_tolerance", "Erection tolerance", default={METRIC: "0 mm", INCH: "0 in"}, section="Tolerances",
                example={METRIC: "3 mm", INCH: "1/8 in"}, **_TOLERANCE, help="How far a part may be set out of place towards the joint."),
        _length("spacing_tolerance", "Spacing tolerance", default={METRIC: "0 mm", INCH: "0 in"}, section="Tolerances",
                example={METRIC: "2 mm", INCH: "1/16 in"}, **_TOLERANCE, help="How much the setting-out of the joints may vary."),
        _length("closed_gap", "Least closed gap", default={METRIC: "0 mm", INCH: "0 in"}, section="Tolerances", advanced=True,
                hard_min=0.0, hard_max=100.0, example={METRIC: "3 mm", INCH: "1/8 in"},
                help="The gap that must stay open at the hottest, whatever the class allows."),
        Field("dew_margin", "Margin over dew point", "temperature_difference", units=_DIFFERENCE, section="At the face",
              default={METRIC: "3 K", INCH: "5 degF"}, hard_min=0.0, hard_max=15.0, soft_min=2.0,
              soft_reason="Trade custom is 3 K (5 °F); a smaller margin is inside the error of the instruments.",
              example={METRIC: "3 K", INCH: "5 degF"}, source="common practice, borrowed from coatings work"),
        _percent("green_limit", "Movement allowed while green", default="10 %", section="At the face",
                 hard_min=0.0, hard_max=1.0, soft_max=0.25, soft_reason="Custom is 10 to 15 % for one-part, up to 25 % for fast two-part.",
                 example="10 %", source="common practice, no source"),
        Field("building_year", "Year of building", "number", section="Old work", hard_min=1000, hard_max=2100,
              example="1968", help="Opens the gate for hazardous old sealant."),
    ),
)  # fmt: skip

SEALANT = Group(
    "sealant", "Sealant", "sealants[]",
    (
        Field("name", "Name on the job", "text", required=True, example="Façade sealant, grey", section="Sealant"),
        Field("family", "Family", "choice", table="families", required=True, section="Sealant"),
        Field("class", "Movement class", "choice", table="classes", required=True, section="Sealant",
              help="From the sealant maker's data sheet."),
        _percent("own_extension", "Own extension", symbol="S_e", section="Sealant", show_when={"class": ("own",)},
                 above=True, hard_min=0.0, hard_max=3.0, soft_max=1.0, soft_reason="Few sealants are tested beyond this."),
        _percent("own_compression", "Own compression", symbol="S_c", section="Sealant", show_when={"class": ("own",)},
                 above=True, hard_min=0.0, hard_max=0.95, soft_max=0.5, soft_reason="Few sealants are tested beyond this."),
        _percent("own_total", "Own total swing", symbol="C", section="Sealant",
                 above=True, hard_min=0.0, hard_max=3.0, advanced=True,
                 help="Permissible total as your national practice gives it. Used only under the total-swing convention."),
        _temperature("apply_from", "Apply from", section="Data sheet", advanced=True, **_SURFACE,
                     example={METRIC: "5 degC", INCH: "40 degF"}, help="Empty: the family's general range."),
        _temperature("apply_to", "Apply up to", section="Data sheet", advanced=True, **_SURFACE,
                     example={METRIC: "40 degC", INCH: "104 degF"}),
        _length("width_least", "Least width", section="Data sheet", advanced=True, hard_min=0.0, hard_max=200.0,
                example={METRIC: "6 mm", INCH: "1/4 in"}),
        _length("width_most", "Greatest width", section="Data sheet", advanced=True, hard_min=0.0, hard_max=500.0,
                example={METRIC: "40 mm", INCH: "1 1/2 in"}),
        _length("cure_depth", "Cured after 24 h", symbol="k", section="Data sheet", advanced=True, above=True,
                hard_min=0.0, hard_max=50.0, soft_max=8.0, soft_reason="One-part sealants cure a few millimetres in a day.",
                example={METRIC: "2.5 mm", INCH: "0.1 in"}, help="Depth at 23 °C and 50 % humidity, from the data sheet."),
        Field("data_sheet", "Data sheet reference", "text", section="Data sheet", help="Document and date that these figures come from."),
        Field("note", "Notes", "note", multiline=True, section="Data sheet", advanced=True),
    ),
)  # fmt: skip

JOINT = Group(
    "joint", "Joint", "joints[]",
    (
        Field("name", "Name", "text", required=True, example="Panel to panel", section="Joint"),
        Field("place", "Where", "text", example="North face, grid 3 to 4", section="Joint"),
        Field("kind", "Kind", "choice", required=True, default="butt", section="Joint",
              choices=(
                  Choice("butt", "Butt", "Faces look at each other; the joint opens and closes."),
                  Choice("lap", "Lap", "Faces slide past each other; the bead is sheared."),
                  Choice("mixed", "Butt with slip", "Opens and closes, and the sides also slip along the joint."),
              )),
        Field("use", "Use", "choice", table="uses", required=True, default="weather", section="Joint"),
        Field("works", "Does it move?", "choice", default="working", section="Joint", advanced=True,
              choices=(
                  Choice("working", "Working joint: it moves"),
                  Choice("still", "Non-working joint: it does not move"),
              ), help="A non-working joint may be bonded on three sides."),
        Field("sealant", "Sealant", "reference", table="sealants", required=True, section="Joint"),
        _length("width", "Width drawn or built", symbol="w", section="Joint", above=True, hard_min=0.0, hard_max=500.0,
                soft_min=3.0, soft_max=75.0, soft_reason="Sealed joints are seldom outside this range.",
                help="For a lap: the thickness of the bead between the faces. Leave empty to be told."),
        Field("width_is", "This width is", "choice", default="drawn", section="Joint",
              choices=(
                  Choice("drawn", "Drawn: tolerances still come off it"),
                  Choice("built", "Built and measured: no tolerance comes off"),
              )),
        _length("fabrication_tolerance", "Fabrication tolerance", section="Tolerances of this joint", advanced=True,
                example={METRIC: "3 mm", INCH: "1/8 in"}, **_TOLERANCE, help="Empty: as set for the site."),
        _length("erection_tolerance", "Erection tolerance", section="Tolerances of this joint", advanced=True,
                example={METRIC: "3 mm", INCH: "1/8 in"}, **_TOLERANCE, help="Empty: as set for the site."),
        _length("spacing_tolerance", "Spacing tolerance", section="Tolerances of this joint", advanced=True,
                example={METRIC: "2 mm", INCH: "1/16 in"}, **_TOLERANCE, help="Empty: as set for the site."),
        _temperature("seal_from", "Sealing not below", section="Tolerances of this joint", advanced=True, **_SURFACE,
                     example={METRIC: "5 degC", INCH: "40 degF"}, help="Empty: as set for the site."),
        _temperature("seal_to", "Sealing not above", section="Tolerances of this joint", advanced=True, **_SURFACE,
                     example={METRIC: "30 degC", INCH: "86 degF"}, help="Empty: as set for the site."),
        Field("rod", "Backing", "choice", table="rod_types", default="closed-cell", section="Bead"),
        Field("tooling", "Face", "choice", default="concave", section="Bead",
              choices=(Choice("concave", "Tooled concave"), Choice("flush", "Flush"))),
        _length("tool_sag", "Tooling hollow", section="Bead", advanced=True, hard_min=0.0, hard_max=50.0,
                example={METRIC: "1.5 mm", INCH: "1/16 in"}, help="Depth of the hollow at mid-width. Empty: a tenth of the width.",
                source="common practice, no source"),
        _length("rod_sag", "Rod crown", section="Bead", advanced=True, hard_min=0.0, hard_max=50.0,
                example={METRIC: "3 mm", INCH: "1/8 in"}, help="How far the rod bulges into the bead. Empty: from the round rod chosen."),
        _length("neck", "Depth at mid-width", symbol="d", section="Bead", advanced=True, above=True, hard_min=0.0, hard_max=100.0,
                help="Empty: from the rule set."),
        Field("old_sealant", "Old sealant comes out first", "flag", section="Circumstances"),
        Field("enclosed_room", "Closed room", "flag", section="Circumstances", help="A bathroom, a shaft, a plant room."),
        Field("grinding", "Joint faces will be cut or ground", "flag", section="Circumstances"),
        Field("bitumen_contact", "Touches bitumen or asphalt", "flag", section="Circumstances"),
        Field("other_sealant_contact", "Touches another sealant", "flag", section="Circumstances"),
        Field("painted", "Will be painted over", "flag", section="Circumstances", advanced=True),
        Field("note", "Notes", "note", multiline=True, section="Circumstances"),
    ),
)  # fmt: skip

SIDE = Group(
    "side", "Side", "joints[].side_a",
    (
        Field("substrate", "Material", "choice", table="substrates", required=True, section="Material"),
        Field("finish", "Colour or finish", "choice", table="finishes", section="Material", help="Sets how much sun it takes up."),
        Field("sun", "Sun", "choice", default="open", section="Material",
              choices=(
                  Choice("open", "Open to the sun"),
                  Choice("reflected", "Sun plus reflection from a near surface"),
                  Choice("shaded", "Always shaded or indoors"),
              )),
        _span("length", "Length of the element", symbol="L", required=True, section="Movement", above=True, hard_min=0.0, hard_max=200000.0,
              soft_max=60000.0, soft_reason="An element this long usually has a movement joint in it."),
        Field("fixity", "Held at", "choice", default="middle", section="Movement",
              choices=(
                  Choice("middle", "Its middle: half moves here"),
                  Choice("far-end", "The far end: all moves here"),
                  Choice("near-end", "This end: none moves here"),
                  Choice("share", "Another share"),
              ), help="Decides how much of the length moves toward this joint."),
        _percent("moving_share", "Share that moves here", section="Movement", show_when={"fixity": ("share",)},
                 hard_min=0.0, hard_max=1.0, example="60 %"),
        _span("length_along", "Length that slips along the joint", section="Movement", show_when={"joint.kind": ("mixed", "lap")},
              hard_min=0.0, hard_max=200000.0, help="From where the element is held, measured along the joint."),
        _temperature("summer_surface", "Hottest, measured or known", section="Temperature", advanced=True, **_SURFACE,
                     help="Entered here, it is used instead of the method of the site."),
        _temperature("winter_surface", "Coldest, measured or known", section="Temperature", advanced=True, **_SURFACE,
                     example={METRIC: "-15 degC", INCH: "5 degF"}),
        _percent("absorption", "Solar absorption", symbol="A", section="Temperature", advanced=True, hard_min=0.0, hard_max=1.0,
                 example="75 %", help="Empty: from the colour."),
        Field("mass", "Heat capacity", "choice", default="auto", section="Temperature", advanced=True,
              choices=(Choice("auto", "As usual for the material"), Choice("low", "Light"), Choice("high", "Massive"))),
        Field("expansion", "Expansion", "expansion", symbol="α", units=_EXPANSION, section="Material data", advanced=True,
              hard_min=0.0, hard_max=300e-6, soft_min=1e-6, soft_max=120e-6, soft_reason="Building materials lie within this range.",
              example={METRIC: "10.8 e-6/K", INCH: "6.0 e-6/degF"}, help="Empty: from the material."),
        _percent("moisture_reversible", "Moisture swing", units=_STRAIN, section="Material data", advanced=True,
                 hard_min=0.0, hard_max=0.05, soft_max=0.01, soft_reason="Most materials swing far less than 1 %.",
                 example="0.02 %", help="Whole range of wetting and drying. Empty: from the material."),
        _percent("moisture_irreversible", "Lasting growth (+) or shrinkage (−)", units=_STRAIN, section="Material data", advanced=True,
                 hard_min=-0.05, hard_max=0.05, soft_min=-0.005, soft_max=0.005, soft_reason="Lasting moisture strain is usually below 0.1 %.",
                 example="0.05 %", help="Plus closes the joint, as clay brick does; minus opens it, as concrete does. Empty: from the material."),
        _percent("moisture_done", "Of that, already happened", section="Material data", advanced=True, default="0 %",
                 hard_min=0.0, hard_max=1.0, example="30 %"),
    ),
)  # fmt: skip

CAUSE = Group(
    "cause", "Further movement", "joints[].causes[]",
    (
        Field("label", "Cause", "text", required=True, example="Floor deflection", section="Cause"),
        Field("kind", "Sort", "choice", default="other", section="Cause",
              choices=(
                  Choice("deflection", "Floor or beam deflection"),
                  Choice("shortening", "Column shortening or creep"),
                  Choice("sway", "Wind sway"),
                  Choice("seismic", "Seismic drift"),
                  Choice("settlement", "Settlement"),
                  Choice("other", "Other"),
              )),
        _length("opening", "Opens by", section="Amounts", hard_min=0.0, hard_max=500.0, example={METRIC: "2 mm", INCH: "1/16 in"}),
        _length("closing", "Closes by", section="Amounts", hard_min=0.0, hard_max=500.0, example={METRIC: "3 mm", INCH: "1/8 in"}),
        _length("shear", "Slips along by", section="Amounts", hard_min=0.0, hard_max=500.0, example={METRIC: "4 mm", INCH: "3/16 in"}),
        _length("shear_across", "Steps across by", section="Amounts", hard_min=0.0, hard_max=500.0,
                example={METRIC: "2 mm", INCH: "1/16 in"}, help="Slip at right angles to the first, in and out of the wall."),
        Field("source", "Where the figure is from", "text", section="Amounts", example="Structural drawing S-12"),
    ),
)  # fmt: skip

FACE = Group(
    "face", "At the face", "joints[].face",
    (
        _length("width", "Width now", symbol="w", section="Measured", above=True, hard_min=0.0, hard_max=500.0, soft_min=3.0, soft_max=75.0,
                soft_reason="Check the reading: sealed joints are seldom outside this range.", help="Mean of several readings, at the bond faces."),
        _length("width_least", "Narrowest", section="Measured", above=True, hard_min=0.0, hard_max=500.0),
        _length("width_most", "Widest", section="Measured", above=True, hard_min=0.0, hard_max=500.0),
        _temperature("surface", "Surface now", symbol="T_s", section="Measured", **_SURFACE, help="The element, not the air. Mean of three spots; tape over bare metal or glass."),
        _temperature("surface_b", "Surface of side B", section="Measured", advanced=True, **_SURFACE, help="Empty: as side A."),
        _temperature("air", "Air now", section="Air", **_AIR),
        _percent("humidity", "Relative humidity", section="Air", hard_min=0.0, hard_max=1.0, soft_min=0.05,
                 soft_reason="So dry a reading is rare outdoors; check the instrument.", example="65 %"),
        Field("wetness", "Bond faces are", "choice", default="dry", section="Air",
              choices=(Choice("dry", "Dry"), Choice("damp", "Damp to the touch"), Choice("wet", "Wet"), Choice("frost", "Frosted"))),
        Field("day_swing", "Surface will swing by", "temperature_difference", units=_DIFFERENCE, section="While it cures",
              hard_min=0.0, hard_max=110.0, example={METRIC: "18 K", INCH: "32 degF"},
              help="From now: how far the surface is expected to move while the bead is green, the larger way."),
        Field("time", "When", "text", section="Measured", example="2026-11-24 10:40", advanced=True),
        Field("note", "Notes", "note", multiline=True, section="While it cures"),
    ),
)  # fmt: skip

GROUPS: tuple[Group, ...] = (JOB, SITE, SEALANT, JOINT, SIDE, CAUSE, FACE)


def group(key: str) -> Group:
    """The field group by key (KeyError for an unknown one)."""
    for item in GROUPS:
        if item.key == key:
            return item
    raise KeyError(key)


# ---- reading a group --------------------------------------------------------------------------

Tables = Mapping[str, Mapping[str, Any]]


@frozen
class Reads:
    """What the reader collects besides values: issues, and the reading of each quantity."""

    system: str
    issues: list[Issue] = field(factory=list)
    readings: dict[str, dict[str, object]] = field(factory=dict)
    places: set[str] = field(factory=set)

    def add(self, issue: Issue) -> None:
        """Keep one finding."""
        self.issues.append(issue)
        self.places.add(issue.path)


def read_group(spec: Group, raw: object, path: str, reads: Reads, tables: Tables, *, label: str = "") -> dict[str, Any]:
    """Read every field of one group from its raw object.

    Parameters
    ----------
    spec : Group
        The fields to read.
    raw : object
        What stands in the job file; anything but an object yields an issue and empty values.
    path : str
        JSON Pointer of that object.
    reads : Reads
        Collects issues and readings.
    tables : Mapping
        Ids of the catalogue tables and of the job's sealants, by table name.
    label : str
        Put before field labels in messages, for example `Side A`.

    Returns
    -------
    dict
        Field key to value: float in the core unit, str, bool, or None where nothing usable stands.
    """
    values: dict[str, Any] = dict.fromkeys((item.key for item in spec.fields), None)
    if raw is None:
        raw = {}
    if not isinstance(raw, Mapping):
        reads.add(Issue(path, "not-an-object", "error", f"{label or spec.label} is damaged: a set of fields was expected here."))
        return values
    for item in spec.fields:
        values[item.key] = _read_field(item, raw.get(item.key), f"{path}/{item.key}", reads, tables, label)
    return values


def _name(item: Field, label: str) -> str:
    return f"{label}, {item.label[0].lower()}{item.label[1:]}" if label else item.label


def _read_field(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> Any:
    if raw is None or (isinstance(raw, str) and not raw.strip()):
        raw = item.default_for(reads.system)
        if raw is None:
            return None
    reader = _READERS.get(item.kind, _read_quantity)
    return reader(item, raw, path, reads, tables, label)


def _refuse(reads: Reads, path: str, code: str, message: str, value: object) -> None:
    shown = value if isinstance(value, (str, int)) or (isinstance(value, float) and math.isfinite(value)) else None
    reads.add(Issue(path, code, "error", message, value=shown))


def _read_text(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> str | None:
    if not isinstance(raw, str):
        _refuse(reads, path, "not-text", f"{_name(item, label)} must be text.", None)
        return None
    limit = NOTE_LIMIT if item.kind == "note" else TEXT_LIMIT
    if len(raw) > limit:
        _refuse(reads, path, "too-long", f"{_name(item, label)} may be at most {limit} characters long; this has {len(raw)}.", None)
        return raw[:limit]
    return raw


def _read_flag(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> bool | None:
    if isinstance(raw, bool):
        return raw
    _refuse(reads, path, "not-a-flag", f"{_name(item, label)} must be yes or no.", raw)
    return None


def _read_choice(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> str | None:
    allowed: Any = {choice.value for choice in item.choices} if item.choices else tables.get(item.table or "", {})
    if isinstance(raw, str) and (raw in allowed or item.table == "finishes"):
        return raw
    what = "a sealant of this job" if item.table == "sealants" else "one of the choices offered"
    shown = f"“{raw[:40]}”" if isinstance(raw, str) else "what stands here"
    _refuse(reads, path, "not-a-choice", f"{_name(item, label)}: {shown} is not {what}.", raw)
    return None


def _read_number(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> float | None:
    if isinstance(raw, bool) or not isinstance(raw, (str, int, float)):
        _refuse(reads, path, "not-a-number", f"{_name(item, label)} must be a number.", None)
        return None
    try:
        value = float(quantity.parse_number(str(raw)))
    except InputError as error:
        _refuse(reads, path, error.code, f"{_name(item, label)}: {error.message}", raw)
        return None
    return value if _within(item, value, path, reads, label, lambda v: quantity.plain(v, 3), "") else None


def _read_quantity(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> float | None:
    if isinstance(raw, bool) or not isinstance(raw, (str, int, float)):
        expected = item.example if isinstance(item.example, str) else item.example[reads.system]
        _refuse(reads, path, "not-a-number", f"{_name(item, label)}: write it as text with its unit, such as {expected}.", None)
        return None
    units = item.units_for(reads.system)
    try:
        reading = quantity.parse(str(raw), item.kind, units[0], reads.system)
    except InputError as error:
        _refuse(reads, path, error.code, f"{_name(item, label)}: {error.message}", raw)
        return None
    unit = reading.unit
    if reading.is_bare:
        reads.add(Issue(path, "unit-missing", "note", f"{_name(item, label)} has no unit; read as {quantity.sign_of(units[0])}.", value=raw))
    reads.readings[path] = dict(_reads_as(item.kind, reading.value, reading.unit))
    good = _within(item, reading.value, path, reads, label, lambda v: quantity.show(v, item.kind, unit), unit)
    return reading.value if good else None


_CORE_UNIT = {"length": "mm", "temperature": "degC", "temperature_difference": "K", "expansion": "1/K", "percent": "fraction",
              "duration": "h", "irradiance": "W/m2", "film": "W/m2K"}  # fmt: skip


@lru_cache(maxsize=4096)
def _reads_as(kind: str, value: float, unit: str) -> tuple[tuple[str, object], ...]:
    """The value in core units and in the other system's habit, to stand beside what was typed."""
    if kind == "length" and unit in ("in", "ft", "yd"):
        text = quantity.show(value, "length", "mm") if abs(value) < 1000 else quantity.show_span(value, METRIC)
    elif kind == "length":
        text = quantity.show_length(value, INCH) if abs(value) < 600 else quantity.show_span(value, INCH)
    else:
        text = quantity.show(value, kind, _OTHER.get((kind, unit), unit))
    return (("value", value), ("unit", _CORE_UNIT[kind]), ("reads", f"= {text}"), ("short", text))


_OTHER = {
    ("temperature", "degC"): "degF", ("temperature", "degF"): "degC",
    ("temperature_difference", "K"): "degF", ("temperature_difference", "degF"): "K",
    ("expansion", "e-6/K"): "e-6/degF", ("expansion", "1/K"): "e-6/degF",
    ("expansion", "e-6/degF"): "e-6/K", ("expansion", "1/degF"): "e-6/K",
    ("irradiance", "W/m2"): "BTU/h/ft2", ("irradiance", "BTU/h/ft2"): "W/m2",
    ("film", "W/m2K"): "BTU/h/ft2/degF", ("film", "BTU/h/ft2/degF"): "W/m2K",
}  # fmt: skip


def _within(item: Field, value: float, path: str, reads: Reads, label: str, show: Callable[[float], str], unit: str) -> bool:
    """Hard limits refuse, soft ones warn; both name the limit in the unit that was typed."""
    name = _name(item, label)
    low, high = item.hard_min, item.hard_max
    if low is not None and (value <= low if item.above else value < low):
        must = f"more than {show(low)}" if item.above else f"{show(low)} or more"
        reads.add(Issue(path, "too-small", "error", f"{name} must be {must}; this reads {show(value)}.", value, low, unit))
        return False
    if high is not None and value > high:
        reads.add(Issue(path, "too-large", "error", f"{name} must be {show(high)} or less; this reads {show(value)}.", value, high, unit))
        return False
    for limit, over, word in ((item.soft_min, -1, "below"), (item.soft_max, 1, "above")):
        if limit is not None and (value - limit) * over > 0:
            message = f"{name} reads {show(value)}, {word} {show(limit)}. {item.soft_reason} Sure?"
            reads.add(Issue(path, "unusual", "warning", message, value, limit, unit))
    return True


_READERS: dict[str, Callable[..., Any]] = {
    "text": _read_text,
    "note": _read_text,
    "date": _read_text,
    "flag": _read_flag,
    "choice": _read_choice,
    "reference": _read_choice,
    "number": _read_number,
}
