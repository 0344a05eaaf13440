# Source: Petrie, Handbook of Adhesives and Sealants, Fig. 3.24 p. 119 (read): extended by 100 %, a 2 in deep seal strains by 550 % at its
# face and a shallow one of the same width by 160 %. The width of 1/4 in and the shallow depth of 1/2 in are inferred (the caption reads
# 1/4 in, with which the model gives 117 %). The table of other depths is derived: parabola and constant volume after Tons 1959.
import pytest
from printed import DERIVED, READ, Case, locator
from typed import at, evaluated, loaded

WIDE = "the print is rounded to 10 %"
CASES = [
    Case("2 in deep", {"width": "1/4 in", "neck": "2 in", "opening": "1/4 in"}, 5.50, 0.10, READ),
    Case("1/2 in deep", {"width": "1/4 in", "neck": "1/2 in", "opening": "1/4 in"}, 1.60, 0.10, READ),
]
TABLE = {"10 mm": (10.3, 26.2, 52.7, 104.6), "20 mm": (11.1, 29.6, 60.5, 117.4), "40 mm": (14.4, 42.2, 86.8, 159.9)}
CASES += [
    Case(f"20 mm wide, {neck} deep, +{share} %", {"width": "20 mm", "neck": neck, "opening": f"{share / 5} mm"}, strain / 100, 0.001, DERIVED)
    for neck, row in TABLE.items()
    for share, strain in zip((10, 25, 50, 100), row, strict=True)
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_strain_at_the_face(case):
    load = (case.inputs["opening"],)
    answer = evaluated(loaded(load, width=case.inputs["width"], neck=case.inputs["neck"], width_is="built", tooling="flush"), sealant={"class": "c920-100-50"})
    case.check(at(answer, "strain.cold_face_fraction"))
