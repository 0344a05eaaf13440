"""Bars of where the volume goes, as SVG: one bar an order, its net, its waste, and what is left over."""

from __future__ import annotations

from collections.abc import Sequence
from xml.sax.saxutils import escape

from attrs import frozen

_WIDTH, _ROW, _TOP, _BOTTOM = 640.0, 46.0, 44.0, 14.0
_LEFT, _RIGHT = 16.0, 16.0
_BAR_FROM, _BAR_TO = 16.0, 520.0
_INK = "#1d2327"
_FONT = "ui-sans-serif, system-ui, sans-serif"
_MOST_BARS = 14


@frozen
class Bar:
    """One bar: label, the three lengths that make it up, and the figure printed at its end."""

    label: str
    net: float
    waste: float
    left: float
    text: str

    @property
    def whole(self) -> float:
        """The bar's full length."""
        return self.net + self.waste + self.left


def bars_svg(bars: Sequence[Bar], title: str, rest_text: str = "") -> str:
    """All bars on one scale, the longest first; those past the fourteenth are one bar that says so."""
    ordered = sorted(bars, key=lambda bar: (-bar.whole, bar.label))
    shown = ordered[:_MOST_BARS]
    if len(ordered) > _MOST_BARS:
        rest = ordered[_MOST_BARS - 1 :]
        shown = [*ordered[: _MOST_BARS - 1], Bar(f"{len(rest)} more", sum(bar.net for bar in rest), sum(bar.waste for bar in rest), sum(bar.left for bar in rest), rest_text)]
    height = _TOP + _ROW * max(1, len(shown)) + _BOTTOM
    longest = max((bar.whole for bar in shown), default=0.0) or 1.0
    scale = (_BAR_TO - _BAR_FROM) / longest
    parts = [f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {_WIDTH:.0f} {height:.0f}" role="img" class="bw-drawing"><title>{escape(title)}</title>']
    parts += _legend()
    for index, bar in enumerate(shown):
        parts += _bar(bar, _TOP + index * _ROW, scale)
    parts.append("</svg>")
    return "".join(parts)


def _n(value: float) -> str:
    return f"{value:.1f}".removesuffix(".0")


def _text(x: float, y: float, text: str, css: str, size: float, anchor: str = "start") -> str:
    return f'<text x="{_n(x)}" y="{_n(y)}" class="{css}" font-size="{size:g}" font-family="{_FONT}" text-anchor="{anchor}" fill="{_INK}">{escape(text)}</text>'


def _piece(x: float, y: float, width: float, height: float, sort: str) -> list[str]:
    """One part of a bar. Told apart by filling: solid, hatched, empty; never by colour alone."""
    if width < 0.05:
        return []
    fill, css = {"net": ("#b4532a", "bw-bead"), "waste": ("#ffffff", "bw-ground"), "left": ("#ffffff", "bw-ground")}[sort]
    dash = ' stroke-dasharray="4 3"' if sort == "left" else ""
    parts = [f'<rect x="{_n(x)}" y="{_n(y)}" width="{_n(width)}" height="{_n(height)}" class="{css}" fill="{fill}" stroke="{_INK}" stroke-width="1.2"{dash}/>']
    if sort == "waste":
        lines = "".join(_stroke(x, y, width, height, foot) for foot in range(6, int(width + height), 6))
        parts.append(f'<path d="{lines}" class="bw-hatch-a" fill="none" stroke="{_INK}" stroke-width="0.8"/>')
    return parts


def _stroke(x: float, y: float, width: float, height: float, foot: float) -> str:
    """One 45° line inside a rectangle, from its lower or right edge up to its left or upper one."""
    x1, y1 = (foot, height) if foot <= width else (width, height - (foot - width))
    x2, y2 = (foot - height, 0.0) if foot >= height else (0.0, height - foot)
    return f"M{_n(x + x1)} {_n(y + y1)}L{_n(x + x2)} {_n(y + y2)}"


def _legend() -> list[str]:
    parts = []
    for x, sort, word in ((_LEFT, "net", "in the joint"), (_LEFT + 150, "waste", "waste"), (_LEFT + 260, "left", "left over")):
        parts += _piece(x, 10, 20, 14, sort)
        parts.append(_text(x + 27, 22, word, "bw-text", 15))
    return parts


def _bar(bar: Bar, y: float, scale: float) -> list[str]:
    label = bar.label if len(bar.label) <= 60 else bar.label[:59] + "…"
    parts = [_text(_LEFT, y + 14, label, "bw-text", 15)]
    x, top, height = _BAR_FROM, y + 20, 17.0
    for sort, amount in (("net", bar.net), ("waste", bar.waste), ("left", bar.left)):
        parts += _piece(x, top, amount * scale, height, sort)
        x += amount * scale
    parts.append(_text(x + 8, top + 14, bar.text, "bw-num", 16))
    return parts
