# Dew point by Magnus with the WMO constants (read at ing-moehn.de); surface at least 3 K over it (read for paint, common practice for
# sealant). Cases made with the closed form (library): surface 8 at 10 degC 85 %, 16 at 20/70, 5 at 5/90 fail; 30 at 25/60 passes.
import pytest
from printed import LIBRARY, Case, locator
from typed import evaluated

ROWS = [("8", "10", "85", 7.59, 0.41, False), ("16", "20", "70", 14.36, 1.64, False), ("5", "5", "90", 3.50, 1.50, False), ("30", "25", "60", 16.69, 13.31, True)]
CASES = [
    Case(f"surface {surface}, air {air}, {damp} %: {part}", {"row": (surface, air, damp, passed), "part": part}, value, 0.01, LIBRARY)
    for surface, air, damp, dew, over, passed in ROWS
    for part, value in (("dew point", dew), ("margin", over))
]
MORE = [("5", "80", 1.834), ("20", "50", 9.255), ("23", "50", 12.014), ("35", "70", 28.705), ("0", "90", -1.445)]
CASES += [Case(f"air {air}, {damp} %: dew point", {"row": ("40", air, damp, True), "part": "dew point"}, dew, 0.001, LIBRARY) for air, damp, dew in MORE]


@pytest.mark.parametrize("case", CASES, ids=locator)
def test_dew_point_at_the_face(case):
    surface, air, damp, passed = case.inputs["row"]
    face = evaluated({"face": {"width": "20 mm", "surface": f"{surface} degC", "air": f"{air} degC", "humidity": f"{damp} %"}})["face"]
    case.check(face["dew_point_c"] if case.inputs["part"] == "dew point" else float(surface) - face["dew_point_c"])
    gate = next(check for check in face["checks"] if check["key"] == "dew")
    assert gate["pass"] is passed
    assert passed or face["verdict"] != "seal"
