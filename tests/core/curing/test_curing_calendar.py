"""The calendar file: read back by an independent reader and by a strict parser, also over a change of the clocks."""

import re
from datetime import UTC, datetime, timedelta
from zoneinfo import ZoneInfo

import pytest
from icalendar import Calendar

from beadwright import desk
from beadwright.curing.clock import Clock, zone_rules
from beadwright.sheet.calendar import Event, calendar_bytes
from jobs import make_job

ZONES = ["Europe/Berlin", "America/New_York", "Australia/Lord_Howe", "Asia/Kolkata", "Europe/Dublin", "America/Sao_Paulo", "Pacific/Apia", "UTC"]
NAME = re.compile(r"^[A-Z][A-Z0-9-]*$")


def content_lines(data):
    """RFC 5545 section 3.1, strictly: CRLF ends, at most 75 octets, folded lines joined; gives (name, parameters, value)."""
    assert data.endswith(b"\r\n")
    physical = data[:-2].split(b"\r\n")
    assert not any(b"\n" in line or b"\r" in line for line in physical)
    assert all(len(line) <= 75 for line in physical), max(physical, key=len)
    joined = []
    for line in physical:
        if line[:1] == b" ":
            joined[-1] += line[1:]
        else:
            joined.append(line)
    found = []
    for line in joined:
        text = line.decode("utf-8")
        head, sign, value = text.partition(":")
        assert sign, text
        name, *parameters = head.split(";")
        assert NAME.match(name), text
        assert all("=" in parameter for parameter in parameters), text
        assert not any(ch < " " for ch in value)
        found.append((name, dict(parameter.split("=", 1) for parameter in parameters), value))
    return found


def strictly(data):
    """Components nest, and each holds what RFC 5545 asks of it exactly once."""
    lines = content_lines(data)
    stack, parts = [], []
    for name, parameters, value in lines:
        if name == "BEGIN":
            stack.append((value, []))
            continue
        if name == "END":
            kind, held = stack.pop()
            assert kind == value
            parts.append((kind, held, [outer for outer, _ in stack]))
            continue
        assert stack, "a line outside every component"
        stack[-1][1].append((name, parameters, value))
    assert not stack and parts[-1][0] == "VCALENDAR"
    for kind, held, outer in parts:
        names = [name for name, _, _ in held]
        once = {"VCALENDAR": ("PRODID", "VERSION"), "VTIMEZONE": ("TZID",), "STANDARD": ("DTSTART", "TZOFFSETFROM", "TZOFFSETTO"), "DAYLIGHT": ("DTSTART", "TZOFFSETFROM", "TZOFFSETTO"), "VEVENT": ("UID", "DTSTAMP", "DTSTART", "SUMMARY", "DURATION")}[kind]
        assert all(names.count(name) == 1 for name in once), (kind, names)
        if kind in ("STANDARD", "DAYLIGHT"):
            assert outer[-1] == "VTIMEZONE"
    return parts


def job_with(when, zone, **joint):
    job = make_job({"width": "12 mm", "neck": "6 mm", "place": "North; face, grid 3\\4"} | joint, sealant={"cure_depth": "2.5 mm"})
    job["cure"] = {"zone": zone, "sealed": [{"id": "r", "name": "Röhre, Ostseite; lang " + "ä" * 60, "joint": "j", "when": when}], "weather": [{"id": "w", "day": when[:10], "least": "15 degC", "most": "25 degC", "humidity": "60 %"}]}
    return job


def at_true(clock_text, zone, hours):
    """The moment some real hours after a clock time, by the standard library."""
    start = datetime.strptime(clock_text, "%Y-%m-%d %H:%M").replace(tzinfo=ZoneInfo(zone))
    return start.astimezone(UTC) + timedelta(hours=hours)


@pytest.mark.parametrize("zone", ZONES)
@pytest.mark.parametrize("when", ["2026-03-27 10:40", "2026-10-23 15:10", "2026-07-01 08:00"])
def test_the_file_is_read_back_with_the_right_moments(zone, when):
    """Runs a few days before each change of the clocks in Europe: stages fall on both sides of it."""
    job = job_with(when, zone)
    data = desk.export(job, "calendar")[2]
    strictly(data)
    events = {event["UID"].split("-")[1]: event for event in Calendar.from_ical(data).walk("VEVENT")}
    stages = {stage["key"]: stage for stage in desk.evaluate(job)["cure"]["runs"]["r"]["stages"] if stage["applies"]}
    assert set(events) == set(stages)
    for key, stage in stages.items():
        moment = events[key]["DTSTART"].dt.astimezone(UTC)
        late = moment - at_true(when, zone, stage["hours"])
        # rounded up to the next quarter of an hour, never earlier
        assert timedelta(seconds=-2) <= late < timedelta(minutes=15, seconds=2), key


@pytest.mark.parametrize("zone", ZONES)
def test_the_zone_block_alone_gives_the_same_moments(zone):
    """A reader that knows no zones of its own must find the right offset from the rules written in the file."""
    clock = Clock(zone, zone_rules(zone))
    base = clock.hours(datetime(2026, 3, 20, 12, 0))
    moments = [base + 24.0 * day for day in range(0, 260, 7)]
    data = calendar_bytes([Event(f"e{index}", at, 15, "x", "", "", base) for index, at in enumerate(moments)], clock, "Test")
    parts = strictly(data)
    rules = []
    for kind, held, _ in parts:
        if kind in ("STANDARD", "DAYLIGHT"):
            values = {name: value for name, _, value in held}
            rules.append((datetime.strptime(values["DTSTART"], "%Y%m%dT%H%M%S"), minutes(values["TZOFFSETFROM"]), minutes(values["TZOFFSETTO"])))
    rules.sort()
    for kind, held, _ in parts:
        if kind != "VEVENT":
            continue
        values = {name: (parameters, value) for name, parameters, value in held}
        parameters, text = values["DTSTART"]
        assert parameters == {"TZID": zone}
        local = datetime.strptime(text, "%Y%m%dT%H%M%S")
        in_force = [after for onset, _, after in rules if onset <= local]
        assert in_force, "no rule before the first event"
        utc = local - timedelta(minutes=in_force[-1])
        index = int(values["UID"][1][1:])
        assert (utc - datetime(1970, 1, 1)) / timedelta(hours=1) == pytest.approx(moments[index], abs=1 / 120)


def minutes(text):
    sign = -1 if text[0] == "-" else 1
    return sign * (int(text[1:3]) * 60 + int(text[3:5]))


def test_an_event_in_the_doubled_hour_is_not_an_hour_off():
    clock = Clock("Europe/Berlin", zone_rules("Europe/Berlin"))
    first = clock.hours(datetime(2026, 10, 25, 2, 30))
    data = calendar_bytes([Event("a", first, 15, "a", "", "", first), Event("b", first + 1.0, 15, "b", "", "", first)], clock, "Test")
    strictly(data)
    found = {str(event["UID"]): event["DTSTART"].dt.astimezone(UTC) for event in Calendar.from_ical(data).walk("VEVENT")}
    assert found["b"] - found["a"] == timedelta(hours=1)


def test_without_a_zone_the_clock_stands_as_it_is():
    data = desk.export(job_with("2026-05-01 10:00", ""), "calendar")[2]
    strictly(data)
    assert b"VTIMEZONE" not in data and b"TZID" not in data
    assert all(event["DTSTART"].dt.tzinfo is None for event in Calendar.from_ical(data).walk("VEVENT"))


def test_texts_come_back_as_they_were_typed():
    events = Calendar.from_ical(desk.export(job_with("2026-05-01 10:00", "Europe/Berlin"), "calendar")[2]).walk("VEVENT")
    assert str(events[0]["LOCATION"]) == "North; face, grid 3\\4"
    assert str(events[0]["SUMMARY"]).startswith("Röhre, Ostseite; lang ääää")


def test_the_same_job_gives_the_same_file_and_ids_are_unique():
    job = job_with("2026-05-01 10:00", "Europe/Berlin")
    first, second = (desk.export(job, "calendar") for _ in range(2))
    assert first == second
    assert first[0].endswith(".ics") and first[1] == "text/calendar"
    ids = [str(event["UID"]) for event in Calendar.from_ical(first[2]).walk("VEVENT")]
    assert len(set(ids)) == len(ids) >= 7
