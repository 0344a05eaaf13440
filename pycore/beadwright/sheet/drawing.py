"""The joint's section, drawn at true proportion as SVG.

All geometry is worked out here in millimetres and turned to drawing units by one scale, so
that width, depth and movement keep their proportion. Only presentation attributes and
classes are used; every text is escaped.
"""

from __future__ import annotations

import math
from xml.sax.saxutils import escape

from attrs import frozen

from ..physics import strain

CANVAS_W, CANVAS_H = 640.0, 430.0
_TOP = 96.0
_INK = "#1d2327"
_FONT = "ui-sans-serif, system-ui, sans-serif"


@frozen
class Section:
    """What a section drawing shows. Lengths in mm; texts ready to print."""

    kind: str
    width_mm: float
    neck_mm: float
    tool_sag_mm: float
    rod_sag_mm: float
    rod_mm: float | None
    has_tape: bool
    change_mm: float = 0.0
    shear_mm: float = 0.0
    largest_width_mm: float = 0.0
    width_text: str = ""
    neck_text: str = ""
    bond_text: str = ""
    rod_text: str = ""
    label_a: str = ""
    label_b: str = ""
    title: str = ""


def section_svg(section: Section) -> str:
    """The whole drawing as one SVG element."""
    parts = _lap(section) if section.kind == "lap" else _butt(section)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {CANVAS_W:.0f} {CANVAS_H:.0f}" role="img" class="bw-drawing">'
        f"<title>{escape(section.title)}</title>{''.join(parts)}</svg>"
    )


# ---- pieces -----------------------------------------------------------------------------------


def _n(value: float) -> str:
    text = f"{value:.1f}"
    return text[:-2] if text.endswith(".0") else text


def _line(x1: float, y1: float, x2: float, y2: float, css: str, weight: float = 1.0, color: str = _INK) -> str:
    return f'<line x1="{_n(x1)}" y1="{_n(y1)}" x2="{_n(x2)}" y2="{_n(y2)}" class="{css}" stroke="{color}" stroke-width="{weight:g}"/>'


def _path(d: str, css: str, fill: str, weight: float = 1.6) -> str:
    return f'<path d="{d}" class="{css}" fill="{fill}" stroke="{_INK}" stroke-width="{weight:g}" stroke-linejoin="round"/>'


def _text(x: float, y: float, text: str, css: str, size: float, anchor: str = "middle") -> str:
    return f'<text x="{_n(x)}" y="{_n(y)}" class="{css}" font-size="{size:g}" font-family="{_FONT}" text-anchor="{anchor}" fill="{_INK}" stroke="#fbfaf6" stroke-width="5" stroke-linejoin="round" paint-order="stroke">{escape(text)}</text>'


def _hatch(x1: float, y1: float, x2: float, y2: float, css: str, step: float, leaning: int) -> str:
    """45° hatching of a rectangle as one path, clipped by arithmetic."""
    height = y2 - y1
    pieces = []
    start = x1 - height
    count = int((x2 - start) / step) + 1
    for index in range(1, count + 1):
        foot = start + index * step
        low, high = max(foot, x1), min(foot + height, x2)
        if high - low < 2:
            continue
        if leaning > 0:
            pieces.append(f"M{_n(low)} {_n(y2 - (low - foot))}L{_n(high)} {_n(y2 - (high - foot))}")
        else:
            pieces.append(f"M{_n(low)} {_n(y1 + (low - foot))}L{_n(high)} {_n(y1 + (high - foot))}")
    return f'<path d="{"".join(pieces)}" class="{css}" fill="none" stroke="#6b7378" stroke-width="0.7"/>'


def _slab(x1: float, y1: float, x2: float, y2: float, css: str, step: float, leaning: int, edges: str) -> list[str]:
    """A cut element: ground, hatching, and the edges that are real (l, r, t, b)."""
    parts = [
        f'<rect x="{_n(x1)}" y="{_n(y1)}" width="{_n(x2 - x1)}" height="{_n(y2 - y1)}" class="bw-ground" fill="#f4f1e8"/>',
        _hatch(x1, y1, x2, y2, css, step, leaning),
    ]
    ends = {"l": (x1, y1, x1, y2), "r": (x2, y1, x2, y2), "t": (x1, y1, x2, y1), "b": (x1, y2, x2, y2)}
    parts += [_line(*ends[edge], "bw-ink", 2.2) for edge in edges]
    return parts


def _arc(x1: float, y1: float, x2: float, y2: float, sag: float) -> str:
    """Path piece from the current point to (x2, y2) whose middle lies `sag` below the chord's middle."""
    return f"Q{_n((x1 + x2) / 2)} {_n((y1 + y2) / 2 + 2 * sag)} {_n(x2)} {_n(y2)}"


def _across(x1: float, x2: float, y: float, text: str, witness_from: float) -> list[str]:
    """A horizontal dimension with witness lines and slashes."""
    parts = [_line(x1, witness_from, x1, y - 7, "bw-fine", 0.8), _line(x2, witness_from, x2, y - 7, "bw-fine", 0.8)]
    reach = 26.0 if x2 - x1 < 60 else 0.0
    parts.append(_line(x1 - reach - 8, y, x2 + reach + 8, y, "bw-dim", 1.0))
    parts += [_line(x - 5, y + 5, x + 5, y - 5, "bw-dim", 1.8) for x in (x1, x2)]
    parts.append(_text((x1 + x2) / 2, y - 11, text, "bw-num", 21))
    return parts


def _down(x: float, y1: float, y2: float, text: str, witness_to: float, side: int) -> list[str]:
    """A vertical dimension; the text stands beside it on the given side (−1 left, 1 right)."""
    parts = [_line(witness_to, y, x + 7 * side, y, "bw-fine", 0.8) for y in (y1, y2)]
    parts.append(_line(x, y1 - 8, x, y2 + 8, "bw-dim", 1.0))
    parts += [_line(x - 5, y + 5, x + 5, y - 5, "bw-dim", 1.8) for y in (y1, y2)]
    parts.append(_text(x + 12 * side, (y1 + y2) / 2 + 6, text, "bw-num", 19, "start" if side > 0 else "end"))
    return parts


# ---- butt joint -------------------------------------------------------------------------------


def _butt(section: Section) -> list[str]:
    width, depth = section.width_mm, section.neck_mm
    now = max(0.05 * width, width + section.change_mm)
    sag = strain.face_sag_mm(width, depth, min(max(section.change_mm, -0.6 * width), 1.9 * width)) if section.change_mm else 0.0
    bond = depth + section.tool_sag_mm + section.rod_sag_mm
    tool = min(section.tool_sag_mm + sag, 0.48 * bond)
    crown = min(section.rod_sag_mm + sag, max(0.0, bond - tool - 0.04 * bond))
    rod_height = 0.0
    if section.rod_mm:
        rod_height = math.pi / 4 * section.rod_mm**2 / now
    # The scale depends on nothing that moves, so that the frames of one joint can be compared.
    deep = bond + (section.rod_mm or 0.5 * width)
    widest = max(section.largest_width_mm, width)
    scale = min((CANVAS_H - _TOP - 40) / deep, 330.0 / widest)
    middle = CANVAS_W / 2
    left, right = middle - now * scale / 2, middle + now * scale / 2
    top, bottom = _TOP, CANVAS_H - 34
    parts = _slab(18, top, left, bottom, "bw-hatch-a", 13, 1, "rt")
    parts += _slab(right, top, CANVAS_W - 18, bottom, "bw-hatch-b", 13, -1, "lt")
    back = top + bond * scale
    tool_px, crown_px = tool * scale, crown * scale
    if section.rod_mm:
        rod_bottom = min(back - crown_px + rod_height * scale, bottom - 2)
        side_bottom = min(max(back, rod_bottom - max(crown_px, 0.18 * now * scale)), bottom - 4)
        rod = f"M{_n(left)} {_n(back)}{_arc(left, back, right, back, -crown_px)}L{_n(right)} {_n(side_bottom)}{_arc(right, side_bottom, left, side_bottom, rod_bottom - side_bottom)}Z"
        parts.append(_path(rod, "bw-rod", "#ffffff", 1.2))
        parts.append(_text(middle, min((back - crown_px + rod_bottom) / 2 + 7, bottom - 12), section.rod_text, "bw-rod-text", 16))
    elif section.has_tape:
        parts.append(_path(f"M{_n(left)} {_n(back)}H{_n(right)}V{_n(back + 4)}H{_n(left)}Z", "bw-rod", "#ffffff", 1.2))
        parts.append(_text(middle, back + 24, section.rod_text, "bw-text", 16))
    bead = f"M{_n(left)} {_n(top)}{_arc(left, top, right, top, tool_px)}L{_n(right)} {_n(back)}{_arc(right, back, left, back, -crown_px)}Z"
    parts.append(_path(bead, "bw-bead", "#b4532a", 2.0))
    if section.change_mm:
        half = width * scale / 2
        for x in (middle - half, middle + half):
            parts.append(f'<line x1="{_n(x)}" y1="{_n(top - 12)}" x2="{_n(x)}" y2="{_n(bottom)}" class="bw-ghost" stroke="{_INK}" stroke-width="1" stroke-dasharray="3 5"/>')
    parts += _across(left, right, 44, section.width_text, top - 4)
    neck_top, neck_bottom = top + tool_px, back - crown_px
    neck_x = right + 84
    parts += _down(neck_x, neck_top, neck_bottom, section.neck_text, middle, 1)
    if bond * scale > 24 and section.bond_text:
        parts += _down(left - 64, top, back, section.bond_text, left - 3, -1)
    parts.append(_text(22, CANVAS_H - 10, section.label_a, "bw-text", 16, "start"))
    parts.append(_text(CANVAS_W - 22, CANVAS_H - 10, section.label_b, "bw-text", 16, "end"))
    return parts


# ---- lap joint --------------------------------------------------------------------------------


def _lap(section: Section) -> list[str]:
    thick, cover = section.width_mm, section.neck_mm
    shear = section.shear_mm
    scale = min(150.0 / thick, 320.0 / (cover + 2 * abs(shear) + 1e-9))
    gap = thick * scale
    middle_y = 228.0
    upper, lower = middle_y - gap / 2, middle_y + gap / 2
    half, slip = cover * scale / 2, shear * scale / 2
    middle = CANVAS_W / 2
    parts = _slab(18, upper - 74, middle + half + 40 - slip, upper, "bw-hatch-a", 13, 1, "trb")
    parts += _slab(middle - half - 40 + slip, lower, CANVAS_W - 18, lower + 74, "bw-hatch-b", 13, -1, "tlb")
    bead = (
        f"M{_n(middle - half - slip)} {_n(upper)}L{_n(middle + half - slip)} {_n(upper)}"
        f"L{_n(middle + half + slip)} {_n(lower)}L{_n(middle - half + slip)} {_n(lower)}Z"
    )
    parts.append(_path(bead, "bw-bead", "#b4532a", 2.0))
    x = CANVAS_W - 150
    parts += _down(x, upper, lower, section.width_text, middle + half + abs(slip) + 6, 1)
    parts += _across(middle - half - slip, middle + half - slip, 60, section.neck_text, upper - 76)
    parts.append(_text(22, CANVAS_H - 10, section.label_a, "bw-text", 16, "start"))
    parts.append(_text(CANVAS_W - 22, CANVAS_H - 10, section.label_b, "bw-text", 16, "end"))
    return parts
