"""What must hold for every take-off, whatever is typed."""

import copy
import math

from hypothesis import given, settings
from hypothesis import strategies as st

from beadwright import desk
from takeoffs import make_takeoff, taken

mm = st.integers(40, 400).map(lambda value: value / 10)
metres = st.integers(1, 40000).map(lambda value: value / 100)
colours = st.sampled_from(["grey", "sand", "white"])
phases = st.sampled_from(["", "1", "2"])
PACKS = [
    {"name": "C", "volume": "300 ml", "residue": "5 ml", "price": "7.90", "per_box": "12", "sold": "either", "box_price": "90.00"},
    {"name": "S", "volume": "600 ml", "residue": "5 ml", "price": "13.40", "per_box": "20", "sold": "either"},
    {"name": "P", "volume": "20 l", "residue": "200 ml", "price": "410.00"},
]


@st.composite
def runs(draw):
    section = draw(st.sampled_from(["butt", "lap", "fillet", "bridge", "bed", "round"]))
    width = draw(mm)
    row = {"section": section, "length": f"{draw(metres)} m", "count": str(draw(st.integers(1, 5))), "lines": str(draw(st.integers(1, 2))), "colour": draw(colours), "phase": draw(phases), "zone": draw(st.sampled_from(["", "N", "S"])),
           "removal": draw(st.booleans())}  # fmt: skip
    if section == "fillet":
        return row | {"leg_a": f"{width} mm", "leg_b": f"{draw(mm)} mm", "face": draw(st.sampled_from(["flat", "convex"]))}
    row |= {"width": f"{width} mm", "width_least": f"{round(width * 0.8, 1)} mm", "width_most": f"{round(width * 1.3, 1)} mm"}
    return row | ({} if section == "round" else {"depth": f"{draw(mm)} mm"})


def job_of(rows, **more):
    return make_takeoff(rows, packs=PACKS, waste="10 %", primer="all", masking="both", cleaner="all", **more)


def total_keys(found):
    return [found[key] for key in ("length_m", "net_ml", "net_least_ml", "net_most_ml", "rectangle_ml", "gross_ml")]


@settings(max_examples=60, deadline=None)
@given(st.lists(runs(), min_size=1, max_size=5))
def test_every_form_of_the_sum_is_the_same(rows):
    found = taken(job_of(rows))
    for sums in found["sums"].values():
        for key in ("length_m", "net_ml", "gross_ml"):
            assert math.isclose(sum(item[key] for item in sums), found[key], rel_tol=1e-12)
    assert math.isclose(sum(order["gross_ml"] for order in found["orders"]), found["gross_ml"], rel_tol=1e-12)
    assert found["net_least_ml"] <= found["net_ml"] * (1 + 1e-12) and found["net_ml"] <= found["net_most_ml"] * (1 + 1e-12)
    for order in found["orders"]:
        assert order["usable_ml"] >= order["gross_ml"] - 1e-6 and order["proof"]["is_optimal"]


@settings(max_examples=60, deadline=None)
@given(st.lists(runs(), min_size=1, max_size=4), st.integers(0, 3), st.floats(0.05, 0.95))
def test_splitting_a_run_changes_nothing(rows, which, share):
    """The same metres in two rows: the same volume, packages, cost, rod, primer and tape."""
    row = rows[which % len(rows)]
    length = float(row["length"].split()[0])
    first = round(length * share, 4)
    parts = [row | {"length": f"{first:.4f} m"}, row | {"length": f"{length - first:.4f} m"}]
    if first <= 0 or length - first <= 0:
        return
    split = [*rows[: which % len(rows)], *parts, *rows[which % len(rows) + 1 :]]
    one, two = taken(job_of(rows)), taken(job_of(split))
    assert all(math.isclose(left, right, rel_tol=1e-11) for left, right in zip(total_keys(one), total_keys(two), strict=True))
    assert one["cost"] == two["cost"]
    assert [order["packs"] for order in one["orders"]] == [order["packs"] for order in two["orders"]]
    for left, right in zip(one["needs"], two["needs"], strict=True):
        assert left["label"] == right["label"] and math.isclose(left["amount"], right["amount"], rel_tol=1e-11)


@settings(max_examples=60, deadline=None)
@given(st.lists(runs(), min_size=2, max_size=6), st.randoms(use_true_random=False))
def test_the_order_of_rows_changes_nothing(rows, dice):
    mixed, packs = copy.deepcopy(rows), copy.deepcopy(PACKS)
    dice.shuffle(mixed)
    dice.shuffle(packs)
    one = taken(job_of(rows))
    job = job_of(mixed)
    job["takeoff"]["packs"] = [{"id": pack["name"], **pack} for pack in packs]
    two = taken(job)
    assert total_keys(one) == total_keys(two) and one["cost"] == two["cost"] and one["sums"] == two["sums"] and one["needs"] == two["needs"]
    plain = [[[(pack["name"], pack["boxes"], pack["singles"]) for pack in order["packs"]] for order in found["orders"]] for found in (one, two)]
    assert plain[0] == plain[1]


@settings(max_examples=60, deadline=None)
@given(st.integers(2, 64), st.integers(2, 32), st.integers(1, 4000), st.sampled_from(["butt", "bed", "lap", "bridge"]))
def test_metric_and_inch_agree(width, depth, length, section):
    """Sixteenths of an inch and tenths of a foot, written in either system, in a job of either system."""
    inch = {"section": section, "width": f"{width}/16 in", "depth": f"{depth}/16 in", "length": f"{length / 10} ft"}
    metric = {"section": section, "width": f"{width * 254 / 160:.5f} mm", "depth": f"{depth * 254 / 160:.5f} mm", "length": f"{length * 304.8 / 10:.4f} mm"}
    packs = [{"name": "C", "volume": "10.1 US fl oz", "price": "7"}, {"name": "S", "volume": "600 ml", "price": "13"}]
    found = [taken(make_takeoff([row], packs=packs, units=units)) for row, units in ((inch, "metric"), (metric, "inch"))]
    # The rod series is a setting of the site and differs by unit system; it changes the crown of a butt.
    keys = ("length_m", "rectangle_ml") if section == "butt" else ("length_m", "net_ml", "gross_ml", "rectangle_ml")
    for key in keys:
        assert math.isclose(found[0][key], found[1][key], rel_tol=1e-9), key
    if section != "butt":
        assert [order["packs"] for order in found[0]["orders"]] == [order["packs"] for order in found[1]["orders"]]


@settings(max_examples=40, deadline=None)
@given(st.lists(runs(), min_size=1, max_size=4), st.integers(1, 30), st.integers(1, 20))
def test_more_waste_never_costs_less(rows, waste, more):
    costs = []
    for share in (waste, waste + more):
        job = job_of(rows)
        job["takeoff"]["waste"] = f"{share} %"
        costs.append(float(taken(job)["cost"]))
    assert costs[0] <= costs[1]


texts = st.one_of(st.text(max_size=12), st.sampled_from(["=1+1", "-", "1e12 m", "12 mm", "5/8", "½", "NaN", "\x00", "10 %", "1,000", "0", "-5 m", "true"]), st.booleans(), st.none(), st.integers(-5, 5), st.floats(allow_nan=True))
names = st.sampled_from(["length", "width", "depth", "count", "lines", "colour", "phase", "sealant", "joint", "section", "waste", "leg_a", "face", "sagitta", "backing", "removal", "volume", "residue", "price", "per_box", "sold", "pace", "stage"])
nasty_rows = st.lists(st.one_of(st.dictionaries(names, texts, max_size=6), texts), max_size=4)


@settings(max_examples=150, deadline=None)
@given(nasty_rows, nasty_rows, nasty_rows, st.dictionaries(st.sampled_from(["waste", "waste_by", "colours", "currency", "packs_per_tip", "mix_pace", "primer"]), texts, max_size=3))
def test_nothing_typed_raises(run_rows, pack_rows, other_rows, more):
    job = make_takeoff([]) | {"takeoff": {**more, "runs": run_rows, "packs": pack_rows, "extras": other_rows, "rates": other_rows}}
    desk.to_json(desk.evaluate(job))
    desk.export(job, "takeoff-csv")


@settings(max_examples=150, deadline=None)
@given(st.text(alphabet=st.sampled_from("Length\twidth,;\n\"1.5 m|colour=[]éß½\r"), max_size=80), st.sampled_from(["metric", "inch"]))
def test_no_pasted_text_raises(text, units):
    found = desk.paste_runs(text, units)
    desk.to_json(found)
    assert all(isinstance(value, (str, bool)) for row in found["rows"] for value in row.values())
