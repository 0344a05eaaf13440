"""Words of the cure clock: moments, spans of time, faces, troubles and doubts."""

from __future__ import annotations

from math import ceil

from ..curing.clock import Clock
from ..quantity import plain
from . import writing

_DAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
_MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")
QUARTER_H = 0.25

FACE_WORDS = {"front": "front", "back": "back", "side-a": "face of side A", "side-b": "face of side B"}

# key: pointer below the run, code, severity, text; {} takes the value that goes with it
TROUBLES: dict[str, tuple[str, str, str]] = {
    "no-joint": ("joint", "warning", "The joint of this run is not chosen yet."),
    "referred": ("joint", "note", "This joint is referred: {} No clock is shown for it."),
    "no-sealant": ("joint", "warning", "The sealant of this joint is not chosen yet."),
    "dries": ("joint", "note", "{} sets by drying, not by a front: take its times from the data sheet."),
    "no-rate": ("joint", "warning", "No rate is known for {}: enter the depth cured after 24 h at the sealant, or a cut test here."),
    "no-path": ("front", "error", "No moisture path: the front is covered and no other face breathes, so a one-part sealant may never cure. Open the front, or use a two-part sealant."),
    "not-judged": ("joint", "warning", "The joint is not complete yet, so the size of its bead is not known."),
    "no-legs": ("leg_a", "warning", "A fillet needs both legs."),
    "no-time": ("when", "warning", "Enter when it was sealed, or some days of weather to plan by."),
    "no-room": ("place", "warning", "It cures in the room: enter the air and humidity of the room."),
    "no-figures": ("joint", "warning", "This sealant is two-part: enter its pot life and cure time at one or two temperatures."),
}

DOUBTS: dict[str, tuple[str, str]] = {
    "frost": ("warning", "Frost is in this weather, down to {}: cure is counted as stopped then. Ice also breaks the bond."),
    "cold": ("warning", "It gets as cold as {}: below 4 °C (39 °F) cure is slow and uncertain."),
    "hot": ("warning", "It gets as hot as {}: above 40 °C (104 °F) skin forms fast and bubbles may follow."),
    "dry": ("warning", "Humidity falls to {}: below 30 % cure is slow and uncertain."),
    "deep": ("warning", "The last point is as far as {} of straight depth, from one face: beyond 12 mm (1/2 in) the inside may stay soft for very long."),
    "never": ("warning", "In this weather it would not cure through within three years."),
    "indoors": ("note", "It cures in the air of the room, taken as steady: movement with the weather is not counted."),
    "no-weather": ("note", "No weather is given: 23 °C (73 °F) and 50 % humidity are taken."),
    "beyond-weather": ("note", "The weather given does not reach over the whole cure; outside it {}."),
    "no-numpy": ("note", "Only the throat is reckoned until numpy has loaded; the true section takes longer where a rod stands behind the bead."),
    "outside-figures": ("warning", "{} is outside the temperatures of the figures entered: the answer is stretched."),
    "rule-of-thumb": ("note", "Only one temperature is given: twice as fast for each 10 K is taken, a rule of thumb."),
}
AFTER_WORDS = {"mean": "the mean of the days given goes on", "last": "the last day given repeats", "reference": "23 °C and 50 % humidity are taken"}

ROOM_TROUBLES = {
    "no-room": "Length, width and height of the room are needed.",
    "no-sealant": "Choose the sealant, or the joint, that is used in this room.",
    "nothing-known": "No by-product is known for this family of sealant; see its safety data sheet.",
    "wrong-figures": "A figure of the room is missing or wrong; see the marked fields.",
    "no-cure": "In this air the bead does not cure, so nothing comes off that could be reckoned.",
}


def doubt(key: str, value: float | None, system: str, after: str) -> dict[str, str]:
    """A doubt as a note."""
    severity, text = DOUBTS[key]
    shown = ""
    if key in ("frost", "cold", "hot", "outside-figures") and value is not None:
        shown = writing.temperature(value, system)
    elif key == "dry" and value is not None:
        shown = writing.percent(value)
    elif key == "deep" and value is not None:
        shown = writing.length(round(value, 1), system)
    elif key == "beyond-weather":
        shown = AFTER_WORDS[after]
    return {"severity": severity, "key": key, "text": text.format(shown)}


def later(hours: float) -> float:
    """A moment rounded to the next quarter of an hour, never earlier."""
    return ceil(hours / QUARTER_H - 1e-6) * QUARTER_H


def moment(hours: float | None, clock: Clock, *, exact: bool = False) -> str:
    """A moment to read: weekday, day, clock; rounded to the next quarter of an hour unless it was typed."""
    if hours is None:
        return "not within three years"
    local = clock.local(hours if exact else later(hours))
    return f"{_DAYS[local.weekday()]} {local.day} {_MONTHS[local.month - 1]} {local.year}, {local:%H:%M}"


def short_moment(hours: float | None, clock: Clock) -> str:
    """A moment without its year."""
    if hours is None:
        return "–"
    local = clock.local(later(hours))
    return f"{local.day} {_MONTHS[local.month - 1]} {local:%H:%M}"


def duration(hours: float | None) -> str:
    """A span of time in the words of a site: minutes, hours, days or weeks."""
    if hours is None:
        return "over three years"
    if hours < 1.0:
        return f"{plain(max(1.0, round(hours * 60.0)), 0)} min"
    if hours < 10.0:
        return f"{plain(hours, 1)} h"
    if hours < 48.0:
        return f"{plain(hours, 0)} h"
    if hours < 24.0 * 60.0:
        return f"{plain(hours / 24.0, 1)} d"
    return f"{plain(hours / 24.0, 0)} d"


def span(low: float | None, high: float | None) -> str:
    """From a quick to a slow end."""
    return f"{duration(low)} to {duration(high)}"


def between(low: float | None, high: float | None) -> str:
    """The same in a sentence."""
    return f"between {duration(low)} and {duration(high)}"
