# Source: ASTM C920 movement classes: values from memory (100/50 = +100 % / -50 %). The widths are derived from the classes.
import pytest
from printed import DERIVED, Case

from beadwright.physics import strain


def test_a_20_mm_joint_of_class_100_50_works_from_10_to_40_mm():
    Case("widest", {}, 40.0, 0.001, DERIVED).check(20.0 + strain.allowed_opening_mm(20.0, 0.0, 1.00))
    Case("narrowest", {}, -0.50, 0.001, DERIVED).check(strain.stretch_fraction(20.0, 10.0 - 20.0, 0.0))


def test_width_for_extension_10_and_compression_6_at_class_100_50():
    widths = strain.width_for_opening_mm(10.0, 0.0, 1.00), strain.width_for_closing_mm(6.0, 0.50)
    Case("12 mm", {}, 12.0, 0.001, DERIVED).check(max(widths))
    assert widths == pytest.approx((10.0, 12.0))
