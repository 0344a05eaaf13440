# Source: Construction Waterproofing Handbook (read): p. 12.20, on a 1/2 in joint 3/8 in of closing is 75 % and 1/4 in of opening is
# 50 %, 125 % in all; p. 5.6, the joint is four times the movement, which is a class of 25 % each way.
import pytest
from printed import INCH_MM, READ, Case, locator
from typed import at, evaluated, loaded

STRAINS = [
    Case("p. 12.20, closing", {"place": "strain.hot_average_fraction"}, -0.75, 0.01, READ),
    Case("p. 12.20, opening", {"place": "strain.cold_average_fraction"}, 0.50, 0.01, READ),
]


@pytest.mark.parametrize("case", STRAINS, ids=locator)
def test_strain_of_a_measured_joint(case):
    case.check(at(evaluated(loaded(("1/4 in", "3/8 in"), width="1/2 in", width_is="built"), units="inch"), case.inputs["place"]))


@pytest.mark.parametrize("load", [("1/8 in", ""), ("", "1/8 in"), ("1/8 in", "1/8 in")], ids=["opening", "closing", "both"])
def test_joint_is_four_times_the_movement(load):
    case = Case("p. 5.6, 1/8 in", {}, 0.5 * INCH_MM, 0.001, READ)
    case.check(at(evaluated(loaded(load), sealant={"class": "c920-25"}, units="inch"), "width.required_mm"))
