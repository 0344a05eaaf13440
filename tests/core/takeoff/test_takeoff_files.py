"""The take-off as a file: the same totals in every form, live formulas in the workbook, nothing that runs."""

import csv
import io
import json
import re
from pathlib import Path

import pytest

from beadwright import desk
from takeoffs import bed, make_takeoff

openpyxl = pytest.importorskip("openpyxl")
ROOT = Path(__file__).parents[3]
DEMO = json.loads((ROOT / "demo" / "harbour-hall.beadwright.json").read_text(encoding="utf-8"))
MONEY = [{"name": "C", "volume": "300 ml", "residue": "5 ml", "price": "7.90", "per_box": "12", "sold": "either", "box_price": "90.00"}]


def nasty():
    rows = [bed(colour="=1+1", zone="-north", phase="@x", name="+SUM(A1)", note="x"), bed(length="-1 m", name="Bad"), bed(colour="grey", zone="N", waste="25 %"), bed(colour="Grey", name="a\x01b", phase="p,\"q\"\n2")]
    return make_takeoff(rows, packs=MONEY, waste="10 %", waste_by="divide", currency="CHF", extras=[{"item": "tip", "count": "10", "price": "4.05"}], rates=[{"stage": "=Seal", "pace": "7 m/h", "hour_price": "41.50", "basis": "log"}])


JOBS = {"demo": DEMO, "nasty": nasty(), "plain": make_takeoff([bed()]), "empty": make_takeoff([])}


def rows_of(job):
    data = desk.export(job, "takeoff-csv")[2]
    assert data.startswith(b"\xef\xbb\xbf") and data.count(b"\r\n") >= 2
    return list(csv.DictReader(io.StringIO(data.decode("utf-8-sig"), newline=""), strict=True))


# ---- a small evaluator of the workbook's formulas ----------------------------------------------


class Book:
    """Works out SUM, SUMPRODUCT of products of equalities, and plain arithmetic, as a spreadsheet does."""

    def __init__(self, data: bytes) -> None:
        self.book = openpyxl.load_workbook(io.BytesIO(data))
        self.formulas = 0

    def value(self, sheet: str, place: str):
        found = self.book[sheet][place]
        if found.data_type == "f":
            self.formulas += 1
            return self.work(sheet, found.value[1:])
        return found.value

    def cells(self, sheet: str, span: str):
        return [self.value(sheet, cell.coordinate) for row in self.book[sheet][span] for cell in row]

    def work(self, sheet: str, text: str):
        if match := re.fullmatch(r"SUM\(([A-Z]+\d+:[A-Z]+\d+)\)", text):
            return sum(value for value in self.cells(sheet, match[1]) if isinstance(value, (int, float)))
        if match := re.fullmatch(r"SUMPRODUCT\((.*)\)", text):
            *tests, numbers = match[1].split("*")
            lists = []
            for test in tests:
                other, span, cell = re.fullmatch(r"\((\w+)!([A-Z]+\d+:[A-Z]+\d+)=([A-Z]+\d+)\)", test).groups()
                wanted = self.value(sheet, cell)
                # Equality of texts in a spreadsheet does not see capitals.
                lists.append([str(value).casefold() == str(wanted).casefold() for value in self.cells(other, span)])
            other, span = numbers.split("!")
            amounts = [value or 0.0 for value in self.cells(other, span)]
            return sum(amount for amount, *hits in zip(amounts, *lists, strict=True) if all(hits))
        names = re.sub(r"(?:(\w+)!)?([A-Z]+\d+)", lambda match: repr(float(self.value(match[1] or sheet, match[2]) or 0)), text)
        assert re.fullmatch(r"[\d.e+\-*/() ]+", names), names
        return eval(names)  # digits and signs only, as the line above holds


@pytest.mark.parametrize("name", JOBS)
def test_the_workbook_sums_are_formulas_and_equal_the_answer(name):
    job = JOBS[name]
    answer, book = desk.evaluate(job)["takeoff"], Book(desk.export(job, "takeoff-xlsx")[2])
    last = next(cell.row for cell in book.book["Runs"]["A"] if cell.value == "Total")
    for column, key, scale in (("L", "length_m", 1), ("S", "net_ml", 1000), ("U", "gross_ml", 1000)):
        assert book.book["Runs"][f"{column}{last}"].data_type == "f"
        assert book.value("Runs", f"{column}{last}") * scale == pytest.approx(answer["length_m" if key == "length_m" else key], rel=1e-12)
    sums = book.book["Sums"]
    expected = {(key, item["label"] if item["label"] != "none named" else "(none)"): item for key, rows in answer["sums"].items() for item in rows}
    seen = 0
    for row in range(2, sums.max_row + 1):
        key, label = sums[f"A{row}"].value, sums[f"B{row}"].value
        item = expected.get((key, str(label).removeprefix("'")))
        if item is not None and label != "Total":
            seen += 1
            for column, part, scale in (("C", "length_m", 1), ("D", "net_ml", 1000), ("E", "gross_ml", 1000)):
                assert sums[f"{column}{row}"].data_type == "f" and book.value("Sums", f"{column}{row}") * scale == pytest.approx(item[part], rel=1e-12), (key, label)
    assert seen == len(expected)
    order = book.book["Order"]
    if answer["orders"]:
        end = next(cell.row for cell in order["A"] if cell.value == "Total")
        assert book.value("Order", f"D{end}") * 1000 == pytest.approx(answer["gross_ml"], rel=1e-12)
        assert book.value("Order", f"J{end}") == sum(pack["count"] for item in answer["orders"] for pack in item["packs"])
        assert book.value("Order", f"D{end + 1}") * 1000 == pytest.approx(sum(item["left_ml"] for item in answer["orders"]), rel=1e-6, abs=1e-6)
    if answer["cost"] is not None:
        place = next(cell.row for cell in book.book["Total"]["A"] if str(cell.value).startswith("Cost"))
        assert book.value("Total", f"B{place}") == pytest.approx(float(answer["cost"]), abs=1e-9)
    assert book.formulas > 0


@pytest.mark.parametrize("name", JOBS)
def test_the_csv_totals_are_the_answer(name):
    answer, rows = desk.evaluate(JOBS[name])["takeoff"], rows_of(JOBS[name])
    (total,) = (row for row in rows if row["Part"] == "total")
    for key, column, scale in (("length_m", "Length [m]", 1), ("net_ml", "Net [l]", 1000), ("gross_ml", "With waste [l]", 1000)):
        assert float(total[column]) * scale == pytest.approx(answer[key], abs=1e-5)
        counted = [float(row[column]) * scale for row in rows if row["Part"] == "run" and row[column]]
        assert sum(counted) == pytest.approx(answer[key], rel=1e-7, abs=1e-4)
    assert total["Cost"] == (answer["cost"] or "")
    assert sum(float(row["Cost"]) for row in rows if row["Part"] in ("order", "other", "labour") and row["Cost"]) == pytest.approx(float(answer["cost"] or 0))


def test_the_table_on_screen_says_the_same_total():
    answer = desk.evaluate(DEMO)["takeoff"]
    texts = [table["rows"][-1]["cells"] for table in answer["tables"] if table["key"] in ("orders", "runs") or table["key"].startswith("sums-")]
    gross = next(band for band in answer["answers"] if band["key"] == "sealant")["answer"]
    assert len(texts) >= 5 and all(gross in cells for cells in texts)


def test_the_csv_says_its_units_and_what_is_left_out():
    rows = rows_of(nasty())
    assert {"Length [m]", "True section [mm2]", "Net [l]", "Waste [share]"} <= set(rows[0])
    bad = next(row for row in rows if row["Name"] == "Bad")
    assert bad["Remark"].startswith("left out") and not bad["Net [l]"]
    assert "1 run left out" in rows[-1]["Remark"] and "÷" in rows[-1]["Remark"]


def test_no_text_becomes_a_formula():
    risky = ("=", "+", "-", "@")
    for row in rows_of(nasty()):
        for column, cell in row.items():
            assert not cell.startswith(risky) or re.fullmatch(r"-?\d[\d.e+-]*", cell), (column, cell)
    book = openpyxl.load_workbook(io.BytesIO(desk.export(nasty(), "takeoff-xlsx")[2]))
    for sheet in book:
        for line in sheet.iter_rows():
            for cell in line:
                if cell.data_type == "f":
                    assert re.fullmatch(r"=[A-Za-z0-9!:()=*/+\-]+", cell.value), cell.value
                elif isinstance(cell.value, str):
                    assert not cell.value.startswith(risky)


def test_the_same_job_gives_the_same_bytes():
    assert desk.export(DEMO, "takeoff-xlsx") == desk.export(json.loads(json.dumps(DEMO)), "takeoff-xlsx")
    name, media, _ = desk.export(DEMO, "takeoff-xlsx")
    assert name == "ex-01-take-off.xlsx" and media.endswith("spreadsheetml.sheet")


def test_without_openpyxl_the_csv_is_named_instead(monkeypatch):
    import builtins

    from beadwright.sheet.takeoff_files import NoWorkbook

    real = builtins.__import__

    def without(name, *args, **more):
        if name.startswith("openpyxl"):
            raise ImportError(name)
        return real(name, *args, **more)

    monkeypatch.setattr(builtins, "__import__", without)
    with pytest.raises(NoWorkbook, match="CSV"):
        desk.export(DEMO, "takeoff-xlsx")
    assert desk.export(DEMO, "takeoff-csv")[2]


def test_the_picture_is_clean_svg_and_says_each_bar():
    import xml.etree.ElementTree as ET

    for job in (DEMO, nasty(), make_takeoff([bed(colour=f"c{index}") for index in range(40)])):
        root = ET.fromstring(desk.evaluate(job)["takeoff"]["drawing"])
        for node in root.iter():
            assert node.tag.removeprefix("{http://www.w3.org/2000/svg}") in {"svg", "title", "path", "rect", "text"}
            assert not {name for name in node.attrib if name.startswith("on") or name in ("style", "href")}
        assert len([node for node in root.iter() if node.tag.endswith("rect")]) >= 3
    assert "27 more" in desk.evaluate(make_takeoff([bed(colour=f"c{index}") for index in range(40)]))["takeoff"]["drawing"]


def test_the_demo_shows_what_it_should():
    answer = desk.evaluate(DEMO)
    assert not [issue for issue in answer["issues"] if issue["path"].startswith("/takeoff") and issue["severity"] == "error"]
    found = answer["takeoff"]
    assert {run["section"] for run in found["runs"]} >= {"butt", "fillet", "round"} and len(found["sums"]["colour"]) == 3
    assert any(float(row["lines"]) == 2 for row in DEMO["takeoff"]["runs"]) and any("'" in row["length"] for row in DEMO["takeoff"]["runs"])
    assert "invented" in DEMO["takeoff"]["note"].lower() and found["cost"]


# ---- side by side -----------------------------------------------------------------------------


def test_two_alternatives_side_by_side():
    """Joints 3 mm wider: what a bed of 12 mm takes goes up by a quarter."""
    job = make_takeoff([bed(phase="1"), bed(phase="2")], packs=MONEY)
    before = json.dumps(job)
    found = {row["key"]: row for row in desk.compare_takeoff(job, {"width": "3 mm"})["rows"]}
    assert found["net"]["other"] == pytest.approx(1.25 * found["net"]["mine"]) and "+25 %" in found["net"]["change_text"]
    together = {row["key"]: row for row in desk.compare_takeoff(job, {"one_phase": True})["rows"]}
    assert together["net"]["change"] == 0 and together["left"]["other"] <= together["left"]["mine"] + 1e-9
    assert json.dumps(job) == before


def test_another_class_or_job_side_by_side_and_a_bad_width_is_told():
    job = make_takeoff([{"joint": "j", "length": "10 m"}], joint={"width_is": "drawn"}, packs=MONEY)
    found = {row["key"]: row for row in desk.compare_takeoff(job, {"sealants": {"s": {"class": "c920-25"}}})["rows"]}
    assert found["net"]["other"] > found["net"]["mine"]  # a lower class wants a wider joint
    assert desk.compare_takeoff(job, {"width": "wide"})["error"]
    assert desk.compare_takeoff(job, other=make_takeoff([]) | {"takeoff": {}})["error"]


# ---- pasted -----------------------------------------------------------------------------------


def test_a_spreadsheet_paste_with_decimal_commas():
    text = "Bezeichnung\tName\tLength [m]\tCount\tWidth (mm)\tDepth (mm)\tColour\nx\tNorth\t12,5\t4\t16\t8\tgrey\nx\tSouth\t1.234,5\t1\t20\t10\tgrey\n"
    found = desk.paste_runs(text, "metric")
    assert (found["separator"], found["decimal"], found["has_header"]) == ("tab", "comma", True)
    assert found["rows"][0] == {"name": "North", "length": "12,5 m", "count": "4", "width": "16 mm", "depth": "8 mm", "colour": "grey"}
    assert found["rows"][1]["length"] == "1234,5 m"
    assert [column["field"] for column in found["columns"]] == [None, "name", "length", "count", "width", "depth", "colour"]
    assert found["columns"][2]["text"] == "Length, in m where the cell names no unit" and found["columns"][0]["text"] == "left aside"
    job = make_takeoff([{"section": "bed", **row} for row in found["rows"]])
    assert desk.evaluate(job)["takeoff"]["length_m"] == pytest.approx(4 * 12.5 + 1234.5)


def test_a_comma_file_with_quotes_and_inches():
    text = 'Run,Zone,"Length, ft",Width,Lines,Remove\n"Head, north",N,"1,200.5","5/8",2,yes\nSill,N,12\' 6",3/4 in,1,no\n'
    found = desk.paste_runs(text, "inch")
    assert found["separator"] == "comma"
    assert found["rows"][0] == {"name": "Head, north", "zone": "N", "length": "1200.5 ft", "width": "5/8 in", "lines": "2", "removal": True}
    assert found["rows"][1] == {"name": "Sill", "zone": "N", "length": "12' 6\"", "width": "3/4 in", "lines": "1", "removal": False}


def test_a_semicolon_file_and_names_of_joints_and_choices():
    text = "Name;Joint;Sealant;Length;Section;Access\nA;joint;Sealant;5;As the joint;swing stage\nB;nowhere;Sealant;5;fillet;ground\n"
    found = desk.paste_runs(text, "metric", make_takeoff([]))
    assert found["separator"] == "semicolon"
    assert found["rows"][0] == {"name": "A", "joint": "j", "sealant": "s", "length": "5 m", "section": "auto", "access": "stage"}
    assert found["rows"][1]["joint"] == "nowhere" and found["rows"][1]["section"] == "fillet"
    assert [(issue["code"], issue["row"], issue["column"]) for issue in found["issues"]] == [("unknown-name", 1, 1)]


def test_an_ambiguous_number_is_left_as_it_is_and_refused_at_its_cell():
    found = desk.paste_runs("Name\tLength\nA\t1,234\n", "metric")
    assert found["rows"][0]["length"] == "1,234 m"
    job = make_takeoff([{"section": "bed", "width": "12 mm", "depth": "6 mm", **found["rows"][0]}])
    assert [issue["code"] for issue in desk.evaluate(job)["issues"] if issue["path"] == "/takeoff/runs/0/length"][:1] == ["ambiguous-comma"]


def test_without_a_header_nothing_is_guessed_but_a_person_may_say():
    text = "North\t12.5\t16\nSouth\t8\t20\n"
    found = desk.paste_runs(text, "metric")
    assert found["rows"] == [] and found["issues"][0]["code"] == "no-header"
    said = desk.paste_runs(text, "metric", None, ["name", "length", "width"])
    assert said["rows"] == [{"name": "North", "length": "12.5 m", "width": "16 mm"}, {"name": "South", "length": "8 m", "width": "20 mm"}] and not said["has_header"]


def test_formula_text_is_kept_as_text_and_refused_at_its_cell():
    found = desk.paste_runs("Name\tLength\nA\t=B2*2\n", "metric")
    assert found["rows"][0]["length"] == "=B2*2"


def test_an_empty_paste_says_so():
    assert desk.paste_runs("  \n", "metric")["issues"][0]["code"] == "empty"


# ---- printed ----------------------------------------------------------------------------------


def test_the_printed_sheet_holds_the_take_off_with_the_same_total():
    answer = desk.evaluate(DEMO)["takeoff"]
    gross = next(band for band in answer["answers"] if band["key"] == "sealant")["answer"]
    page, text = desk.export(DEMO, "sheet")[2].decode(), desk.export(DEMO, "text")[2].decode()
    for shown in (page[page.index(">Take-off<") :], text[text.index("\nTake-off\n") :]):
        assert gross in shown and answer["cost"] in shown and "Working" in shown
    assert ">Take-off<" not in desk.export(make_takeoff([]) | {"takeoff": {}}, "sheet")[2].decode()


def test_every_step_can_be_followed():
    for job in (DEMO, DEMO | {"units": "inch"}):
        steps = desk.evaluate(job)["takeoff"]["steps"]
        assert len(steps) >= 5
        for step in steps:
            assert step["title"] and step["formula"] and step["result"] and step["source"] and "{" not in step["numbers"], step
