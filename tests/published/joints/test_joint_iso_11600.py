# Source: ISO 11600 Table 1, amplitudes each way (value from memory); the 12 mm specimen under them is derived:
# class 25 runs from 9.0 to 15.0 mm, 20 from 9.6 to 14.4, 12.5 from 10.5 to 13.5, 7.5 from 11.1 to 12.9.
import pytest
from printed import DERIVED, Case, locator
from typed import at, evaluated, loaded

CASES = [
    Case(f"class {name}, {word}", {"class": f"iso-{name}", "load": load}, 12.0, 0.001, DERIVED)
    for name, least, most in (("25", 9.0, 15.0), ("20", 9.6, 14.4), ("12.5", 10.5, 13.5), ("7.5", 11.1, 12.9))
    for word, load in (("open", (f"{most - 12.0:.1f} mm", "")), ("closed", ("", f"{12.0 - least:.1f} mm")))
]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_specimen_width_is_what_its_amplitude_asks_for(case):
    case.check(at(evaluated(loaded(case.inputs["load"]), sealant={"class": case.inputs["class"]}), "width.required_mm"))
