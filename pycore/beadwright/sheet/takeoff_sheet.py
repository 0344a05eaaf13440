"""The take-off as people read it: bands, tables and a picture beside the plain numbers."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from typing import Any

from .. import quantity
from ..catalogue import coverage, packages
from ..quantity import INCH, METRIC, plain
from ..takeoff.money import money_text
from ..takeoff.packs import LIMIT
from ..takeoff.runs import SECTION_WORDS, Run
from ..takeoff.total import Need, Order, PackLine, Sum, Takeoff
from ..takeoff.volume import feet_per_gallon, metres_per_package
from ..working import COMMON_PRACTICE, DEFINITION, ENTERED, Step, Value
from . import writing
from .bars import Bar, bars_svg

WASTE_WORDS = {"times": "net × (1 + p)", "divide": "net ÷ (1 − p)"}
ACCESS_WORDS = {"any": "any access", "ground": "from the ground", "lift": "lift or tower", "scaffold": "scaffold", "stage": "swing stage or ropes", "inside": "inside"}
SUM_WORDS = {"colour": "colour", "sealant": "sealant", "phase": "phase", "zone": "zone", "section": "section"}
_NONE = "none named"
_MOST_YIELDS = 60
# One cartridge of each system, for the sanity line.
_YIELD_PACK = {METRIC: "cartridge-300", INCH: "cartridge-10"}


# ---- texts ------------------------------------------------------------------------------------


@lru_cache(maxsize=16384)
def volume_text(value_ml: float, system: str) -> str:
    """A volume for reading: litres or ml, US gallons or fluid ounces."""
    if system == INCH:
        return quantity.show(value_ml, "volume", "US gal", 2) if value_ml >= 3785.411784 / 2 else quantity.show(value_ml, "volume", "US fl oz", 1)
    return quantity.show(value_ml, "volume", "l", 1 if value_ml >= 1e5 else 2) if value_ml >= 1000.0 else quantity.show(value_ml, "volume", "ml", 0)


@lru_cache(maxsize=16384)
def run_text(length_m: float, system: str) -> str:
    """A length of run for reading: metres or decimal feet."""
    return quantity.show(length_m * 1000.0, "length", "ft" if system == INCH else "m", 1)


def _down_text(length_m: float, system: str) -> str:
    """A length that must not be promised longer than it is: whole metres or feet, downwards."""
    number = length_m / 0.3048 if system == INCH else length_m
    decimals = 0 if number >= 10 else 1
    factor = 10**decimals
    return f"{plain(int(number * factor + 1e-9) / factor, decimals)} {'ft' if system == INCH else 'm'}"


def _area_m2(value: float, system: str) -> str:
    return f"{plain(value, 1)} m²" if system == METRIC else f"{plain(value / 0.09290304, 0)} ft²"


def _money(value: Fraction | None, currency: str) -> str:
    return "–" if value is None else f"{money_text(value)} {currency}".strip()


def _share(part: float, whole: float) -> float:
    return part / whole if whole else 0.0


@lru_cache(maxsize=16384)
def _length(value_mm: float | None, system: str) -> str:
    return "–" if value_mm is None else writing.length(round(value_mm, 2), system)


def _size(run: Run, system: str) -> str:
    """Width and depth, or legs, of a run's bead."""
    if run.section == "fillet":
        return f"{_length(run.leg_a_mm, system)} / {_length(run.leg_b_mm, system)}"
    if run.section == "round":
        return f"Ø {_length(run.width_mm, system)}"
    return f"{_length(run.width_mm, system)} × {_length(run.depth_mm, system)}"


def _buy_text(line: PackLine) -> str:
    if line.pack.per_box > 1 and line.boxes:
        boxes = f"{line.boxes} box{'es' if line.boxes != 1 else ''} of {line.pack.per_box}"
        return f"{boxes} + {line.singles} × {line.pack.name}" if line.singles else f"{boxes} × {line.pack.name}"
    return f"{line.pack_count} × {line.pack.name}"


def _order_name(order: Order) -> str:
    return ", ".join(part for part in (order.sealant_name, order.colour, order.phase) if part)


def left_out_text(taken: Takeoff) -> str:
    """What the totals leave out, in one sentence; empty when they leave nothing out."""
    count = len(taken.left_out) + taken.damaged
    if not count:
        return ""
    names = [run.name for run in taken.left_out[:4]]
    more = f" and {count - len(names)} more" if count > len(names) and names else ""
    listed = f": {', '.join(names)}{more}" if names else ""
    return f"{count} run{'s' if count != 1 else ''} left out of every total{listed}."


# ---- the answer -------------------------------------------------------------------------------


def takeoff_dict(taken: Takeoff, system: str) -> dict[str, Any]:
    """The take-off's part of the answer."""
    settings = taken.source.settings
    currency = settings.currency
    return {
        "short": False,
        "run_count": len(taken.runs),
        "left_out_count": len(taken.left_out) + taken.damaged,
        "left_out": [{"path": run.path, "id": run.id, "name": run.name, "reason": run.left_out} for run in taken.left_out],
        "left_out_text": left_out_text(taken),
        "waste_by": settings.waste_by,
        "waste_word": WASTE_WORDS[settings.waste_by],
        "currency": currency,
        "has_own_packs": taken.source.has_own_packs,
        "length_m": taken.length_m,
        "net_ml": taken.net_ml,
        "net_least_ml": taken.net_least_ml,
        "net_most_ml": taken.net_most_ml,
        "rectangle_ml": taken.rectangle_ml,
        "gross_ml": taken.gross_ml,
        "cost": None if taken.cost is None else money_text(taken.cost),
        "cost_text": None if taken.cost is None else _money(taken.cost, currency),
        "unpriced": list(taken.unpriced),
        "runs": [_run_dict(run, system) for run in sorted([*taken.runs, *taken.left_out], key=lambda run: run.index)],
        "orders": [_order_dict(order, system, currency) for order in taken.orders],
        "needs": [_need_dict(need, system, currency) for need in taken.needs],
        "labour": [
            {"stage": row.stage, "access": row.access, "length_m": row.length_m, "pace_m_h": row.pace_m_h, "hours": float(row.hours), "cost": None if row.cost is None else money_text(row.cost), "basis": row.basis}
            for row in taken.labour
        ],
        "unrated_m": taken.unrated_m,
        "sums": {key: [_sum_dict(item, key, system) for item in sums] for key, sums in taken.sums.items()},
        "answers": _bands(taken, system),
        "tables": _tables(taken, system),
        "steps": [writing.step_lines(step, system) for step in _steps(taken, system)],
        "drawing": _drawing(taken, system),
        "notes": [{"severity": severity, "text": text} for severity, text in _notes(taken, system)],
    }  # fmt: skip


_SHORT = ("run_count", "left_out_count", "left_out_text", "length_m", "net_ml", "gross_ml", "cost", "cost_text", "currency")


def short_form(answer: dict[str, Any]) -> dict[str, Any]:
    """The totals alone, for a page that shows something else."""
    return {"short": True, **{key: answer[key] for key in _SHORT}}


def _run_dict(run: Run, system: str) -> dict[str, Any]:
    return {
        "path": run.path, "id": run.id, "name": run.name, "left_out": run.left_out or None, "section": run.section or None,
        "length_m": run.length_m, "width_mm": run.width_mm, "width_least_mm": run.width_least_mm, "width_most_mm": run.width_most_mm, "depth_mm": run.depth_mm, "depth_from": run.depth_from,
        "area_mm2": run.area_mm2, "rectangle_mm2": run.rectangle_mm2, "difference_fraction": _share(run.area_mm2 - run.rectangle_mm2, run.rectangle_mm2),
        "net_ml": run.net_ml, "net_least_ml": run.area_least_mm2 * run.length_m, "net_most_ml": run.area_most_mm2 * run.length_m, "waste_fraction": run.waste_fraction, "gross_ml": run.gross_ml,
        "rods": [{"label": part.label, "diameter_mm": part.diameter_mm, "length_m": part.length_m} for part in run.rods],
        "text": run.left_out or f"{run_text(run.length_m, system)} of {SECTION_WORDS[run.section].lower()} {_size(run, system)}: {volume_text(run.net_ml, system)} net, {volume_text(run.gross_ml, system)} to buy",
    }  # fmt: skip


def _order_dict(order: Order, system: str, currency: str) -> dict[str, Any]:
    return {
        "key": order.key, "sealant": order.sealant, "sealant_name": order.sealant_name, "colour": order.colour, "phase": order.phase, "name": _order_name(order),
        "run_count": order.run_count, "length_m": order.length_m, "net_ml": order.net_ml, "net_least_ml": order.net_least_ml, "net_most_ml": order.net_most_ml, "gross_ml": order.gross_ml,
        "packs": [
            {
                "id": line.pack.id, "name": line.pack.name, "sort": line.pack.sort, "boxes": line.boxes, "per_box": line.pack.per_box, "singles": line.singles, "count": line.pack_count,
                "usable_ml": float(line.usable_ml), "mixes_per_pack": line.mixes_per_pack, "cost": None if line.cost is None else money_text(line.cost), "text": _buy_text(line),
            }
            for line in order.lines
        ],
        "bought_ml": order.bought_ml, "usable_ml": order.usable_ml, "left_ml": order.left_ml, "left_m": order.left_m, "cost": None if order.cost is None else money_text(order.cost),
        "proof": {
            "is_optimal": order.is_proven, "way": order.proof or None, "lower_bound": None if order.lower_bound is None else money_text(order.lower_bound), "steps": order.search_steps,
            "text": _proof_text(order, currency),
        },
        "one_more": [
            {"label": item.label, "usable_ml": item.usable_ml, "length_m": item.length_m, "cost": None if item.cost is None else money_text(item.cost), "text": f"{item.label} gives {_down_text(item.length_m, system)} more{f' for {_money(item.cost, currency)}' if item.cost is not None else ''}"}
            for item in order.one_more
        ],
        "mix_limit_ml": order.mix_limit_ml, "notes": list(order.notes), "text": " + ".join(_buy_text(line) for line in order.lines) or "nothing fits",
    }  # fmt: skip


def _proof_text(order: Order, currency: str) -> str:
    if not order.lines:
        return "Nothing chosen."
    what = "cost less" if order.cost is not None else "leave less over"
    if order.proof == LIMIT:
        floor = f" No mix can cost less than {_money(order.lower_bound, currency)}." if order.lower_bound is not None else ""
        return f"The search was cut short: the best mix found, not proven the best.{floor}"
    return f"Proven: no other mix of the packages offered would {what}."


def _need_dict(need: Need, system: str, currency: str) -> dict[str, Any]:
    return {
        "item": need.item, "label": need.label, "amount": need.amount, "unit": need.unit, "diameter_mm": need.diameter_mm, "piece_size": need.piece_size, "pieces": need.piece_count,
        "cost": None if need.cost is None else money_text(need.cost), "text": _amount_text(need, system),
    }  # fmt: skip


def _amount_text(need: Need, system: str) -> str:
    if need.unit == "m":
        return run_text(need.amount, system)
    if need.unit == "ml":
        return volume_text(need.amount, system)
    if need.unit == "m2":
        return _area_m2(need.amount, system)
    return plain(need.amount, 0)


def _sum_dict(item: Sum, key: str, system: str) -> dict[str, Any]:
    return {
        "key": item.key, "label": _sum_label(item, key), "run_count": item.run_count, "length_m": item.length_m, "net_ml": item.net_ml, "gross_ml": item.gross_ml,
        "text": f"{run_text(item.length_m, system)}, {volume_text(item.gross_ml, system)}",
    }  # fmt: skip


def _sum_label(item: Sum, key: str) -> str:
    return SECTION_WORDS.get(item.label, item.label) if key == "section" else item.label or _NONE


# ---- bands ------------------------------------------------------------------------------------


def _band(key: str, question: str, answer: str, detail: str = "", tone: str = "plain") -> dict[str, str]:
    return {"key": key, "question": question, "answer": answer, "detail": detail, "tone": tone}


def _bands(taken: Takeoff, system: str) -> list[dict[str, str]]:
    bands = []
    out = left_out_text(taken)
    if out:
        bands.append(_band("left-out", "Is anything left out?", f"{len(taken.left_out) + taken.damaged} left out", f"{out} Mend the marked cells; everything else is counted.", "bad"))
    if not taken.runs:
        return bands
    bands += [_sealant_band(taken, system), _buy_band(taken, system), _left_band(taken, system)]
    if (shape := _shape_band(taken, system)) is not None:
        bands.append(shape)
    rods = [need for need in taken.needs if need.item in ("rod", "tape")]
    if rods:
        bands.append(_band("backing", "What goes behind it?", ", ".join(f"{_amount_text(need, system)} of {need.label[0].lower()}{need.label[1:]}" for need in rods[:3]) + (f" and {len(rods) - 3} more" if len(rods) > 3 else ""),
                           "Waste and splices included. Where a width varies, sizes share the length as if widths were spread evenly over the range."))  # fmt: skip
    if taken.labour:
        hours = sum((row.hours for row in taken.labour), Fraction(0))
        detail = f"At the paces entered, worker-hours. {run_text(taken.unrated_m, system)} of bead has no rate." if taken.unrated_m else "At the paces entered, worker-hours."
        bands.append(_band("labour", "How long does it take?", f"{plain(float(hours), 1)} h", detail, "warn" if taken.unrated_m else "plain"))
    if taken.cost is not None:
        without = f" Without {', '.join(taken.unpriced[:4])}{' and more' if len(taken.unpriced) > 4 else ''}: no price." if taken.unpriced else ""
        bands.append(_band("cost", "What does it cost?", _money(taken.cost, taken.source.settings.currency), f"Whole packages and pieces, exact to the last digit.{without}", "warn" if taken.unpriced or out else "plain"))
    return bands


def _sealant_band(taken: Takeoff, system: str) -> dict[str, str]:
    detail = f"{volume_text(taken.net_ml, system)} net in {run_text(taken.length_m, system)} of bead; waste by {WASTE_WORDS[taken.source.settings.waste_by]}."
    if taken.net_most_ml - taken.net_least_ml > 1e-6 * taken.net_ml:
        detail += f" Over the range of widths the net lies between {volume_text(taken.net_least_ml, system)} and {volume_text(taken.net_most_ml, system)}."
    return _band("sealant", "How much sealant?", volume_text(taken.gross_ml, system), detail)


def _buy_band(taken: Takeoff, system: str) -> dict[str, str]:
    filled = [order for order in taken.orders if order.lines]
    lacking = [order for order in taken.orders if not order.lines]
    totals: dict[str, tuple[str, int]] = {}
    for order in filled:
        for line in order.lines:
            name, count = totals.get(line.pack.id, (line.pack.name, 0))
            totals[line.pack.id] = (name, count + line.pack_count)
    answer = ", ".join(f"{count} × {name}" for name, count in list(totals.values())[:4]) + (" and more" if len(totals) > 4 else "")
    detail = f"{len(taken.orders)} order{'s' if len(taken.orders) != 1 else ''} by sealant, colour and phase; see the table."
    if not taken.source.has_own_packs:
        detail += " Common sizes without a price, chosen for the least left over: enter your own packages."
    unproven = [order for order in filled if not order.is_proven]
    detail += f" {len(unproven)} of them not proven the best." if unproven else " Proven the best mix for each." if filled else ""
    if lacking:
        detail += f" No package fits {', '.join(_order_name(order) for order in lacking[:3])}."
    return _band("buy", "What to bring?", answer or "Nothing fits", detail, "bad" if lacking else "warn" if unproven else "plain")


def _left_band(taken: Takeoff, system: str) -> dict[str, str]:
    left = sum(order.left_ml for order in taken.orders)
    bought = sum(order.usable_ml for order in taken.orders)
    more = [(order, item) for order in taken.orders for item in order.one_more[:1]]
    detail = f"{writing.percent(_share(left, bought))} of what can be used."
    if more:
        order, item = max(more, key=lambda pair: (pair[0].gross_ml, pair[0].key))
        detail += f" {item.label} gives {_down_text(item.length_m, system)} more ({_order_name(order)})."
    return _band("left", "What is left over?", volume_text(left, system), detail)


def _shape_band(taken: Takeoff, system: str) -> dict[str, str] | None:
    share = _share(taken.net_ml - taken.rectangle_ml, taken.rectangle_ml)
    if abs(share) < 5e-4:
        return None
    word = "more" if share > 0 else "less"
    return _band("shape", "What does the true section change?", f"{writing.percent(abs(share))} {word}",
                 f"Width × depth alone would make {volume_text(taken.rectangle_ml, system)} net; the true sections make {volume_text(taken.net_ml, system)}. Hollows and rod crowns add at the faces, a fillet is half its square.")  # fmt: skip


def _notes(taken: Takeoff, system: str) -> list[tuple[str, str]]:
    found = []
    for order in taken.orders:
        found += [("note", f"{_order_name(order)}: {note}") for note in order.notes]
        if order.mix_limit_ml is not None:
            found.append(("note", f"{_order_name(order)}: mix at most {volume_text(order.mix_limit_ml, system)} at once, as far as pot life and pace go."))
    if any(run.removal for run in taken.runs):
        found.append(("warning", "Old sealant comes out: before it is cut, find out whether it may hold PCB or asbestos. See the cautions."))
    if any(run.section == "round" for run in taken.runs):
        found.append(("note", "Round beads count no faces to prime, clean or mask: how far they spread is not known here."))
    return list(dict.fromkeys(found))


# ---- tables -----------------------------------------------------------------------------------

_LEFT_COLUMNS = frozenset({"Zone", "Drawing", "Colour", "Phase", "Section", "Buy", "One more", "Proof", "Sold in", "Access", "Basis", "Size", "Reason"})


def _table(key: str, title: str, columns: Sequence[str], rows: list[dict[str, Any]], note: str = "") -> dict[str, Any]:
    shown = [{"label": label, "align": "left" if index == 0 or label in _LEFT_COLUMNS else "right"} for index, label in enumerate(columns)]
    return {"key": key, "title": title, "columns": shown, "rows": rows, "note": note}


def _row(*cells: str, mark: str | None = None) -> dict[str, Any]:
    return {"cells": list(cells), "mark": mark}


def _tables(taken: Takeoff, system: str) -> list[dict[str, Any]]:
    if not taken.runs and not taken.left_out:
        return []
    tables = [_orders_table(taken, system), _runs_table(taken, system)]
    for key in ("colour", "sealant", "phase", "zone"):
        sums = taken.sums[key]
        if any(item.label for item in sums):
            tables.append(_sums_table(taken, key, sums, system))
    if taken.needs:
        tables.append(_needs_table(taken, system))
    if taken.labour:
        tables.append(_labour_table(taken, system))
    tables.append(_yields_table(taken, system))
    if taken.left_out:
        tables.append(_table("left-out", "Left out of every total", ("Run", "Reason"), [_row(run.name, run.left_out, mark="bad") for run in taken.left_out]))
    return [table for table in tables if table["rows"]]


def _orders_table(taken: Takeoff, system: str) -> dict[str, Any]:
    currency = taken.source.settings.currency
    rows = []
    for order in taken.orders:
        more = order.one_more[0] if order.one_more else None
        rows.append(_row(
            order.sealant_name, order.colour or "–", order.phase or "–", volume_text(order.net_ml, system), volume_text(order.gross_ml, system),
            " + ".join(_buy_text(line) for line in order.lines) or "no package fits", volume_text(order.left_ml, system) if order.lines else "–",
            f"+{_down_text(more.length_m, system)}" if more else "–", _money(order.cost, currency), "proven" if order.is_proven else "not proven" if order.lines else "–",
            mark=None if order.lines else "bad",
        ))  # fmt: skip
    if taken.orders:
        cost = sum((order.cost for order in taken.orders if order.cost is not None), Fraction(0))
        has_cost = any(order.cost is not None for order in taken.orders)
        rows.append(_row("Total", "", "", volume_text(taken.net_ml, system), volume_text(taken.gross_ml, system), "", volume_text(sum(order.left_ml for order in taken.orders), system), "", _money(cost if has_cost else None, currency), "", mark="total"))
    note = f"With waste by {WASTE_WORDS[taken.source.settings.waste_by]}. ‘One more’: metres that one more box, or package where it comes singly, would fill. {left_out_text(taken)}"
    if system == INCH:
        note = note.replace("metres that", "feet that")
    return _table("orders", "What to bring, by sealant, colour and phase", ("Sealant", "Colour", "Phase", "Net", "With waste", "Buy", "Left over", "One more", "Cost", "Proof"), rows, note.strip())


def _runs_table(taken: Takeoff, system: str) -> dict[str, Any]:
    rows = []
    for run in sorted([*taken.runs, *taken.left_out], key=lambda run: run.index):
        if run.left_out:
            rows.append(_row(run.name, run.zone or "–", run.drawing or "–", run.colour or "–", "left out", "–", "–", "–", "–", "–", "–", "–", mark="bad"))
            continue
        times = f"{run.count} × {run.lines}" if run.count > 1 or run.lines > 1 else "1"
        share = _share(run.area_mm2 - run.rectangle_mm2, run.rectangle_mm2)
        rows.append(_row(
            run.name, run.zone or "–", run.drawing or "–", run.colour or "–", SECTION_WORDS[run.section], _size(run, system), times, run_text(run.length_m, system), writing.area(run.area_mm2, system),
            writing.percent(share, signed=True) if abs(share) >= 5e-4 else "0 %", volume_text(run.net_ml, system), volume_text(run.gross_ml, system),
        ))  # fmt: skip
    if taken.runs:
        share = _share(taken.net_ml - taken.rectangle_ml, taken.rectangle_ml)
        rows.append(_row("Total", "", "", "", "", "", "", run_text(taken.length_m, system), "", writing.percent(share, signed=True), volume_text(taken.net_ml, system), volume_text(taken.gross_ml, system), mark="total"))
    return _table("runs", "Runs", ("Run", "Zone", "Drawing", "Colour", "Section", "Size", "Times", "Length", "True section", "Over w × d", "Net", "With waste"), rows,
                  f"Times: how many × lines of bead. ‘Over w × d’: how much the true section is over width × depth (a fillet: over leg × leg). {left_out_text(taken)}".strip())  # fmt: skip


def _sums_table(taken: Takeoff, key: str, sums: Sequence[Sum], system: str) -> dict[str, Any]:
    rows = [_row(_sum_label(item, key), str(item.run_count), run_text(item.length_m, system), volume_text(item.net_ml, system), volume_text(item.gross_ml, system)) for item in sums]
    rows.append(_row("Total", str(len(taken.runs)), run_text(taken.length_m, system), volume_text(taken.net_ml, system), volume_text(taken.gross_ml, system), mark="total"))
    return _table(f"sums-{key}", f"By {SUM_WORDS[key]}", (SUM_WORDS[key].capitalize(), "Runs", "Length", "Net", "With waste"), rows, left_out_text(taken))


def _needs_table(taken: Takeoff, system: str) -> dict[str, Any]:
    currency = taken.source.settings.currency
    rows = []
    for need in taken.needs:
        size = ""
        if need.piece_size is not None and need.unit == "m":
            size = f" of {run_text(need.piece_size, system)}"
        elif need.piece_size is not None and need.unit == "ml":
            size = f" of {volume_text(need.piece_size, system)}"
        elif need.piece_size is not None and need.piece_size != 1:
            size = f" of {plain(need.piece_size, 0)}"
        width = f", {_length(need.diameter_mm, system)} wide" if need.item == "tape" and need.diameter_mm else ""
        rows.append(_row(need.label + width, _amount_text(need, system), f"{need.piece_count}{size}" if need.piece_count is not None else "–", _money(need.cost, currency)))
    return _table("needs", "Everything else", ("Item", "Needed", "Sold in", "Cost"), rows, "Lengths hold their waste. Coverage, waste, tips and bulking are settings to edit, most of them common practice without a source.")


def _labour_table(taken: Takeoff, system: str) -> dict[str, Any]:
    currency = taken.source.settings.currency
    pace_unit = "ft/h" if system == INCH else "m/h"
    rows = [
        _row(row.stage, ACCESS_WORDS[row.access], run_text(row.length_m, system), quantity.show(row.pace_m_h, "pace", pace_unit), f"{plain(float(row.hours), 2)} h", _money(row.cost, currency), row.basis or "none given")
        for row in taken.labour
    ]
    hours = sum((row.hours for row in taken.labour), Fraction(0))
    costs = [row.cost for row in taken.labour if row.cost is not None]
    rows.append(_row("Total", "", "", "", f"{plain(float(hours), 2)} h", _money(sum(costs, Fraction(0)) if costs else None, currency), "", mark="total"))
    return _table("labour", "Hours", ("Stage", "Access", "Length", "Pace", "Hours", "Cost", "Basis"), rows, "Worker-hours at the paces entered; no pace is built in.")


def _yields_table(taken: Takeoff, system: str) -> dict[str, Any]:
    """How far a cartridge and a gallon go in each section: figures that an estimator knows by heart."""
    pack = packages()[_YIELD_PACK[system]]
    seen: dict[tuple[str, str], Run] = {}
    for run in taken.runs:
        seen.setdefault((SECTION_WORDS[run.section], _size(run, system)), run)
    rows = []
    for (word, size), run in list(seen.items())[:_MOST_YIELDS]:
        per_pack = metres_per_package(pack.volume_ml, run.area_mm2)
        square = metres_per_package(pack.volume_ml, run.rectangle_mm2)
        rows.append(_row(f"{word} {size}", writing.area(run.area_mm2, system), run_text(per_pack, system), run_text(square, system), f"{plain(feet_per_gallon(run.area_mm2), 1)} ft"))
    return _table("yields", "How far a package goes", ("Section", "True section", f"Per {pack.volume}", "By w × d", "Per US gallon"), rows, "Before waste and residue. ‘By w × d’ is the short cut, to hold against a rule of thumb.")


# ---- working ----------------------------------------------------------------------------------


def _steps(taken: Takeoff, system: str) -> list[Step]:
    """How the figures come about, worked on the run and the order that take most."""
    if not taken.runs:
        return []
    settings = taken.source.settings
    run = max(taken.runs, key=lambda item: (item.net_ml, item.path))
    order = max(taken.orders, key=lambda item: (item.gross_ml, item.key))
    one, unit = Value(_span(run.one_length_m, system), "number"), "ft" if system == INCH else "m"
    cubic = " × 12 / 231" if system == INCH else ""  # in² × ft to US gallons of 231 in³
    net, waste = _litres(order.net_ml, system), Value(run.waste_fraction, "percent")
    steps = [
        Step("run-volume", f"Net volume of the largest run, {run.name}", "V", f"A · L · n · lines{cubic}", f"{{A}} × {{L}} {unit} × {{n}} × {{k}}{cubic}", {"A": Value(run.area_mm2, "area"), "L": one, "n": Value(run.count, "number"), "k": Value(run.lines, "number")}, _litres(run.net_ml, system), "Geometry of the true section" + ("; a US gallon is 231 in³" if cubic else "; a mm² is a ml for each metre"), DEFINITION),
        Step("run-waste", "With its waste", "V_b", WASTE_WORDS[settings.waste_by], "{V} × (1 + {p})" if settings.waste_by == "times" else "{V} / (1 − {p})", {"V": _litres(run.net_ml, system), "p": waste}, _litres(run.gross_ml, system), "Definition chosen in the settings; the share is common practice or entered", COMMON_PRACTICE),
        Step("order-volume", f"Largest order, {_order_name(order)}", "Σ V_b", "sum over its runs", f"from {{V}} net in {{L}} {unit}", {"V": net, "L": Value(_span(order.length_m, system), "number")}, _litres(order.gross_ml, system), "Sum", DEFINITION),
    ]
    for line in order.lines[:1]:
        steps.append(Step("usable", f"Usable in one {line.pack.name}", "v", "content − residue, at most what is placed within the pot life", "{c} − {r}", {"c": _litres(float(line.pack.volume_ml), system), "r": _litres(float(line.pack.residue_ml), system)}, _litres(float(line.usable_ml), system), "Content and residue as entered, else common sizes from memory", ENTERED))
        steps.append(Step("mix", "Packages", "n", "least Σ n·c with Σ n·v ≥ Σ V_b, n whole; exact search over packages and boxes", "covers {V}", {"V": _litres(order.gross_ml, system)}, _litres(order.usable_ml, system), f"Depth-first search with bounds. {_proof_text(order, settings.currency)}", DEFINITION))
    if run.prime_m2:
        steps.append(Step("primer", "Faces to prime, same run", "F in m²" if system == METRIC else "F in ft²", "Σ (bond + overlap) · L over the bond faces", f"overlap {{o}}, {{L}} {unit} of bead", {"o": Value(settings.primer_overlap_mm, "length"), "L": Value(_span(run.length_m, system), "number")}, Value(run.prime_m2 if system == METRIC else run.prime_m2 / 0.09290304, "number"), "Geometry; overlap by common practice", COMMON_PRACTICE))
    return steps


def _litres(value_ml: float, system: str) -> Value:
    """A volume of working, in a unit that keeps its digits."""
    if system == INCH:
        return Value(value_ml, "volume", "US gal" if value_ml >= 3785.411784 else "US fl oz")
    return Value(value_ml, "volume", "l" if value_ml >= 1000.0 else "ml")


def _span(length_m: float, system: str) -> float:
    return length_m / 0.3048 if system == INCH else length_m


# ---- picture and starters ---------------------------------------------------------------------


def _drawing(taken: Takeoff, system: str) -> str | None:
    if not taken.orders:
        return None
    bars = [Bar(_order_name(order), order.net_ml, order.gross_ml - order.net_ml, order.left_ml, volume_text(order.gross_ml, system)) for order in taken.orders]
    return bars_svg(bars, f"Where {volume_text(taken.gross_ml, system)} of sealant goes, by sealant, colour and phase", "together")


def starters() -> dict[str, Any]:
    """Rows to begin with, in the form of the job file: common packages and paces, each with its basis; all to edit."""
    found: dict[str, Any] = {"pack": {METRIC: [], INCH: []}, "rate": {METRIC: [], INCH: []}}
    for row in packages().values():
        sort = {"drum": "pail"}.get(row.sort, row.sort)
        found["pack"][row.system].append({"name": row.label, "sort": sort, "volume": row.volume, "residue": row.residue, "per_box": str(row.per_box), "sold": "single", "note": f"{row.source} ({row.status})"})
    for limit in coverage().values():
        if limit.quantity != "pace":
            continue
        for system in (METRIC, INCH):
            text = f"{plain(limit.value, 1)} m/h" if system == METRIC else f"{plain(limit.value / 0.3048, 0)} ft/h"
            found["rate"][system].append({"stage": limit.label, "on": "all", "access": "any", "pace": text, "basis": f"common practice, edit ({limit.source})"})
    return found
