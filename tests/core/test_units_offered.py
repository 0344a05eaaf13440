"""Every unit that a form offers, every default and every example is one that the reader reads."""

import pytest

from beadwright import desk, quantity
from beadwright.fields import GROUPS

FIELDS = [(group.key, item) for group in GROUPS for item in group.fields if item.units]


@pytest.mark.parametrize("system", ["metric", "inch"])
@pytest.mark.parametrize(("group", "item"), FIELDS, ids=[f"{group}-{item.key}" for group, item in FIELDS])
def test_offered_units_defaults_and_examples_are_read(group, item, system):
    shown = next(field for part in desk.forms()["groups"] if part["key"] == group for field in part["fields"] if field["key"] == item.key)
    for label, unit in zip(shown["units"][system], item.units_for(system), strict=True):
        reading = quantity.parse(f"7 {label}", item.kind, unit)
        assert reading.unit == unit and not reading.is_bare
    texts = [item.default_for(system), item.example if isinstance(item.example, str) else item.example.get(system)]
    for text in filter(None, texts):
        assert not quantity.parse(text, item.kind, item.units_for(system)[0]).is_bare, text
