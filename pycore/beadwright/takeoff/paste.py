"""Rows pasted from a spreadsheet: separator, header and decimal sign are found, and told before anything is taken.

Nothing is worked out here and nothing is guessed away: a text keeps its digits, gets the unit
that its header names, and whatever cannot be read is answered at its cell by the evaluation.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Mapping, Sequence
from typing import Any

from ..fields import RUN, Field
from ..job.limits import MAX_JOINTS
from ..quantity import KINDS, METRIC, sign_of
from .inputs import fold

MAX_CHARACTERS = 2_000_000
_SAMPLES = 3
# Spellings of a header, folded to letters and digits, for each field of a run.
_HEADERS: dict[str, tuple[str, ...]] = {
    "name": ("run", "name", "item", "description", "mark", "ref", "reference", "label", "element"),
    "zone": ("zone", "area", "elevation", "location", "facade", "where", "place", "level", "floor"),
    "drawing": ("drawing", "drawingref", "drawingreference", "dwg", "sheet", "drg", "detail"),
    "joint": ("joint", "jointid", "asjoint", "jointtype", "type"),
    "length": ("length", "runlength", "len", "l", "lm", "lf", "linearmetres", "linearmeters", "linearfeet"),
    "count": ("count", "howmany", "qty", "quantity", "number", "no", "nr", "times", "pcs", "pieces", "repeats"),
    "lines": ("lines", "linesofbead", "multiplicity", "sides", "beads", "inout", "insideoutside"),
    "sealant": ("sealant", "product", "material"),
    "colour": ("colour", "color", "col"),
    "phase": ("phase", "stage", "lot", "delivery"),
    "section": ("section", "profile", "kind", "shape", "bead"),
    "width": ("width", "meanwidth", "meanwidthasbuilt", "w", "jointwidth", "diameter", "thickness"),
    "width_least": ("narrowest", "widthleast", "leastwidth", "minwidth", "widthmin", "wmin"),
    "width_most": ("widest", "widthmost", "greatestwidth", "maxwidth", "widthmax", "wmax"),
    "depth": ("depth", "d", "sealantdepth", "neck", "cover"),
    "leg_a": ("leg", "lega", "leg1", "a"),
    "leg_b": ("otherleg", "legb", "leg2", "b"),
    "face": ("face", "faceofthefillet", "filletface"),
    "sagitta": ("hollow", "bulge", "holloworbulge", "sag", "sagitta"),
    "backing": ("backing", "rod", "backer", "backerrod"),
    "waste": ("waste", "wasteofthisrun", "wastage"),
    "removal": ("removal", "oldsealantcomesout", "cutout", "remove", "removeold"),
    "access": ("access", "accessclass"),
    "note": ("note", "notes", "remark", "remarks", "comment"),
}
_YES = frozenset({"yes", "y", "true", "1", "x", "ja", "oui", "si", "sí"})
_NO = frozenset({"no", "n", "false", "0", "-", "nein", "non"})
_UNIT_IN_HEADER = re.compile(r"[\[(]\s*([^\])]+?)\s*[\])]\s*$|,\s*([a-z\"'%²]+)\s*$", re.IGNORECASE)
_GROUPED_POINT = re.compile(r"^[+-]?\d{1,3}(,\d{3})+\.\d+$")
_GROUPED_COMMA = re.compile(r"^[+-]?\d{1,3}(\.\d{3})+,\d+$")
_THOUSANDS = re.compile(r"^[+-]?\d{1,3}([.,]\d{3})+$")
_NUMERIC = re.compile(r"^[+-]?[\d.,\s/]+$")


def read_pasted(text: str, units: str, job: Mapping[str, Any] | None = None, columns: Sequence[str | None] | None = None) -> dict[str, Any]:
    """Rows of runs from pasted text.

    Parameters
    ----------
    text : str
        Tab, semicolon or comma separated; the first line may be a header.
    units : str
        `metric` or `inch`: the unit of a number that neither its cell nor its header gives one.
    job : Mapping, optional
        Lets a joint or sealant be named by its name instead of its id.
    columns : sequence of str or None, optional
        The field of each column as a person chose it; None leaves a column out.

    Returns
    -------
    dict
        `rows` (runs without ids), `columns` (how each was understood), `separator`, `decimal`,
        `has_header`, `issues` (each with `row`, `column`), `text` (one sentence).
    """
    issues: list[dict[str, Any]] = []
    if len(text) > MAX_CHARACTERS:
        issues.append(_issue("too-long", f"Only the first {MAX_CHARACTERS} characters are read."))
        text = text[:MAX_CHARACTERS]
    separator = _separator(text)
    grid = [[cell.strip() for cell in line] for line in csv.reader(io.StringIO(text.lstrip("\ufeff"), newline=""), delimiter=separator, strict=False) if any(cell.strip() for cell in line)]
    answer: dict[str, Any] = {"rows": [], "columns": [], "separator": {"\t": "tab", ";": "semicolon", ",": "comma"}[separator], "decimal": "point", "has_header": False, "issues": issues}
    if not grid:
        issues.append(_issue("empty", "Nothing to read: copy the rows with their header line and paste again."))
        return answer | {"text": "Nothing was pasted."}
    found, has_header = _understood(grid, columns)
    body = grid[1:] if has_header else grid
    decimal = _decimal(body, separator)
    answer |= {"has_header": has_header, "decimal": decimal}
    width = max(len(line) for line in grid)
    found = [*found, *[None] * (width - len(found))][:width]
    header = grid[0] if has_header else []
    for index in range(width):
        answer["columns"].append(_column(index, header[index] if index < len(header) else "", found[index], body, units))
    if not any(found):
        issues.append(_issue("no-header", "No column is understood. Put a header line on top, such as Name, Length [m], Count, Width [mm], Colour, or say what each column is."))
        return answer | {"text": f"{len(body)} lines, no column understood."}
    if len(body) > MAX_JOINTS:
        issues.append(_issue("too-many-rows", f"Only the first {MAX_JOINTS} rows are taken."))
    names = _names(job)
    for number, line in enumerate(body[:MAX_JOINTS]):
        answer["rows"].append(_row(line, found, answer["columns"], decimal, names, number, issues))
    taken = sum(column["field"] is not None for column in answer["columns"])
    left = width - taken
    return answer | {"text": f"{len(answer['rows'])} row{'s' if len(answer['rows']) != 1 else ''}; {taken} column{'s' if taken != 1 else ''} understood{f', {left} left aside' if left else ''}."}


def _issue(code: str, message: str, row: int | None = None, column: int | None = None) -> dict[str, Any]:
    return {"code": code, "severity": "warning", "message": message, "row": row, "column": column}


def _separator(text: str) -> str:
    """Tab if there is any, else the sign that cuts every line alike; a semicolon before a comma, which may be decimal."""
    lines = [line for line in text.splitlines() if line.strip()][:50]
    if any("\t" in line for line in lines):
        return "\t"
    if any(";" in line for line in lines):
        return ";"
    return ","


def _fold_header(text: str) -> str:
    return "".join(ch for ch in _UNIT_IN_HEADER.sub("", text).casefold() if ch.isalnum())


def _field_of(header: str) -> str | None:
    folded = _fold_header(header)
    if not folded:
        return None
    for key, spellings in _HEADERS.items():
        if folded in spellings or folded == "".join(ch for ch in RUN[key].label.casefold() if ch.isalnum()):
            return key
    return None


def _understood(grid: Sequence[Sequence[str]], columns: Sequence[str | None] | None) -> tuple[list[str | None], bool]:
    """The field of each column, and whether the first line is a header. A field is taken once, by its first column."""
    found: list[str | None] = []
    for header in grid[0]:
        key = _field_of(header)
        found.append(None if key in found else key)
    has_header = sum(key is not None for key in found) >= max(1, min(2, len(grid[0]) // 2)) and not any(_NUMERIC.match(cell) for cell in grid[0] if cell)
    if columns is not None:
        known = {item.key for item in RUN.fields}
        return [key if key in known else None for key in columns], has_header
    return (found, True) if has_header else ([], False)


def _decimal(body: Sequence[Sequence[str]], separator: str) -> str:
    """Which sign splits decimals, from cells that leave no doubt."""
    comma = point = 0
    for line in body[:2000]:
        for cell in line:
            number = re.match(r"[+-]?[\d.,]+", cell)
            if number is None or _THOUSANDS.match(number[0]):
                continue
            last = max(number[0].rfind(","), number[0].rfind("."))
            if last >= 0:
                comma += number[0][last] == ","
                point += number[0][last] == "."
    if comma and not point:
        return "comma"
    if comma and point:
        return "mixed"
    return "point"


def _unit_of(header: str, item: Field) -> str | None:
    """The unit that a header names, as the field accepts it."""
    if not item.units:
        return None
    match = _UNIT_IN_HEADER.search(header)
    spelled = (match[1] or match[2]) if match else {"lm": "m", "linearmetres": "m", "linearmeters": "m", "lf": "ft", "linearfeet": "ft"}.get(_fold_header(header)) if item.key == "length" else None
    if spelled is None:
        return None
    folded = fold(spelled).replace(" ", "").replace("²", "2").rstrip(".")
    for unit in KINDS[item.kind].units:
        if folded == unit.label.casefold() or folded in unit.spellings:
            return unit.label
    return None


def _column(index: int, header: str, key: str | None, body: Sequence[Sequence[str]], units: str) -> dict[str, Any]:
    samples = [line[index] for line in body if index < len(line) and line[index]][:_SAMPLES]
    if key is None:
        return {"index": index, "header": header, "field": None, "label": None, "unit": None, "unit_from": None, "samples": samples, "text": "left aside"}
    item = RUN[key]
    unit = _unit_of(header, item)
    source = "header" if unit is not None else None
    if unit is None and item.units:
        unit, source = item.units_for(units if units in item.units else METRIC)[0], "job"
    text = item.label + (f", in {sign_of(unit)} where the cell names no unit" if unit else "")
    return {"index": index, "header": header, "field": key, "label": item.label, "unit": unit, "unit_from": source, "samples": samples, "text": text}


def _names(job: Mapping[str, Any] | None) -> dict[str, dict[str, str]]:
    """Ids of joints and sealants by folded name and id."""
    found: dict[str, dict[str, str]] = {"joint": {}, "sealant": {}}
    for field, part in (("joint", "joints"), ("sealant", "sealants")):
        rows = job.get(part) if isinstance(job, Mapping) else None
        for row in rows if isinstance(rows, list) else []:
            if isinstance(row, Mapping) and isinstance(row.get("id"), str):
                found[field].setdefault(fold(row["id"]), row["id"])
                if isinstance(row.get("name"), str):
                    found[field].setdefault(fold(row["name"]), row["id"])
    return found


def _row(line: Sequence[str], found: Sequence[str | None], columns: Sequence[Mapping[str, Any]], decimal: str, names: Mapping[str, Mapping[str, str]], number: int, issues: list[dict[str, Any]]) -> dict[str, Any]:
    row: dict[str, Any] = {}
    for index, key in enumerate(found):
        cell = line[index] if index < len(line) else ""
        if key is None or not cell:
            continue
        item = RUN[key]
        if item.units or item.kind == "count":
            row[key] = _number(cell, columns[index]["unit"] or "", decimal)
        elif item.kind == "flag":
            row[key] = _flag(cell)
        elif item.choices:
            row[key] = _choice(cell, item)
        elif names.get(key):
            row[key] = names[key].get(fold(cell), cell)
            if fold(cell) not in names[key]:
                issues.append(_issue("unknown-name", f"Row {number + 1}: “{cell[:40]}” is no {item.label.lower() if key == 'sealant' else 'joint'} of this job.", number, index))
        else:
            row[key] = cell
    return row


def _number(cell: str, unit: str, decimal: str) -> str:
    """A number with its unit; grouped thousands are joined only where the decimal sign is beyond doubt."""
    match = re.match(r"^([+-]?[\d.,]+)\s*(.*)$", cell)
    if match is not None:
        digits, rest = match[1], match[2]
        if _GROUPED_POINT.match(digits) or (decimal == "point" and digits.count(",") > 1 and _THOUSANDS.match(digits)):
            digits = digits.replace(",", "")
        elif _GROUPED_COMMA.match(digits) or (decimal == "comma" and digits.count(".") >= 1 and _THOUSANDS.match(digits)):
            digits = digits.replace(".", "")
        elif decimal == "comma" and _THOUSANDS.match(digits) and digits.count(",") == 1:
            digits = digits.replace(",", ".")  # 1,234 among decimal commas
        cell = f"{digits} {rest}".strip() if rest[:1] not in ("/", "-", "'", '"') else f"{digits}{rest}"
    return f"{cell} {unit}" if unit and re.fullmatch(r"[+-]?[\d.,\s/-]+", cell) else cell


def _flag(cell: str) -> bool | str:
    word = fold(cell)
    return True if word in _YES else False if word in _NO else cell


def _choice(cell: str, item: Field) -> str:
    """The value of a choice by value or label, or by a word that only one label begins with; else the text as it stands."""
    word = fold(cell)
    for choice in item.choices:
        if word in (choice.value, fold(choice.label)):
            return choice.value
    near = [choice.value for choice in item.choices if fold(choice.label).startswith(word)]
    return near[0] if len(near) == 1 else cell
