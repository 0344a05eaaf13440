"""Two take-offs side by side: what each takes, and by how much they differ."""

from __future__ import annotations

from decimal import Decimal
from math import fsum
from typing import Any

from .. import quantity
from ..quantity import plain
from ..takeoff.money import money_text
from ..takeoff.total import Takeoff
from . import writing
from .takeoff_sheet import run_text, volume_text


def compare_dict(mine: Takeoff, other: Takeoff, system: str) -> dict[str, Any]:
    """Rows of label, both values and the change; numbers beside the texts."""
    rows = [
        _row("length", "Bead", mine.length_m, other.length_m, run_text, system),
        _row("net", "Net volume", mine.net_ml, other.net_ml, volume_text, system),
        _row("gross", "With waste", mine.gross_ml, other.gross_ml, volume_text, system),
        _row("packages", "Packages", _packages(mine), _packages(other), _count, system),
        _row("left", "Left over", _left(mine), _left(other), volume_text, system),
        _row("hours", "Hours", _worked(mine), _worked(other), _hours, system),
    ]
    rows = [row for row in rows if row["mine"] or row["other"]]
    if mine.cost is not None and other.cost is not None:
        currency = mine.source.settings.currency
        rows.append({
            "key": "cost", "label": "Cost", "mine": money_text(mine.cost), "other": money_text(other.cost), "change": money_text(other.cost - mine.cost),
            "mine_text": f"{money_text(mine.cost)} {currency}".strip(), "other_text": f"{money_text(other.cost)} {currency}".strip(), "change_text": _signed(money_text(other.cost - mine.cost)),
        })  # fmt: skip
    table = {
        "key": "compare", "title": "Side by side", "columns": [{"label": label, "align": "left" if index == 0 else "right"} for index, label in enumerate(("", "As it is", "Changed", "Change"))],
        "rows": [{"cells": [row["label"], row["mine_text"], row["other_text"], row["change_text"]], "mark": None} for row in rows],
        "note": "Material and hours only: what a failed joint costs to mend is not in it.",
    }  # fmt: skip
    return {"rows": rows, "table": table, "left_out": [len(mine.left_out) + mine.damaged, len(other.left_out) + other.damaged]}


def _packages(taken: Takeoff) -> float:
    return float(sum(line.pack_count for order in taken.orders for line in order.lines))


def _left(taken: Takeoff) -> float:
    return fsum(order.left_ml for order in taken.orders)


def _worked(taken: Takeoff) -> float:
    return float(sum(row.hours for row in taken.labour))


def _row(key: str, label: str, mine: float, other: float, show: Any, system: str) -> dict[str, Any]:
    change = other - mine
    share = f" ({writing.percent(change / mine, signed=True)})" if mine else ""
    text = show(abs(change), system)
    signed = f"{'+' if change > 0 else '−'}{text}{share}" if abs(change) > 1e-9 * max(abs(mine), 1.0) else "no change"
    return {"key": key, "label": label, "mine": mine, "other": other, "change": change, "mine_text": show(mine, system), "other_text": show(other, system), "change_text": signed}


def _count(value: float, system: str) -> str:
    return plain(value, 0)


def _hours(value: float, system: str) -> str:
    return quantity.show(value, "duration", "h")


def _signed(text: str) -> str:
    number = Decimal(text)
    return f"+{text}" if number > 0 else text.replace("-", "−")
