"""Every printed line of working gives its printed result when somebody works it out from the page."""

import itertools
import math
import re

import pytest

from jobs import make_job, only_joint

SIDE_A = {"expansion": "6 e-6/degF", "length": "30 ft", "winter_surface": "0 degF", "summer_surface": "100 degF", "length_along": "10 ft"}
SIDE_B = {"expansion": None, "substrate": "aluminium", "length": "12' 6 1/2\"", "winter_surface": None, "summer_surface": None, "length_along": "8 ft"}
CLAY = {"substrate": "brick-clay", "moisture_irreversible": None, "moisture_reversible": None, "summer_surface": None}
JOINT = {
    "width": "3/4 in", "fabrication_tolerance": "1/8 in", "erection_tolerance": "1/16 in",
    "causes": [{"label": "Load", "opening": "1/16 in", "closing": "1/16 in", "shear": "1/8 in", "shear_across": "1/16 in"}, {"label": "Sway", "shear": "1/32 in"}],
    "face": {"width": "11/16 in", "width_least": "5/8 in", "width_most": "3/4 in", "surface": "60 degF", "surface_b": "70 degF", "air": "65 degF", "humidity": "50 %", "day_swing": "30 degF"},
}  # fmt: skip
UNITS = re.compile(r"/?(?:in/°F|mm/K|BTU/h·ft²·°F|BTU/h·ft²|W/m²K|W/m²|°F|°C|mm²|in²|mm\b|(?<![a-z])in\b|K\b)")
WORDS = ("with ", "up to", "allowed at", "none")


def segment(chord, sagitta):
    if sagitta == 0:
        return 0.0
    radius = (chord**2 / 4 + sagitta**2) / (2 * sagitta)
    angle = 2 * math.asin(chord / (2 * radius))
    return radius**2 / 2 * (angle - math.sin(angle))


def worked(text):
    """The value of a printed line, its units struck out."""
    body = text.replace("−", "-").replace("× 10⁻⁶", "*1e-6")
    body = UNITS.sub("", body).replace("×", "*").replace("√", "sqrt").replace("²", "**2")
    body = re.sub(r"([\d.]+) %", r"(\1/100)", re.sub(r"\|([^|]+)\|", r"abs(\1)", body))
    known = {"sqrt": math.sqrt, "seg": segment, "abs": abs, "max": lambda *parts: max(parts), "min": lambda *parts: min(parts)}
    return eval(body, {"__builtins__": {}}, known)


@pytest.mark.parametrize(
    ("units", "convention", "kind", "gap", "clay"),
    list(itertools.product(["metric", "inch"], ["each-way", "total-swing"], ["butt", "mixed", "lap"], ["0 mm", "1/8 in"], [False, True])),
)
def test_each_step_gives_its_printed_result(units, convention, kind, gap, clay):
    joint = JOINT | {"kind": kind, "side_a": SIDE_A, "side_b": SIDE_B}
    if clay:
        joint |= {"side_a": SIDE_A | CLAY, "side_b": SIDE_B | {"moisture_irreversible": "-0.03 %", "sun": "reflected"}, "seal_from": "5 degC", "seal_to": "30 degC"}
    site = {"increment": "1/16 in", "summer_air": "95 degF", "winter_air": "5 degF", "night_sky": "9 degF", "convention": convention, "closed_gap": gap}
    answer = only_joint(make_job(joint, site=site, units=units))
    count = 0
    for step in answer["steps"] + answer["face"]["steps"]:
        if not step["numbers"] or any(word in step["numbers"] for word in WORDS) or step["key"] == "rod":
            continue
        # Inputs are printed to 0.001 mm or 0.0001 in and 0.01 degree, so a result may be off by a few of its last digits.
        result = worked(step["result"])
        allowed = 0.06 if "°" in step["result"] and "/" not in step["result"] else max(2e-3 * abs(result), 2e-3 if "mm" in step["result"] else 2e-4)
        assert worked(step["numbers"]) == pytest.approx(result, abs=allowed), step
        count += 1
    assert count >= 20
