# Source: Engineering Civil, "What is the purpose of using movement accommodation factor for joint sealant?", web page (read):
# M = 4 mm, MAF = 30 % -> 13.3 mm, M being the total movement. However the total comes about, the width is the same.
# Known difference: BS 6093 as recalled has M / MAF + M (17.3 mm); not offered here.
import pytest
from printed import COMPUTED, READ, Case, locator
from typed import STILL, at, evaluated, loaded, own_class, side

# 10 m at 10e-6/K over 40 K: 4 mm from the coldest to the hottest, whatever the temperature at sealing.
PANEL = {"side_a": side("10 e-6/K", "10 m", "-10 degC", "30 degC", fixity="far-end"), "side_b": STILL}
CASES = [
    Case("opening and closing together", {"joint": loaded(("1 mm", "3 mm"))}, 13.3, 0.1, READ),
    Case("all of it opening", {"joint": loaded(("4 mm", ""))}, 13.3, 0.1, READ),
    Case("an element that moves 4 mm in all", {"joint": PANEL}, 13.3, 0.1, COMPUTED),
    Case("the same, sealed at the coldest", {"joint": PANEL | {"seal_from": "-10 degC", "seal_to": "-10 degC"}}, 13.3, 0.1, COMPUTED),
    Case("the same, sealed from 5 to 25", {"joint": PANEL | {"seal_from": "5 degC", "seal_to": "25 degC"}}, 13.3, 0.1, COMPUTED),
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_width_for_a_total_matches_the_maf_page(case):
    answer = evaluated(dict(case.inputs["joint"]), site={"convention": "total-swing"}, sealant=own_class(25, 25, 30))
    case.check(at(answer, "width.required_mm"))
    assert answer["width"]["governed_by"] == "swing"
