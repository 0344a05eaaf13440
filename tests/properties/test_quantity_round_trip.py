"""Parse and print are each other's inverse for every kind, unit and fraction."""

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st

from beadwright import quantity
from beadwright.quantity import KINDS, parse
from beadwright.working import InputError

UNITS = [(kind.key, unit.label) for kind in KINDS.values() for unit in kind.units]


@given(st.sampled_from(UNITS), st.integers(-10**6, 10**6), st.sampled_from([1, 2, 3, 4, 8, 10, 16, 32, 64, 100, 1000]))
def test_exact_text_is_read_back_exactly(place, top, bottom):
    kind, unit = place
    value = quantity.to_core(kind, Fraction(top, bottom), unit)
    assert parse(quantity.exact_text(value, kind, unit), kind, unit).exact == value


@given(st.integers(0, 40), st.integers(0, 11), st.integers(0, 31))
def test_feet_inches_and_fractions(feet, inches, part):
    typed = f"{feet}' {inches} {part}/32\""
    assert parse(typed, "length", "in").exact == (feet * 12 + inches + Fraction(part, 32)) * Fraction(254, 10)


@given(st.integers(0, 4000))
def test_printed_inch_fractions_are_read_back(units):
    value = units * Fraction(254, 320)
    assert parse(quantity.show_length(float(value), quantity.INCH), "length", "mm").exact == value


@given(st.integers(-900, 9000))
def test_a_decimal_comma_is_a_decimal_point(tenths):
    with_point = f"{tenths / 10:.1f} mm"
    assert parse(with_point.replace(".", ","), "length", "mm").exact == parse(with_point, "length", "mm").exact


@given(st.text(max_size=100), st.sampled_from(sorted(KINDS)))
def test_any_text_is_read_or_refused_in_words(text, kind):
    try:
        reading = parse(text, kind, quantity.default_unit(kind, quantity.METRIC))
    except InputError as error:
        assert error.code and error.message
    else:
        assert reading.value == reading.value and abs(reading.value) != float("inf")


@given(st.text(alphabet="0123456789 ./,-+'\"einftmdgCFKh%×⁻½", max_size=24), st.sampled_from(sorted(KINDS)))
def test_texts_that_look_like_quantities_are_read_or_refused_in_words(text, kind):
    test_any_text_is_read_or_refused_in_words.hypothesis.inner_test(text, kind)
