"""Inputs of the take-off: settings, runs, packages, the prices of everything else, rates of labour."""

from __future__ import annotations

from typing import Any

from ..quantity import INCH, METRIC
from .spec import (
    BULK,
    COVERAGE,
    DURATION,
    PACE,
    VOLUME,
    Choice,
    Field,
    Group,
    length_field,
    percent_field,
    span_field,
)

ACCESS = (
    Choice("ground", "From the ground"),
    Choice("lift", "Lift or tower"),
    Choice("scaffold", "Scaffold"),
    Choice("stage", "Swing stage or ropes"),
    Choice("inside", "Inside"),
)
PACKAGE_SORTS = (
    Choice("cartridge", "Cartridge"),
    Choice("sausage", "Foil sausage"),
    Choice("pail", "Pail or drum"),
    Choice("kit", "Two-part kit"),
    Choice("other", "Other"),
)
_WASTE: dict[str, Any] = {"hard_min": 0.0, "hard_max": 0.9, "soft_max": 0.25, "soft_reason": "More than 20 % is rare, even on rough masonry."}
_MONEY: dict[str, Any] = {"hard_min": 0.0, "hard_max": 1e9}

TAKEOFF = Group(
    "takeoff", "Take-off", "takeoff",
    (
        percent_field("waste", "Waste", symbol="p", default="10 %", section="Waste", example="10 %", **_WASTE,
                 help="5 % on smooth faces, 10 % as a rule, 15 to 20 % on rough masonry and short runs.", source="from memory, medium confidence; edit"),
        Field("waste_by", "Waste is", "choice", default="times", section="Waste",
              choices=(
                  Choice("times", "A share of what goes into the joint", "Bought = net × (1 + p): 10 % makes 1.10."),
                  Choice("divide", "A share of what is bought", "Bought = net ÷ (1 − p): 10 % makes 1.111."),
              ), help="The two differ; the sheet says which was used."),
        length_field("width_shift", "Built wider than drawn by", section="Width", default={METRIC: "0 mm", INCH: "0 in"},
                hard_min=-50.0, hard_max=50.0, soft_min=-5.0, soft_max=10.0, soft_reason="So large a mean shift wants a measurement.",
                example={METRIC: "2 mm", INCH: "1/16 in"}, help="Added to the width of joints drawn, not of joints or runs measured. Order by the mean as built."),
        length_field("width_tolerance", "Width varies by, each way", section="Width", default={METRIC: "0 mm", INCH: "0 in"},
                hard_min=0.0, hard_max=50.0, soft_max=15.0, soft_reason="So large a spread is unusual.",
                example={METRIC: "3 mm", INCH: "1/8 in"}, help="For runs that give no narrowest and widest. Quantity varies both ways."),
        Field("colours", "Colours of this job", "text", section="Colours", example="grey, sand, white",
              help="Separate with commas. Then a colour that is not among them is refused, so that a slip of the pen orders nothing. Empty: any colour goes."),
        percent_field("rod_waste", "Waste and splices of rod", default="5 %", section="Rod and tape", advanced=True, example="5 %", **_WASTE, source="from memory, medium confidence; edit"),
        percent_field("tape_waste", "Waste of bond-breaker tape", default="5 %", section="Rod and tape", advanced=True, example="5 %", **_WASTE, source="common practice, no source; edit"),
        Field("primer", "Primer", "choice", default="none", section="Faces",
              choices=(Choice("none", "None"), Choice("all", "On both bond faces"))),
        Field("primer_coverage", "One litre of primer covers", "coverage", units=COVERAGE, section="Faces", show_when={"primer": ("all",)}, above=True,
              default={METRIC: "12 m2/l", INCH: "490 ft2/gal"}, example={METRIC: "12 m2/l", INCH: "490 ft2/gal"}, hard_min=0.0, hard_max=100.0,
              soft_min=3.0, soft_max=30.0, soft_reason="Most primers cover 6 to 20 m²/l.", help="From the data sheet of the primer.", source="from memory, low confidence; edit"),
        length_field("primer_overlap", "Primer past the edge of the bond", section="Faces", show_when={"primer": ("all",)}, default={METRIC: "2 mm", INCH: "1/16 in"},
                hard_min=0.0, hard_max=50.0, example={METRIC: "2 mm", INCH: "1/16 in"}, source="common practice, no source; edit"),
        Field("cleaner", "Cleaner", "choice", default="none", section="Faces",
              choices=(Choice("none", "Not counted"), Choice("all", "On both bond faces"))),
        Field("cleaner_coverage", "One litre of cleaner does", "coverage", units=COVERAGE, section="Faces", show_when={"cleaner": ("all",)}, above=True,
              default={METRIC: "10 m2/l", INCH: "410 ft2/gal"}, example={METRIC: "10 m2/l", INCH: "410 ft2/gal"}, hard_min=0.0, hard_max=100.0,
              source="from memory, low confidence; log your own"),
        Field("masking", "Masking tape", "choice", default="none", section="Faces",
              choices=(Choice("none", "None"), Choice("one", "Along one side"), Choice("both", "Along both sides"))),
        percent_field("masking_waste", "Waste of masking tape", default="5 %", section="Faces", advanced=True, example="5 %", **_WASTE, source="common practice, no source; edit"),
        Field("packs_per_tip", "Packages through one tip", "count", default="5", section="Tools", advanced=True, example="5", hard_min=1, hard_max=1000,
              source="common practice, no source; edit"),
        percent_field("disposal_bulking", "Old sealant bulks up by", default="50 %", section="Tools", advanced=True, example="50 %", hard_min=0.0, hard_max=5.0,
                 source="common practice, no source; edit"),
        Field("mix_pace", "Bead placed from one mix", "pace", units=PACE, section="Two-part", above=True, hard_min=0.0, hard_max=1000.0, soft_max=200.0,
              soft_reason="Few crews place so much by hand.", example={METRIC: "30 m/h", INCH: "100 ft/h"},
              help="By the whole crew at one mixer. With the pot life it limits what may be mixed at once."),
        Field("currency", "Currency", "text", section="Money", example="EUR", help="Any short name. Nothing is converted."),
        Field("note", "Notes", "note", multiline=True, section="Money"),
    ),
)  # fmt: skip

_NOT_FILLET = {"section": ("auto", "butt", "lap", "bridge", "bed", "round")}
RUN = Group(
    "run", "Run", "takeoff.runs[]",
    (
        Field("name", "Run", "text", section="Run", example="North face, level 2"),
        Field("zone", "Zone", "text", section="Run", example="North"),
        Field("drawing", "Drawing", "text", section="Run", example="A-210"),
        Field("joint", "As joint", "reference", table="joints", section="Run",
              help="Takes section, sealant and width of that joint. Empty: the run stands alone."),
        span_field("length", "Length", symbol="L", required=True, section="Amount", above=True, hard_min=0.0, hard_max=1e8, soft_max=5e6,
              soft_reason="One run of more than 5 km is unusual.", example={METRIC: "24.6 m", INCH: "80' 6\""}),
        Field("count", "How many", "count", default="1", section="Amount", hard_min=1, hard_max=100000, example="12", help="The same run again: openings, bays, floors."),
        Field("lines", "Lines of bead", "count", default="1", section="Amount", hard_min=1, hard_max=10, soft_max=4, soft_reason="Inside and outside make two.",
              example="2", help="2 where inside and outside are both sealed."),
        Field("sealant", "Sealant", "reference", table="sealants", section="Order", help="Empty: as the joint's."),
        Field("colour", "Colour", "text", section="Order", example="grey"),
        Field("phase", "Phase", "text", section="Order", example="Phase 1", help="Each phase is ordered by itself."),
        Field("section", "Section", "choice", default="auto", section="Section",
              choices=(
                  Choice("auto", "As the joint"),
                  Choice("butt", "Butt, tooled, with backing"),
                  Choice("lap", "Lap"),
                  Choice("fillet", "Fillet in a corner"),
                  Choice("bridge", "Bridge over a joint"),
                  Choice("bed", "Bed under a part"),
                  Choice("round", "Round bead"),
              )),
        length_field("width", "Mean width as built", symbol="w", section="Section", show_when=_NOT_FILLET, above=True, hard_min=0.0, hard_max=500.0,
                soft_min=2.0, soft_max=150.0, soft_reason="Beads are seldom outside this range.",
                help="Lap: the thickness. Round bead: its diameter. Empty: the mean of the range, or the joint's width."),
        length_field("width_least", "Narrowest", section="Section", show_when=_NOT_FILLET, above=True, hard_min=0.0, hard_max=500.0),
        length_field("width_most", "Widest", section="Section", show_when=_NOT_FILLET, above=True, hard_min=0.0, hard_max=500.0),
        length_field("depth", "Depth", symbol="d", section="Section", show_when={"section": ("auto", "butt", "lap", "bridge", "bed")}, above=True, hard_min=0.0, hard_max=200.0,
                example={METRIC: "10 mm", INCH: "3/8 in"},
                help="Butt: at mid-width; empty takes the joint's or the rule set's. Lap: the bonded cover. Bridge and bed: the thickness."),
        Field("tooling", "Face", "choice", default="concave", section="Section", show_when={"section": ("butt",)},
              choices=(Choice("concave", "Tooled concave"), Choice("flush", "Flush"))),
        length_field("tool_sag", "Tooling hollow", section="Section", show_when={"section": ("butt",)}, advanced=True, hard_min=0.0, hard_max=100.0,
                example={METRIC: "1.5 mm", INCH: "1/16 in"}, help="Empty: a tenth of the width.", source="common practice, no source"),
        length_field("rod_sag", "Rod crown", section="Section", show_when={"section": ("butt",)}, advanced=True, hard_min=0.0, hard_max=100.0,
                example={METRIC: "3 mm", INCH: "1/8 in"}, help="Empty: that of the round rod chosen."),
        length_field("leg_a", "Leg", symbol="a", section="Section", show_when={"section": ("fillet",)}, above=True, hard_min=0.0, hard_max=200.0,
                example={METRIC: "10 mm", INCH: "3/8 in"}, help="Bonded length on the first side."),
        length_field("leg_b", "Other leg", symbol="b", section="Section", show_when={"section": ("fillet",)}, above=True, hard_min=0.0, hard_max=200.0,
                example={METRIC: "10 mm", INCH: "3/8 in"}, help="Empty: as the first."),
        Field("face", "Face of the fillet", "choice", default="flat", section="Section", show_when={"section": ("fillet",)},
              choices=(Choice("flat", "Flat"), Choice("concave", "Concave"), Choice("convex", "Convex"))),
        length_field("sagitta", "Hollow or bulge", symbol="s", section="Section", show_when={"section": ("fillet",)}, hard_min=0.0, hard_max=100.0,
                example={METRIC: "1 mm", INCH: "1/16 in"}, help="At the middle of the straight line between the ends. Empty: a tenth of that line.",
                source="common practice, no source"),
        Field("backing", "Backing", "choice", default="auto", section="Backing", show_when={"section": ("auto", "butt", "fillet", "bridge")},
              choices=(
                  Choice("auto", "As the joint or section", "A butt takes a closed-cell rod, a fillet or bridge tape."),
                  Choice("closed-cell", "Closed-cell rod"),
                  Choice("open-cell", "Open-cell rod"),
                  Choice("bicellular", "Bicellular rod"),
                  Choice("tape", "Bond-breaker tape"),
                  Choice("none", "None"),
              )),
        percent_field("waste", "Waste of this run", section="Amount", advanced=True, example="15 %", **_WASTE, help="Empty: as set for the take-off."),
        Field("removal", "Old sealant comes out", "flag", section="Work"),
        Field("access", "Access", "choice", default="ground", section="Work", choices=ACCESS),
        Field("note", "Notes", "note", multiline=True, section="Work"),
    ),
)  # fmt: skip

PACK = Group(
    "pack", "Package", "takeoff.packs[]",
    (
        Field("name", "Package", "text", section="Package", example="Foil sausage 600 ml"),
        Field("sort", "Sort", "choice", default="cartridge", section="Package", choices=PACKAGE_SORTS),
        Field("volume", "Content", "volume", units=VOLUME, required=True, section="Package", above=True, hard_min=0.0, hard_max=1e6,
              soft_min=20.0, soft_max=250000.0, soft_reason="Packages run from small tubes to drums.", example={METRIC: "600 ml", INCH: "10.1 US fl oz"}),
        Field("residue", "Stays inside each", "volume", units=VOLUME, section="Package", default={METRIC: "0 ml", INCH: "0 US fl oz"}, hard_min=0.0, hard_max=1e5,
              example={METRIC: "5 ml", INCH: "0.2 US fl oz"}, help="What cannot be pressed out, plus the fill of the tip."),
        Field("sealant", "For sealant", "reference", table="sealants", section="Fits", help="Empty: for every sealant."),
        Field("colour", "Colour", "text", section="Fits", example="grey", help="Empty: comes in every colour."),
        Field("per_box", "Packages in a box", "count", default="1", section="Box", hard_min=1, hard_max=10000, example="20"),
        Field("sold", "Sold", "choice", default="single", section="Box",
              choices=(Choice("single", "Singly"), Choice("box", "By the full box"), Choice("either", "Either way"))),
        Field("price", "Price of one package", "number", section="Money", example="13.40", **_MONEY),
        Field("box_price", "Price of a box", "number", section="Money", example="255.00", **_MONEY, help="Empty: packages × price of one."),
        Field("pot_life", "Pot life", "duration", units=DURATION, section="Two-part", show_when={"sort": ("kit",)}, above=True, hard_min=0.0, hard_max=72.0,
              example="2 h", help="At the temperature of the day. About half for each 10 °C (18 °F) warmer.", source="rule of thumb from memory"),
        Field("mixing", "Each kit is mixed", "choice", default="whole", section="Two-part", show_when={"sort": ("kit",)},
              choices=(Choice("whole", "Whole, at once"), Choice("part", "In parts"))),
        Field("note", "Notes", "text", section="Money", advanced=True),
    ),
)  # fmt: skip

EXTRA = Group(
    "extra", "Other item", "takeoff.extras[]",
    (
        Field("item", "Item", "choice", required=True, default="rod", section="Item",
              choices=(
                  Choice("rod", "Rod"), Choice("tape", "Bond-breaker tape"), Choice("primer", "Primer"), Choice("cleaner", "Cleaner"),
                  Choice("masking", "Masking tape"), Choice("tip", "Tips"), Choice("disposal", "Disposal of old sealant"),
              )),
        length_field("diameter", "Rod diameter", section="Item", show_when={"item": ("rod",)}, above=True, hard_min=0.0, hard_max=200.0,
                example={METRIC: "20 mm", INCH: "3/4 in"}, help="Empty: every rod that has no row of its own."),
        span_field("length", "Length in one piece sold", section="Sold by", show_when={"item": ("rod", "tape", "masking")}, above=True, hard_min=0.0, hard_max=1e8,
              example={METRIC: "50 m", INCH: "150 ft"}, help="A coil or roll."),
        Field("volume", "Content of one piece sold", "volume", units=BULK, section="Sold by", show_when={"item": ("primer", "cleaner", "disposal")}, above=True, hard_min=0.0, hard_max=1e7,
              example={METRIC: "0.5 l", INCH: "1 US gal"}),
        Field("count", "Pieces sold together", "count", default="1", section="Sold by", show_when={"item": ("tip",)}, hard_min=1, hard_max=100000, example="10"),
        Field("price", "Price", "number", section="Money", example="22.50", **_MONEY),
    ),
)  # fmt: skip

RATE = Group(
    "rate", "Rate of work", "takeoff.rates[]",
    (
        Field("stage", "Stage", "text", required=True, section="Work", example="Prepare, rod, gun, tool"),
        Field("on", "Done on", "choice", default="all", section="Work",
              choices=(
                  Choice("all", "Every run"), Choice("removal", "Runs where old sealant comes out"), Choice("new", "Runs without old sealant"),
                  Choice("backed", "Runs with rod or tape"),
              )),
        Field("access", "Access", "choice", default="any", section="Work", choices=(Choice("any", "Any without a row of its own"), *ACCESS),
              help="A row for one access wins over the row for any, stage by stage."),
        Field("pace", "One worker does", "pace", units=PACE, required=True, section="Work", above=True, hard_min=0.0, hard_max=10000.0, soft_max=100.0,
              soft_reason="Few stages go faster than this by hand.", example={METRIC: "6 m/h", INCH: "20 ft/h"}, help="Your own figure, from your own log."),
        Field("hour_price", "Price of an hour", "number", section="Money", example="48.00", **_MONEY),
        Field("basis", "Where the pace is from", "text", section="Work", example="own log 2026", help="No rate without its basis."),
    ),
)  # fmt: skip
