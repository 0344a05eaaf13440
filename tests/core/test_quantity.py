"""What people type is read exactly, and a wrong text says what was expected."""

import subprocess
import sys
from fractions import Fraction
from pathlib import Path

import pytest

from beadwright import quantity
from beadwright.quantity import INCH, METRIC, parse
from beadwright.working import InputError

READINGS = [
    ("5/8", "length", "in", Fraction(127, 8)),
    ("5/8 in", "length", "mm", Fraction(127, 8)),
    ("12' 6 1/2\"", "length", "in", Fraction(38227, 10)),
    ("12'-6 1/2\"", "length", "in", Fraction(38227, 10)),
    ("12'6\"", "length", "in", Fraction(3810)),
    ("3'-6\"", "length", "in", Fraction(10668, 10)),
    ("12 ft 6 in", "length", "mm", Fraction(3810)),
    ("12' 6", "length", "mm", Fraction(3810)),
    ("9,5 mm", "length", "in", Fraction(19, 2)),
    ("1 1/4 in", "length", "mm", Fraction(127, 4)),
    ("1-1/4 in", "length", "mm", Fraction(127, 4)),
    ("1½\"", "length", "mm", Fraction(381, 10)),
    ("½ in", "length", "mm", Fraction(127, 10)),
    ("0.625", "length", "in", Fraction(127, 8)),
    (".5 in", "length", "mm", Fraction(127, 10)),
    ("0,125 in", "length", "mm", Fraction(127, 40)),
    ("3.2 m", "length", "mm", Fraction(3200)),
    ("3 m 250 mm", "length", "mm", Fraction(3250)),
    ("1 500 mm", "length", "mm", Fraction(1500)),
    ("-12 degC", "temperature", "degC", Fraction(-12)),
    ("−12 °C", "temperature", "degC", Fraction(-12)),
    ("70 degF", "temperature", "degC", Fraction(190, 9)),
    ("14 °F", "temperature", "degC", Fraction(-10)),
    ("9 degF", "temperature_difference", "K", Fraction(5)),
    ("5 K", "temperature_difference", "K", Fraction(5)),
    ("5.5e-6/degF", "expansion", "e-6/K", Fraction(99, 10**7)),
    ("5.5 e-6/degF", "expansion", "e-6/K", Fraction(99, 10**7)),
    ("10.8 × 10⁻⁶/K", "expansion", "e-6/K", Fraction(108, 10**7)),
    ("10.8e-6 1/K", "expansion", "e-6/K", Fraction(108, 10**7)),
    ("10.8", "expansion", "e-6/K", Fraction(108, 10**7)),
    ("12.5 %", "percent", "%", Fraction(1, 8)),
    ("0.5 mm/m", "percent", "%", Fraction(1, 2000)),
    ("3 d", "duration", "h", Fraction(72)),
]  # fmt: skip


@pytest.mark.parametrize(("typed", "kind", "unit", "exact"), READINGS, ids=[row[0] for row in READINGS])
def test_reads_what_people_write(typed, kind, unit, exact):
    reading = parse(typed, kind, unit)
    assert reading.exact == exact
    assert reading.typed == typed
    assert reading.value == float(exact)


REFUSALS = [
    ("", "length", "empty"),
    ("   ", "length", "empty"),
    ("abc", "length", "not-a-number"),
    ("nan", "length", "not-a-number"),
    ("inf mm", "length", "not-a-number"),
    ("--5 mm", "length", "not-a-number"),
    ("1/0 in", "length", "not-a-number"),
    ("34 degC", "length", "wrong-kind"),
    ("5 mm", "temperature", "wrong-kind"),
    ("5 foo", "length", "unknown-unit"),
    ("1,500 mm", "length", "ambiguous-comma"),
    ("1e999 mm", "length", "too-long"),
    ("1" * 30, "length", "too-long"),
    ("x" * 500, "length", "too-long"),
    ("5 mm 3", "length", "one-unit"),
    ("5 in 3 ft", "length", "one-unit"),
    ("5 degC 3", "temperature", "one-unit"),
]  # fmt: skip


@pytest.mark.parametrize(("typed", "kind", "code"), REFUSALS, ids=[f"{row[0][:12]}-{row[2]}" for row in REFUSALS])
def test_refuses_and_says_what_was_expected(typed, kind, code):
    with pytest.raises(InputError) as caught:
        parse(typed, kind, quantity.default_unit(kind, METRIC))
    assert caught.value.code == code
    assert len(caught.value.message) > 20 and "Traceback" not in caught.value.message


def test_the_example_follows_the_units_of_the_user():
    with pytest.raises(InputError) as caught:
        parse("wide", "length", "in", INCH)
    assert "5/8 in" in caught.value.message


def test_one_inch_is_exactly_25_4_mm():
    # Source: international yard and pound agreement, 1959; exact by definition.
    assert quantity.to_core("length", Fraction(1), "in") == Fraction(254, 10)


@pytest.mark.parametrize(("value_mm", "text"), [(15.875, "5/8 in"), (31.75, "1 1/4 in"), (9.5, "0.374 in"), (25.4, "1 in"), (-6.35, "−1/4 in"), (0.0, "0 in")])
def test_inch_lengths_print_as_fractions_only_when_they_are(value_mm, text):
    assert quantity.show_length(value_mm, INCH) == text


@pytest.mark.parametrize(("value_mm", "text"), [(3822.7, "12 ft 6 1/2 in"), (3657.6, "12 ft"), (152.4, "6 in")])
def test_long_lengths_print_in_feet_and_inches(value_mm, text):
    assert quantity.show_span(value_mm, INCH) == text


def test_no_negative_zero_on_a_sheet():
    assert quantity.plain(-0.0001, 1) == "0"


@pytest.mark.parametrize("typed", ["cheap", "one", "e", "1e", "e5", "1_000", "--3", "0x10", "1.2.3", "١٢x", "nan", "inf", ""])
def test_a_plain_number_that_is_none_is_refused_and_never_raises_otherwise(typed):
    """“cheap” once broke the reader: the e was taken for an exponent."""
    with pytest.raises(InputError):
        quantity.parse_number(typed)


def test_the_factors_kept_in_the_file_are_those_of_pint():
    """To renew the file: write `quantity.units_text()` to `pycore/beadwright/units.json`."""
    for kind in quantity.KINDS.values():
        for unit in kind.units:
            assert quantity._factor_and_offset(kind.key, unit.label) == quantity.work_out(kind.key, unit.label)


def test_reading_a_quantity_does_not_build_the_registry():
    """Building pint's registry costs a tablet more than all else at the start."""
    code = "import sys; from beadwright import desk; desk.evaluate({'units': 'inch', 'site': {'summer_air': '90 °F', 'winter_air': '10 °F'}}); print('pint' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, env={"PYTHONPATH": str(Path(quantity.__file__).parents[1]), "PATH": "/usr/bin:/bin"})
    assert done.stdout.strip() == "False"
