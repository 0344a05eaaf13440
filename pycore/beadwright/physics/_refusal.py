"""How a physics function refuses an argument; called only once something is wrong, so that the good path stays cheap."""

from __future__ import annotations


def refusal(name: str, value: object, expected: str) -> ValueError:
    """Error that names the argument, the value that came and what was expected."""
    return ValueError(f"{name} is {value!r}; expected {expected}")
