"""The air of a room: limits by region, what keeps them, and that released mass is stoichiometry."""

import copy
import json

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from beadwright import desk
from beadwright.curing import air
from beadwright.physics import room_air
from jobs import issues_at, make_job

ROOM = {"length": "4 m", "width": "3 m", "height": "2.5 m", "air_change": "0.5", "mixing": "1", "air": "23 degC", "humidity": "50 %", "sealant": "s", "joint": "j", "packages": "1", "package": "300 ml", "spread": "0 h"}
changes = st.floats(0.05, 20.0)


def room_job(room=None, sealant=None, region="north-america"):
    job = make_job({"width": "6 mm", "neck": "6 mm", "tooling": "flush", "rod": "tape"}, sealant={"family": "acetoxy-silicone", "class": "iso-20"} | (sealant or {}))
    job["region"] = region
    job["cure"] = {"room": ROOM | (room or {})}
    return job


def room_of(job):
    answer = desk.evaluate(copy.deepcopy(job))
    json.dumps(answer, allow_nan=False)
    return answer["cure"]["room"]


def test_the_worked_cartridge():
    """12.5147 g in 30 m3 at 0.5 per hour, through in 138.24 h: peak 27.148 at 1.708 h, shift 21.308 (scipy)."""
    found = air.exposure(30.0, 0.5, air.Source(12.5147, 138.24, 0.0))
    assert found.peak_mg_m3 == pytest.approx(27.148, abs=0.0006)
    assert found.peak_h == pytest.approx(1.708, abs=0.0005)
    assert found.shift_mg_m3 == pytest.approx(21.308, abs=0.0006)


def test_the_room_of_a_job_matches_the_same_case():
    """As above; the quick end of the rate must be k = 2.5: 2.0 and 25 % up."""
    job = room_job({"share": "5 %"}, sealant={"cure_depth": "2 mm"})
    job["cure"]["uncertainty"] = "25 %"
    room = room_of(job)
    assert room["room_m3"] == pytest.approx(30.0)
    assert room["mass_g"] == pytest.approx(12.515, abs=0.0006)
    assert room["through_h"] == pytest.approx(138.24, rel=1e-6)
    assert room["peak_mg_m3"] == pytest.approx(27.148, abs=0.002)
    assert room["peak_ppm"] == pytest.approx(11.05, abs=0.005)


def test_limits_follow_the_region():
    names = {region: {item["authority"] for item in room_of(room_job(region=region))["limits"]} for region in ("north-america", "europe", "germany", "uk", "other")}
    assert {"OSHA PEL", "NIOSH REL", "ACGIH TLV"} == names["north-america"]
    assert names["uk"] == {"UK WEL"}
    assert all(names.values())


def test_oxime_is_far_over_the_german_limit():
    """The safety body's finding, in direction: one cartridge, about 29 times 1 mg/m3 at the peak for a share of 5 %."""
    room = room_of(room_job({"share": "5 %"}, sealant={"family": "oxime-silicone", "class": "iso-20", "cure_depth": "2.5 mm"}, region="germany"))
    assert room["agent"] == "meko"
    assert room["limits"][0]["found_mg_m3"] > 10.0 * room["limits"][0]["limit_mg_m3"]
    assert any(note["key"] == "meko" for note in room["notes"])


@pytest.mark.parametrize("span", ["8h", "15min", "ceiling"])
@pytest.mark.parametrize("spread", [0.0, 3.0])
def test_the_air_change_that_keeps_a_limit_keeps_it(span, spread):
    source = air.Source(12.5, 100.0, spread)
    needed = air.changes_that_keep(20.0, source, span, 10.0)
    assert air.exposure(20.0, needed, source).of(span) <= 10.0
    assert air.exposure(20.0, 0.9 * needed, source).of(span) > 10.0


def test_the_packages_that_keep_a_limit_keep_it():
    room = room_of(room_job())
    most = min(item["packages"] for item in room["limits"])
    again = room_of(room_job({"packages": f"{most:.6f}"}))
    assert all(item["found_mg_m3"] <= item["limit_mg_m3"] * 1.0001 for item in again["limits"])


@settings(max_examples=40, deadline=None)
@given(grams=st.floats(0.1, 50.0), through=st.floats(0.5, 400.0), n=changes, spread=st.sampled_from([0.0, 2.0, 8.0]))
def test_released_mass_equals_stoichiometry(grams, through, n, spread):
    """What leaves with the air and what is left in the room add up to all that was set free."""
    source = air.Source(grams, through, spread)
    end = through + spread + 40.0 / n
    gone = n * 25.0 * air._mean(0.0, end, 25.0, n, source) * end
    left = 25.0 * air.concentration_mg_m3(end, 25.0, n, source)
    assert gone + left == pytest.approx(1000.0 * grams, rel=1e-6)


@pytest.mark.parametrize("spread", [0.0, 4.0])
def test_the_mean_is_the_integral(spread):
    source = air.Source(9.0, 60.0, spread)
    area, _ = quad(lambda t: air.concentration_mg_m3(t, 25.0, 1.3, source), 0.0, 8.0, limit=400, points=source.starts())
    assert air._mean(0.0, 8.0, 25.0, 1.3, source) == pytest.approx(area / 8.0, rel=1e-4)


@settings(max_examples=40, deadline=None)
@given(n=changes, more=st.floats(1.01, 4.0), spread=st.sampled_from([0.0, 3.0]))
def test_more_air_is_never_worse(n, more, spread):
    source = air.Source(12.0, 90.0, spread)
    few, many = air.exposure(25.0, n, source), air.exposure(25.0, n * more, source)
    for span in ("8h", "15min", "ceiling"):
        assert many.of(span) <= few.of(span) * (1.0 + 1e-6)
    assert few.shift_mg_m3 <= few.short_mg_m3 * (1.0 + 1e-6) <= few.peak_mg_m3 * (1.0 + 1e-5)


def test_spreading_the_work_lowers_the_peak():
    assert air.exposure(25.0, 1.0, air.Source(12.0, 90.0, 6.0)).peak_mg_m3 < air.exposure(25.0, 1.0, air.Source(12.0, 90.0, 0.0)).peak_mg_m3


def test_a_tight_room_keeps_it_all():
    found = air.exposure(30.0, 0.0, air.Source(12.5147, 138.24, 0.0))
    assert found.peak_mg_m3 == pytest.approx(417.16, rel=1e-3)
    assert found.peak_h == pytest.approx(138.24)


@pytest.mark.parametrize(("room", "place"), [({"length": "0 m"}, "length"), ({"height": "-2 m"}, "height"), ({"humidity": "140 %"}, "humidity"), ({"mixing": "0"}, "mixing"), ({"packages": "-1"}, "packages")])
def test_a_room_of_nothing_is_refused_in_words(room, place):
    job = room_job(room)
    assert issues_at(job, f"/cure/room/{place}")
    answer = room_of(job)
    assert answer["trouble"] is not None or place == "humidity"
    assert answer["answers"] == [] or answer["trouble"] is None


def test_no_air_change_and_no_package_are_answered():
    assert room_of(room_job({"air_change": "0"}))["peak_mg_m3"] > 0
    none = room_of(room_job({"packages": "0"}))
    assert none["peak_mg_m3"] == 0.0
    assert none["answers"][0]["tone"] == "ok"


def test_polyurethane_gives_carbon_dioxide_and_the_isocyanate_warning():
    room = room_of(room_job(sealant={"family": "polyurethane-1k", "class": "iso-25"}))
    assert room["agent"] == "carbon-dioxide"
    assert any(note["key"] == "isocyanate" for note in room["notes"])


def test_a_family_without_figures_says_so():
    assert room_of(room_job(sealant={"family": "butyl", "class": "iso-7.5"}))["trouble"]["code"] == "nothing-known"


def test_it_is_called_a_screening():
    room = room_of(room_job())
    assert any("screening" in note["text"].lower() for note in room["notes"])
    assert "Screening only" in room["answers"][0]["detail"]


def test_share_released_follows_the_front():
    assert room_air.released_share_fraction(34.56, 138.24) == pytest.approx(0.5)
