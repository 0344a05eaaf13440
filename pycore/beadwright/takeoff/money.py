"""Money: exact decimals in, exact decimals out, in whatever currency; nothing is ever a binary float."""

from __future__ import annotations

from decimal import ROUND_HALF_EVEN, Decimal
from fractions import Fraction

from ..quantity import parse_number
from ..working import InputError

MAX_PLACES = 8


def parse_money(raw: object) -> Fraction:
    """A price as typed.

    Raises
    ------
    InputError
        When it is not a number or no plain decimal, such as a third.
    """
    value = parse_number(str(raw))
    if (value * 10**MAX_PLACES).denominator != 1:
        raise InputError("not-a-price", "Write a price as a plain decimal, such as 13.40.")
    return value


def money_text(value: Fraction) -> str:
    """The exact amount, with two decimals or as many as it has; no currency."""
    places = 2
    while (value * 10**places).denominator != 1 and places < 12:
        places += 1
    number = Decimal(value.numerator) / Decimal(value.denominator)
    return str(number.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_EVEN))


def hundredths(value: float) -> Fraction:
    """A number of hours as it is charged: to a hundredth."""
    return Fraction(round(value * 100), 100)
