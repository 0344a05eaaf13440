"""The workbook opens in LibreOffice, and what it recomputes equals the app's own totals."""

import io
import json
import shutil
import subprocess
from pathlib import Path

import pytest

from beadwright import desk
from takeoffs import bed, make_takeoff

openpyxl = pytest.importorskip("openpyxl")
SOFFICE = shutil.which("soffice") or shutil.which("libreoffice")
pytestmark = pytest.mark.skipif(
    SOFFICE is None,
    reason="LibreOffice is not installed (Debian: libreoffice-calc-nogui), so the workbook is not recomputed by it",
)
ROOT = Path(__file__).parents[3]
DEMO = json.loads((ROOT / "demo" / "harbour-hall.beadwright.json").read_text(encoding="utf-8"))
PACKS = [
    {
        "name": "C",
        "volume": "300 ml",
        "residue": "5 ml",
        "price": "7.90",
        "per_box": "12",
        "sold": "either",
        "box_price": "90.00",
    }
]
JOBS = {
    "demo": DEMO,
    "waste of what is bought, a bad row, texts like formulas": make_takeoff(
        [
            bed(colour="=1+1", zone="-north", phase="@x", name="+SUM(A1)"),
            bed(length="-1 m", name="Bad"),
            bed(colour="grey", zone="N", waste="25 %"),
            bed(colour="Grey", phase='p,"q"'),
        ],
        packs=PACKS,
        waste="10 %",
        waste_by="divide",
        currency="CHF",
        extras=[{"item": "tip", "count": "10", "price": "4.05"}],
    ),
}


@pytest.fixture(scope="module")
def recomputed(tmp_path_factory):
    """Each job's workbook as LibreOffice writes it after working out every formula anew."""
    folder = tmp_path_factory.mktemp("books")
    out = folder / "out"
    paths = []
    for number, job in enumerate(JOBS.values()):
        paths.append(folder / f"{number}.xlsx")
        data = desk.export(job, "takeoff-xlsx")[2]
        # No cached value goes in, so none can come out unworked.
        assert all(
            cell.value is None
            for sheet in openpyxl.load_workbook(io.BytesIO(data), data_only=True)
            for row in sheet
            for cell in row
            if formula_at(data, sheet.title, cell.coordinate)
        )
        paths[-1].write_bytes(data)
    command = [
        SOFFICE,
        f"-env:UserInstallation=file://{folder / 'profile'}",
        "--headless",
        "--convert-to",
        "xlsx:Calc MS Excel 2007 XML",
        "--outdir",
        str(out),
        *map(str, paths),
    ]
    done = subprocess.run(command, capture_output=True, text=True, timeout=240, check=False)
    assert done.returncode == 0, done.stderr[-800:]
    return {
        name: openpyxl.load_workbook(out / path.name, data_only=True)
        for name, path in zip(JOBS, paths, strict=True)
    }


_formulas: dict[int, dict[tuple[str, str], bool]] = {}


def formula_at(data, sheet, place):
    found = _formulas.get(hash(data))
    if found is None:
        book = openpyxl.load_workbook(io.BytesIO(data))
        found = _formulas[hash(data)] = {
            (page.title, cell.coordinate): cell.data_type == "f"
            for page in book
            for row in page
            for cell in row
        }
    return found.get((sheet, place), False)


def row_named(sheet, *names):
    return next(row for row in sheet.iter_rows(values_only=True) if row[: len(names)] == names)


@pytest.mark.parametrize("name", JOBS)
def test_recomputed_totals_equal_the_answer(recomputed, name):
    book = recomputed[name]
    answer = desk.evaluate(JOBS[name])["takeoff"]
    total = row_named(book["Runs"], "Total")
    assert total[11] == pytest.approx(answer["length_m"], rel=1e-9)
    assert total[18] * 1000 == pytest.approx(answer["net_ml"], rel=1e-9)
    assert total[20] * 1000 == pytest.approx(answer["gross_ml"], rel=1e-9)
    cost = next(
        row for row in book["Total"].iter_rows(values_only=True) if str(row[0]).startswith("Cost")
    )
    assert f"{cost[1]:.2f}" == answer["cost"]


@pytest.mark.parametrize("name", JOBS)
def test_recomputed_sums_equal_the_answer(recomputed, name):
    sheet = recomputed[name]["Sums"]
    sums = desk.evaluate(JOBS[name])["takeoff"]["sums"]
    seen = 0
    for key, items in sums.items():
        rows = [
            row for row in sheet.iter_rows(values_only=True) if row[0] == key and row[1] != "Total"
        ]
        assert sum(row[4] for row in rows) * 1000 == pytest.approx(
            sum(item["gross_ml"] for item in items), rel=1e-9
        )
        for length, net, gross in (
            (item["length_m"], item["net_ml"], item["gross_ml"]) for item in items
        ):
            assert any(
                row[2] == pytest.approx(length)
                and row[3] * 1000 == pytest.approx(net)
                and row[4] * 1000 == pytest.approx(gross)
                for row in rows
            ), (key, length)
            seen += 1
    assert seen >= 5


@pytest.mark.parametrize("name", JOBS)
def test_no_cell_comes_out_as_an_error(recomputed, name):
    wrong = [
        (sheet.title, cell.coordinate, cell.value)
        for sheet in recomputed[name]
        for row in sheet
        for cell in row
        if cell.data_type == "e"
    ]
    assert wrong == []
