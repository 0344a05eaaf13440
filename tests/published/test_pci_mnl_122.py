# Source: PCI MNL-122 Architectural Precast Concrete, example J = 100 A / X + B + C: value from memory, medium confidence; the
# arithmetic was verified. 30 ft panel, 6e-6/degF, 100 degF, X 25 %, B 1/4 in, C 0. Printed 1.11 in.
from printed import FOOT_MM, INCH_MM, MEMORY, Case

from beadwright.physics import strain, thermal

MOVED_MM = thermal.length_change_mm(30.0 * FOOT_MM, 6.0e-6 * 1.8, 100.0 / 1.8)


def test_panel_movement():
    Case("A", {}, 0.216, 0.001, MEMORY).check(MOVED_MM / INCH_MM)


def test_joint_width_with_the_tolerance_added():
    width_mm = strain.width_for_opening_mm(MOVED_MM, 0.0, 0.25)
    Case("J in inches", {}, 1.11, 0.01, MEMORY).check(width_mm / INCH_MM + 0.25)
    Case("J in mm", {}, 28.3, 0.1, MEMORY).check(width_mm + 0.25 * INCH_MM)
