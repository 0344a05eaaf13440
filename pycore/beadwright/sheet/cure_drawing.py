"""Drawings of the cure clock: the front over the section, runs and weather on one line of time, a curve over hours."""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil, floor, sqrt
from xml.sax.saxutils import escape

from attrs import frozen

from ..physics.section_solve import Picture

_INK = "#1d2327"
_BEAD = "#b4532a"
_GREY = "#6b7378"
_FONT = "ui-sans-serif, system-ui, sans-serif"

Point = tuple[float, float]


def _n(value: float) -> str:
    text = f"{value:.1f}"
    return "0" if text in ("-0.0", "0.0") else text[:-2] if text.endswith(".0") else text


def _text(x: float, y: float, text: str, size: float, anchor: str = "start", css: str = "bw-text") -> str:
    return f'<text x="{_n(x)}" y="{_n(y)}" class="{css}" font-size="{size:g}" font-family="{_FONT}" text-anchor="{anchor}" fill="{_INK}" stroke="#fbfaf6" stroke-width="4" stroke-linejoin="round" paint-order="stroke">{escape(text)}</text>'


def _line(x1: float, y1: float, x2: float, y2: float, css: str = "bw-fine", weight: float = 0.8, color: str = _INK, dash: str = "") -> str:
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    return f'<line x1="{_n(x1)}" y1="{_n(y1)}" x2="{_n(x2)}" y2="{_n(y2)}" class="{css}" stroke="{color}" stroke-width="{weight:g}"{dashed}/>'


def _run(points: Sequence[Point], css: str, color: str, weight: float, fill: str = "none", *, close: bool = False, opacity: float | None = None) -> str:
    d = "M" + "L".join(f"{_n(x)} {_n(y)}" for x, y in points) + ("Z" if close else "")
    clear = f' fill-opacity="{opacity:g}"' if opacity is not None else ""
    return f'<path d="{d}" class="{css}" fill="{fill}" stroke="{color}" stroke-width="{weight:g}" stroke-linejoin="round"{clear}/>'


def _whole(width: float, height: float, title: str, parts: Sequence[str]) -> str:
    return f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width:.0f} {height:.0f}" role="img" class="bw-drawing"><title>{escape(title)}</title>{"".join(parts)}</svg>'


# ---- the front over the section -----------------------------------------------------------------


def section_lines(picture: Picture, level_mm2: float) -> list[tuple[Point, Point]]:
    """Pieces of the line on which the front stands at a level, in mm.

    The field is taken as its root, which grows evenly with depth, so that straight cuts between nodes are good.
    """
    root = sqrt(level_mm2)
    pieces = []
    for i in range(len(picture.x_mm) - 1):
        for j in range(len(picture.x_mm[0]) - 1):
            ring = ((i, j), (i, j + 1), (i + 1, j + 1), (i + 1, j))
            nodes = [(picture.x_mm[a][b], picture.y_mm[a][b], sqrt(picture.reach_mm2[a][b]) - root) for a, b in ring]
            for corners in ((0, 1, 2), (0, 2, 3)):
                cut = _cut([nodes[corner] for corner in corners])
                if cut is not None:
                    pieces.append(cut)
    return pieces


def _cut(nodes: Sequence[tuple[float, float, float]]) -> tuple[Point, Point] | None:
    """Where a triangle of values is cut by zero."""
    found = []
    for (x1, y1, v1), (x2, y2, v2) in zip(nodes, (*nodes[1:], nodes[0]), strict=True):
        if (v1 < 0.0) != (v2 < 0.0):
            share = v1 / (v1 - v2)
            found.append((x1 + share * (x2 - x1), y1 + share * (y2 - y1)))
    return (found[0], found[1]) if len(found) == 2 else None


def section_svg(picture: Picture, shape: str, is_halved: bool, marks: Sequence[tuple[float, str]], title: str, last_text: str, face_labels: Sequence[tuple[str, bool]]) -> str:
    """Where the front stands at some moments, and the last wet point.

    `marks` are levels in mm2 with their labels; `face_labels` tell each face and whether it is open.
    """
    width, height = 640.0, 420.0
    xs = [x for line in picture.x_mm for x in line]
    ys = [y for line in picture.y_mm for y in line]
    mirrored = is_halved and shape == "hourglass"
    swapped = is_halved and shape == "fillet"
    x_low, x_high = (-max(xs), max(xs)) if mirrored else (min(xs), max(max(xs), max(ys)) if swapped else max(xs))
    y_high = max(max(ys), max(xs)) if swapped else max(ys)
    scale = min(400.0 / max(x_high - x_low, 1e-9), 300.0 / max(y_high, 1e-9))
    left, top = 0.5 * (width - (x_high - x_low) * scale) - 40.0, 56.0

    def at(x: float, y: float) -> Point:
        # a fillet stands in its corner, a butt joint hangs from its front
        down = top + (y_high - y) * scale if shape == "fillet" else top + y * scale
        return left + (x - x_low) * scale, down

    def both(points: Sequence[Point]) -> list[list[Point]]:
        sets = [[at(x, y) for x, y in points]]
        if mirrored:
            sets.append([at(-x, y) for x, y in points])
        if swapped:
            sets.append([at(y, x) for x, y in points])
        return sets

    first, last = picture.x_mm[0], picture.x_mm[-1]
    edge: list[Point] = [(line[0], dy[0]) for line, dy in zip(picture.x_mm, picture.y_mm, strict=True)]
    if shape == "fillet":
        outline = [*edge, *([(y, x) for x, y in reversed(edge)] if swapped else []), (0.0, 0.0)]
    else:
        side = list(zip(last, picture.y_mm[-1], strict=True))
        back = [(line[-1], dy[-1]) for line, dy in zip(reversed(picture.x_mm), reversed(picture.y_mm), strict=True)]
        outline = [*edge, *side, *back]
        outline += [(-x, y) for x, y in reversed(outline)] if mirrored else list(zip(reversed(first), reversed(picture.y_mm[0]), strict=True))
    parts = [_run([at(x, y) for x, y in outline], "bw-bead", _INK, 2.0, _BEAD, close=True)]
    for order, (level, label) in enumerate(marks):
        pieces = section_lines(picture, level)
        if not pieces:
            continue
        d = "".join(f"M{_n(one[0][0])} {_n(one[0][1])}L{_n(one[1][0])} {_n(one[1][1])}" for piece in pieces for one in both(piece))
        parts.append(f'<path d="{d}" class="bw-ink" fill="none" stroke="#ffffff" stroke-width="{1.2 + 0.35 * order:.2f}" stroke-linecap="round"/>')
        x, y = at(*max((point for piece in pieces for point in piece), key=lambda point: (point[0], -point[1]) if shape == "fillet" else (-abs(point[0]), point[1])))
        parts.append(_text(x if shape != "fillet" else x + 8, y - 5, label, 14, "middle" if shape != "fillet" else "start", "bw-num"))
    spots = [(x, y) for line_x, line_y, line_r in zip(picture.x_mm, picture.y_mm, picture.reach_mm2, strict=True) for x, y, r in zip(line_x, line_y, line_r, strict=True) if r >= 0.9999 * picture.levels_mm2[-1]]
    for x, y in (point for one in both(spots[-1:]) for point in one):
        parts.append(f'<circle cx="{_n(x)}" cy="{_n(y)}" r="6" class="bw-ink" fill="#ffffff" stroke="{_INK}" stroke-width="2.5"/>')
    parts.append(_text(20, 28, title, 17))
    parts.append(_text(20, height - 30, last_text, 15))
    parts.append(_text(20, height - 10, "Open: " + (", ".join(label for label, is_open in face_labels if is_open) or "none") + ". Sealed: " + (", ".join(label for label, is_open in face_labels if not is_open) or "none") + ".", 15))
    return _whole(width, height, title, parts)


# ---- runs and weather on one line of time -------------------------------------------------------


@frozen
class Bar:
    """One run on the line of time: its name and its stages (moment, quick end, slow end, label)."""

    name: str
    start_h: float
    stages: tuple[tuple[float, float, float, str], ...]
    beyond: str = ""


def timeline_svg(bars: Sequence[Bar], air: Sequence[tuple[float, float, float]], day_labels: Sequence[tuple[float, str]], degrees: Sequence[tuple[float, str]], title: str, until_h: float) -> str:
    """Weather above, one line a run below; `air` holds moments with air temperature and humidity."""
    width, left, right = 900.0, 170.0, 24.0
    band_top, band_low = 54.0, 164.0
    height = 210.0 + 74.0 * len(bars)
    start = min((bar.start_h for bar in bars), default=0.0)
    start = min(start, air[0][0]) if air else start
    longest = max(until_h - start, 1.0)

    def x_of(hours: float) -> float:
        return left + (width - left - right) * min(1.0, max(0.0, (hours - start) / longest))

    parts = [_text(20, 28, title, 17)]
    for hours, label in day_labels:
        x = x_of(hours)
        parts.append(_line(x, band_top - 8, x, height - 20, "bw-ghost", 0.7, _GREY, "2 4"))
        parts.append(_text(x + 3, band_top - 12, label, 12, "start" if x < width - 60 else "end", "bw-num"))
    shown = [item for item in air if start <= item[0] <= until_h]
    if shown:
        low, high = min(item[1] for item in shown), max(item[1] for item in shown)
        low, high = floor(low / 5.0) * 5.0, ceil((high + 0.1) / 5.0) * 5.0

        def y_of(value: float) -> float:
            return band_low - (value - low) / (high - low) * (band_low - band_top)

        damp = [(x_of(hours), band_low - share * (band_low - band_top)) for hours, _, share in shown]
        parts.append(_run([(damp[0][0], band_low), *damp, (damp[-1][0], band_low)], "bw-ghost", "none", 0.0, _GREY, close=True, opacity=0.15))
        parts.append(_run([(x_of(hours), y_of(value)) for hours, value, _ in shown], "bw-ink", _INK, 1.8))
        for value, label in degrees:
            if low <= value <= high:
                parts.append(_line(left - 6, y_of(value), left, y_of(value), "bw-dim", 1.2))
                parts.append(_text(left - 10, y_of(value) + 5, label, 13, "end", "bw-num"))
        parts.append(_text(20, band_low + 18, "Air (line), humidity (ground)", 13))
    for index, bar in enumerate(bars):
        y = 214.0 + 74.0 * index
        parts.append(_text(20, y + 5, bar.name[:22], 14))
        end = min(until_h, max((stage[0] for stage in bar.stages), default=bar.start_h))
        parts.append(_line(x_of(bar.start_h), y, x_of(end), y, "bw-dim", 2.2))
        parts.append(f'<circle cx="{_n(x_of(bar.start_h))}" cy="{_n(y)}" r="5" class="bw-ink" fill="{_INK}"/>')
        if bar.beyond:
            parts.append(_text(width - right, y + 25, bar.beyond, 12, "end"))
        last_x = [-1e9, -1e9]
        for at, low_h, high_h, label in bar.stages:
            if at > until_h and low_h >= until_h:
                continue
            x = x_of(at)
            if high_h > low_h:
                parts.append(_line(x_of(low_h), y, x_of(high_h), y, "bw-bead", 6.0, _BEAD))
            if at > until_h:
                continue
            row = 0 if x - last_x[0] > 70 else 1
            if row == 1 and x - last_x[1] <= 70:
                parts.append(_line(x, y - 7, x, y + 7, "bw-dim", 1.6))
                continue
            last_x[row] = x
            parts.append(_line(x, y - 9, x, y + 9, "bw-dim", 1.8))
            parts.append(_text(x, y - 14 if row == 0 else y + 25, label, 12, "middle" if x < width - 80 else "end"))
    return _whole(width, height, title, parts)


# ---- one curve over hours -----------------------------------------------------------------------


def curve_svg(points: Sequence[Point], levels: Sequence[tuple[float, str]], title: str, unit: str, across: Sequence[tuple[float, str]], low: float = 0.0) -> str:
    """A curve with level lines; `across` labels the hours."""
    width, height, left, top, bottom = 640.0, 300.0, 76.0, 52.0, 44.0
    x_high = max(points[-1][0], 1e-9)
    x_low = points[0][0]
    y_high = max([value for _, value in points] + [level for level, _ in levels] + [low + 1e-9]) * 1.08
    y_low = min([low, *(value for _, value in points)])
    if y_low < 0.0:
        y_low = min([y_low, *(level for level, _ in levels)]) * 1.08

    def at(x: float, y: float) -> Point:
        return left + (x - x_low) / (x_high - x_low) * (width - left - 24), height - bottom - (y - y_low) / max(y_high - y_low, 1e-12) * (height - top - bottom)

    parts = [_text(20, 28, f"{title}, {unit}", 17)]
    parts.append(_line(*at(x_low, max(0.0, y_low)), *at(x_high, max(0.0, y_low)), "bw-dim", 1.2))
    parts.append(_line(*at(x_low, y_low), *at(x_low, y_high), "bw-dim", 1.2))
    for hours, label in across:
        x, y = at(hours, y_low)
        parts.append(_line(x, y, x, y + 6, "bw-fine"))
        parts.append(_text(x, y + 22, label, 13, "middle", "bw-num"))
    for level, label in levels:
        x1, y1 = at(x_low, level)
        x2, _ = at(x_high, level)
        parts.append(_line(x1, y1, x2, y1, "bw-bead", 1.6, _BEAD, "6 4"))
        parts.append(_text(x2, y1 - 6, label, 13, "end"))
    parts.append(_run([at(x, y) for x, y in points], "bw-ink", _INK, 2.0))
    return _whole(width, height, title, parts)
