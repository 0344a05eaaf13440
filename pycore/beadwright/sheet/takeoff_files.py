"""The take-off as CSV (RFC 4180) and as a workbook whose sums are live formulas.

Both carry metres, millimetres and litres, named in their headers, whatever the job's units, so
that two files can be laid side by side. A text that a spreadsheet would run is made harmless.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Mapping, Sequence
from decimal import Decimal
from fractions import Fraction
from typing import Any

from ..takeoff.inputs import fold
from ..takeoff.money import money_text
from ..takeoff.runs import SECTION_WORDS, Run
from ..takeoff.total import Order, PackLine, Sum, Takeoff
from .schedule import safe_cell
from .takeoff_sheet import ACCESS_WORDS, WASTE_WORDS, left_out_text

NONE = "(none)"
_CSV_COLUMNS = (
    "Part", "Name", "Zone", "Drawing", "Joint", "Sealant", "Colour", "Phase", "Section", "Length of one [m]", "Count", "Lines", "Length [m]",
    "Width mean [mm]", "Width least [mm]", "Width most [mm]", "Depth or leg [mm]", "True section [mm2]", "Width x depth [mm2]",
    "Net [l]", "Waste [share]", "With waste [l]", "Quantity", "Unit", "Cost", "Currency", "Remark",
)  # fmt: skip


def _sum_name(item: Sum, key: str) -> str:
    return SECTION_WORDS.get(item.label, item.label) if key == "section" else item.label or NONE


def _ordered(taken: Takeoff) -> list[Run]:
    return sorted([*taken.runs, *taken.left_out], key=lambda run: run.index)


def _sealant_names(taken: Takeoff) -> dict[str, str]:
    return {order.sealant: order.sealant_name for order in taken.orders}


def takeoff_csv(taken: Takeoff) -> bytes:
    """Every run, sum, order and other item, one a row, told apart by the first column."""
    out = io.StringIO(newline="")
    writer = csv.DictWriter(out, _CSV_COLUMNS, restval="", lineterminator="\r\n")
    writer.writeheader()
    for row in _csv_rows(taken):
        writer.writerow({key: _cell(value) for key, value in row.items()})
    return ("\ufeff" + out.getvalue()).encode("utf-8")


def _cell(value: object) -> object:
    if value is None:
        return ""
    if isinstance(value, Fraction):
        return money_text(value)
    if isinstance(value, float):
        return repr(round(value, 9))
    return safe_cell(value)


def _csv_rows(taken: Takeoff) -> list[dict[str, Any]]:
    names, currency, found = _sealant_names(taken), taken.source.settings.currency, []
    for run in _ordered(taken):
        row: dict[str, Any] = {"Part": "run", "Name": run.name, "Zone": run.zone, "Drawing": run.drawing, "Joint": run.joint, "Sealant": names.get(run.sealant, run.sealant), "Colour": run.colour, "Phase": run.phase}
        if run.left_out:
            row |= {"Remark": f"left out: {run.left_out}"}
        else:
            row |= {
                "Section": SECTION_WORDS[run.section], "Length of one [m]": run.one_length_m, "Count": run.count, "Lines": run.lines, "Length [m]": run.length_m,
                "Width mean [mm]": run.width_mm if run.width_mm is not None else run.leg_a_mm, "Width least [mm]": run.width_least_mm, "Width most [mm]": run.width_most_mm,
                "Depth or leg [mm]": run.depth_mm if run.depth_mm is not None else run.leg_b_mm, "True section [mm2]": run.area_mm2, "Width x depth [mm2]": run.rectangle_mm2,
                "Net [l]": run.net_ml / 1000, "Waste [share]": run.waste_fraction, "With waste [l]": run.gross_ml / 1000,
            }  # fmt: skip
        found.append(row)
    for key, sums in taken.sums.items():
        found += [{"Part": f"sum by {key}", "Name": _sum_name(item, key), "Length [m]": item.length_m, "Net [l]": item.net_ml / 1000, "With waste [l]": item.gross_ml / 1000} for item in sums]
    for order in taken.orders:
        for line in order.lines:
            found.append({
                "Part": "order", "Name": line.pack.name, "Sealant": order.sealant_name, "Colour": order.colour, "Phase": order.phase, "With waste [l]": order.gross_ml / 1000,
                "Quantity": line.pack_count, "Unit": "packages", "Cost": line.cost, "Currency": currency if line.cost is not None else "",
                "Remark": f"{line.boxes} boxes of {line.pack.per_box} and {line.singles} singly" if line.boxes else "",
            })  # fmt: skip
        if not order.lines:
            found.append({"Part": "order", "Name": "no package fits", "Sealant": order.sealant_name, "Colour": order.colour, "Phase": order.phase, "With waste [l]": order.gross_ml / 1000})
    for need in taken.needs:
        amount, unit = (need.amount / 1000, "l") if need.unit == "ml" else (need.amount, need.unit)
        found.append({"Part": "other", "Name": need.label, "Width mean [mm]": need.diameter_mm, "Quantity": amount, "Unit": unit, "Cost": need.cost, "Currency": currency if need.cost is not None else "", "Remark": f"{need.piece_count} pieces" if need.piece_count is not None else ""})
    for stage in taken.labour:
        found.append({"Part": "labour", "Name": stage.stage, "Length [m]": stage.length_m, "Quantity": float(stage.hours), "Unit": "h", "Cost": stage.cost, "Currency": currency if stage.cost is not None else "", "Remark": f"{ACCESS_WORDS[stage.access]}; {stage.basis or 'no basis given'}"})
    found.append({
        "Part": "total", "Name": "Total", "Length [m]": taken.length_m, "Net [l]": taken.net_ml / 1000, "With waste [l]": taken.gross_ml / 1000, "Cost": taken.cost, "Currency": currency,
        "Remark": " ".join(part for part in (left_out_text(taken), f"Waste by {WASTE_WORDS[taken.source.settings.waste_by]}.", f"Without a price: {', '.join(taken.unpriced)}." if taken.unpriced else "") if part),
    })  # fmt: skip
    return found


# ---- workbook ---------------------------------------------------------------------------------


class NoWorkbook(RuntimeError):
    """openpyxl is not at hand; the CSV holds the same figures."""


def takeoff_xlsx(taken: Takeoff, title: str) -> bytes:
    """A workbook: runs, sums, order, other items and labour, all totals as formulas.

    Raises
    ------
    NoWorkbook
        When openpyxl is not installed.
    """
    try:
        from openpyxl import Workbook
    except ImportError:
        raise NoWorkbook("The workbook needs the package openpyxl, which is not here; take the CSV instead.") from None
    book = Workbook()
    book.properties.title = _plain(title)
    book.properties.creator = "Beadwright"
    writer = _Book(book, taken)
    writer.write()
    out = io.BytesIO()
    book.save(out)
    return _timeless(out.getvalue())


def _plain(text: str) -> str:
    """A text without the control characters that a workbook may not hold."""
    return re.sub(r"[\x00-\x08\x0b\x0c\x0e-\x1f]", "", text)


def _number(value: Fraction | None) -> Decimal | None:
    return None if value is None else Decimal(money_text(value))


class _Book:
    """Writes the sheets; remembers where the rows of runs stand so that sums can point at them."""

    def __init__(self, book: Any, taken: Takeoff) -> None:
        self.book, self.taken = book, taken
        self.first = 2
        self.last = max(2, 1 + len(taken.runs) + len(taken.left_out))
        self.by_divide = taken.source.settings.waste_by == "divide"
        self.money = f"[{taken.source.settings.currency}]" if taken.source.settings.currency else ""

    def write(self) -> None:
        sheet = self.book.active
        sheet.title = "Runs"
        self._runs(sheet)
        self._sums(self.book.create_sheet("Sums"))
        order_total = self._order(self.book.create_sheet("Order"))
        other_total = self._other(self.book.create_sheet("Other"))
        labour_total = self._labour(self.book.create_sheet("Labour"))
        self._total(self.book.create_sheet("Total"), order_total, other_total, labour_total)

    def _put(self, sheet: Any, row: int, cells: Sequence[object]) -> None:
        """One row; a text that begins with = is a formula only when it is ours."""
        for column, value in enumerate(cells, 1):
            if value is None or value == "":
                continue
            cell = sheet.cell(row, column)
            if isinstance(value, _Formula):
                cell.value = value.text
            elif isinstance(value, str):
                cell.value = safe_cell(_plain(value))
                cell.data_type = "s"
            else:
                cell.value = value

    def _head(self, sheet: Any, titles: Sequence[str]) -> None:
        from openpyxl.styles import Font
        from openpyxl.utils import get_column_letter

        self._put(sheet, 1, titles)
        for column, name in enumerate(titles, 1):
            sheet.cell(1, column).font = Font(bold=True)
            sheet.column_dimensions[get_column_letter(column)].width = max(11, min(34, len(name) + 3))
        sheet.freeze_panes = "A2"

    def _runs(self, sheet: Any) -> None:
        names = _sealant_names(self.taken)
        self._head(sheet, (
            "Run", "Zone", "Drawing", "Joint", "Sealant", "Colour", "Phase", "Section", "Length of one [m]", "Count", "Lines", "Length [m]", "Width mean [mm]", "Width least [mm]",
            "Width most [mm]", "Depth or leg [mm]", "True section [mm2]", "Width x depth [mm2]", "Net [l]", "Waste [share]", "With waste [l]", "Remark",
        ))  # fmt: skip
        for row, run in enumerate(_ordered(self.taken), self.first):
            cells: list[object] = [run.name, run.zone or NONE, run.drawing, run.joint, names.get(run.sealant, run.sealant), run.colour or NONE, run.phase or NONE]
            if run.left_out:
                cells += [None] * 14 + [f"left out: {run.left_out}"]
            else:
                waste = f"S{row}/(1-T{row})" if self.by_divide else f"S{row}*(1+T{row})"
                cells += [
                    SECTION_WORDS[run.section], run.one_length_m, run.count, run.lines, _Formula(f"=I{row}*J{row}*K{row}"), run.width_mm if run.width_mm is not None else run.leg_a_mm,
                    run.width_least_mm, run.width_most_mm, run.depth_mm if run.depth_mm is not None else run.leg_b_mm, run.area_mm2, run.rectangle_mm2,
                    _Formula(f"=L{row}*Q{row}/1000"), run.waste_fraction, _Formula(f"={waste}"), None,
                ]  # fmt: skip
            self._put(sheet, row, cells)
        total: list[object] = ["Total", *[None] * 20]
        for column in "LSU":
            total[ord(column) - ord("A")] = _Formula(f"=SUM({column}{self.first}:{column}{self.last})")
        self._put(sheet, self.last + 1, [*total, left_out_text(self.taken)])

    def _matching(self, column: str, tests: Mapping[str, str]) -> _Formula:
        """Sum of a column of the runs where other columns equal cells of this sheet."""
        span = f"{self.first}:{{}}{self.last}"
        parts = [f"(Runs!{key}{span.format(key)}={cell})" for key, cell in tests.items()]
        return _Formula(f"=SUMPRODUCT({'*'.join(parts)}*Runs!{column}{span.format(column)})")

    def _sums(self, sheet: Any) -> None:
        self._head(sheet, ("By", "Name", "Length [m]", "Net [l]", "With waste [l]"))
        row = 2
        for key, column in (("colour", "F"), ("sealant", "E"), ("phase", "G"), ("zone", "B"), ("section", "H")):
            start = row
            # Two sealants of one name are one line here: the workbook can only tell them by name.
            for name in dict.fromkeys(_sum_name(item, key) for item in self.taken.sums[key]):
                self._put(sheet, row, [key, name, *(self._matching(part, {column: f"B{row}"}) for part in "LSU")])
                row += 1
            if row > start:
                self._put(sheet, row, [key, "Total", *(_Formula(f"=SUM({part}{start}:{part}{row - 1})") for part in "CDE")])
                row += 2

    def _order(self, sheet: Any) -> str | None:
        money = self.money
        self._head(sheet, (
            "Sealant", "Colour", "Phase", "To buy [l]", "Package", "Usable in each [ml]", "In a box", "Boxes", "Singly", "Packages", "Usable [l]",
            f"Price of one {money}".strip(), f"Price of a box {money}".strip(), f"Cost {money}".strip(), "Remark",
        ))  # fmt: skip
        row, seen = 2, set()
        for order in self.taken.orders:
            for line in order.lines or (None,):
                key = (order.sealant_name, fold(order.colour), fold(order.phase))
                need = None if key in seen else self._matching("U", {"E": f"A{row}", "F": f"B{row}", "G": f"C{row}"})
                seen.add(key)
                self._put(sheet, row, [order.sealant_name, order.colour or NONE, order.phase or NONE, need, *self._order_line(order, line, row)])
                row += 1
        if row == 2:
            return None
        self._put(sheet, row, ["Total", None, None, *(_Formula(f"=SUM({part}2:{part}{row - 1})") if part in "DJKN" else None for part in "DEFGHIJKLMN")])
        self._put(sheet, row + 1, ["Left over [l]", None, None, _Formula(f"=K{row}-D{row}")])
        return f"Order!N{row}"

    def _order_line(self, order: Order, line: PackLine | None, row: int) -> list[object]:
        if line is None:
            return ["no package fits"]
        pack = line.pack
        box = pack.box_price if pack.box_price is not None else pack.price * pack.per_box if pack.price is not None else None
        return [
            pack.name, float(line.usable_ml), pack.per_box, line.boxes, line.singles, _Formula(f"=H{row}*G{row}+I{row}"), _Formula(f"=F{row}*J{row}/1000"),
            _number(pack.price if pack.price is not None else box if pack.per_box == 1 else None), _number(box), _Formula(f"=H{row}*M{row}+I{row}*L{row}") if line.cost is not None else None,
            "" if order.is_proven else "not proven the best mix",
        ]  # fmt: skip

    def _other(self, sheet: Any) -> str | None:
        self._head(sheet, ("Item", "Size [mm]", "Needed", "Unit", "In one piece", "Pieces", f"Price {self.money}".strip(), f"Cost {self.money}".strip()))
        row = 2
        for need in self.taken.needs:
            factor = 1000.0 if need.unit == "ml" else 1.0
            self._put(sheet, row, [
                need.label, need.diameter_mm, need.amount / factor, "l" if need.unit == "ml" else need.unit, need.piece_size / factor if need.piece_size is not None else None, need.piece_count,
                _number(need.price), _Formula(f"=F{row}*G{row}") if need.cost is not None else None,
            ])  # fmt: skip
            row += 1
        if row == 2:
            return None
        self._put(sheet, row, ["Total", *[None] * 6, _Formula(f"=SUM(H2:H{row - 1})")])
        return f"Other!H{row}"

    def _labour(self, sheet: Any) -> str | None:
        self._head(sheet, ("Stage", "Access", "Length [m]", "Pace [m/h]", "Hours [h]", f"Price of an hour {self.money}".strip(), f"Cost {self.money}".strip(), "Basis"))
        row = 2
        for stage in self.taken.labour:
            price = stage.cost / stage.hours if stage.cost is not None and stage.hours else None
            self._put(sheet, row, [stage.stage, ACCESS_WORDS[stage.access], stage.length_m, stage.pace_m_h, _number(stage.hours), _number(price), _Formula(f"=E{row}*F{row}") if price is not None else None, stage.basis])
            row += 1
        if row == 2:
            return None
        self._put(sheet, row, ["Total", None, None, None, _Formula(f"=SUM(E2:E{row - 1})"), None, _Formula(f"=SUM(G2:G{row - 1})")])
        return f"Labour!G{row}"

    def _total(self, sheet: Any, order: str | None, other: str | None, labour: str | None) -> None:
        self._head(sheet, ("Total", "Value", "Remark"))
        last = self.last + 1
        lines: list[tuple[str, object, str]] = [
            ("Length [m]", _Formula(f"=Runs!L{last}"), left_out_text(self.taken)),
            ("Net [l]", _Formula(f"=Runs!S{last}"), ""),
            ("With waste [l]", _Formula(f"=Runs!U{last}"), f"waste by {WASTE_WORDS[self.taken.source.settings.waste_by]}"),
        ]
        costs = [part for part in (order, other, labour) if part is not None]
        if self.taken.cost is not None and costs:
            lines.append((f"Cost {self.money}".strip(), _Formula("=" + "+".join(costs)), f"without a price: {', '.join(self.taken.unpriced)}" if self.taken.unpriced else ""))
        for row, cells in enumerate(lines, 2):
            self._put(sheet, row, cells)


class _Formula:
    """A formula of ours, so that no text of the user's can become one."""

    def __init__(self, text: str) -> None:
        self.text = text


_STAMP = re.compile(rb"(<dcterms:(?:created|modified)[^>]*>)[^<]*(<)")


def _timeless(data: bytes) -> bytes:
    """The workbook without the hour of its making: the same job gives the same bytes."""
    import zipfile  # only here: no start-up should wait for it

    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as new:
        for item in old.infolist():
            body = old.read(item)
            if item.filename == "docProps/core.xml":
                body = _STAMP.sub(rb"\g<1>2000-01-01T00:00:00Z\g<2>", body)
            fixed = zipfile.ZipInfo(item.filename, (2000, 1, 1, 0, 0, 0))
            fixed.compress_type = zipfile.ZIP_DEFLATED
            new.writestr(fixed, body)
    return out.getvalue()
