"""Pure parts of the store, run in the browser that they are for: hashes, texts, retention, undo list, migrations."""

from __future__ import annotations

import hashlib
import json

import pytest

from .conftest import FIXTURES, WEB

pytestmark = pytest.mark.browser


@pytest.fixture(scope="module")
def page(store_browser, store_url):
    """Nothing here touches the database: one page does for all."""
    context = store_browser.new_context(timezone_id="Europe/Berlin", locale="en-GB")
    page = context.new_page()
    page.goto(f"{store_url}/store_page.html")
    page.wait_for_function("window.bw !== undefined")
    yield page
    context.close()


# Source: FIPS 180-4 (NIST, 2015) by way of its published example values for SHA-256; the long ones are checked
# against hashlib, an independent implementation.
FIPS_EXAMPLES = {
    "": "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855",
    "abc": "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad",
    "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq": "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
}


@pytest.mark.parametrize("text", list(FIPS_EXAMPLES))
def test_sha256_gives_the_published_examples(page, text):
    assert page.evaluate("(t) => bw.sha.sha256Sync(new TextEncoder().encode(t))", text) == FIPS_EXAMPLES[text]


def test_sha256_agrees_with_another_implementation_at_every_length_up_to_three_blocks(page):
    ours = page.evaluate(
        "() => Array.from({length: 200}, (_, n) => bw.sha.sha256Sync(Uint8Array.from({length: n}, (_, i) => (i * 7 + n) % 256)))"
    )
    assert ours == [hashlib.sha256(bytes((i * 7 + n) % 256 for i in range(n))).hexdigest() for n in range(200)]


def test_both_ways_of_hashing_agree(page):
    one, two = page.evaluate(
        """async () => { const bytes = new TextEncoder().encode("sealant ".repeat(9999));
        return [bw.sha.sha256Sync(bytes), await bw.sha.sha256(bytes)]; }"""
    )
    assert one == two


def test_the_hash_of_a_record_can_be_checked_without_our_code(page):
    sealed = page.evaluate(
        """() => bw.envelope.seal({kind: "job", schema: 1, id: "a", rev: 3, parent: 2, saved_at: "2026-01-02T03:04:05.678Z",
        app: "1", core: "2", tables: ["t@1"], payload: {id: "a", z: [1, null, true, {b: "é\\u2028\\n", a: ""}], a: {}}})"""
    )
    told = sealed.pop("sha256")
    text = json.dumps(sealed, sort_keys=True, separators=(",", ":"), ensure_ascii=False)
    assert hashlib.sha256(text.encode()).hexdigest() == told


def test_the_hash_does_not_depend_on_the_order_of_keys(page):
    assert page.evaluate(
        """() => { const parts = {kind: "job", schema: 1, id: "a", rev: 1, parent: null, saved_at: "", app: "", core: "", tables: []};
        return bw.envelope.hashOf({...parts, payload: {id: "a", x: 1, y: 2}}) === bw.envelope.hashOf({...parts, payload: {y: 2, x: 1, id: "a"}}); }"""
    )


@pytest.mark.parametrize("field", ["id", "rev", "parent", "saved_at", "app", "core", "tables", "schema", "payload", "kind"])
def test_a_change_in_any_part_of_a_record_is_noticed(page, field):
    fault = page.evaluate(
        """(field) => { const sealed = bw.envelope.seal({kind: "job", schema: 1, id: "a", rev: 2, parent: 1, saved_at: "2026",
        app: "1", core: "2", tables: [], payload: {id: "a", width: "16 mm"}});
        const other = {kind: "draft", id: "b", rev: 3, parent: 2, saved_at: "2027", app: "9", core: "9", tables: ["x"], schema: 2, payload: {id: "a", width: "17 mm"}};
        return [bw.envelope.findFault(sealed), bw.envelope.findFault({...sealed, [field]: other[field]})]; }""",
        field,
    )
    assert fault == [None, "its checksum does not agree"]


# ---- retention ---------------------------------------------------------------------------------------------------


def drop(page, revisions, now, held=()):
    full = [{"pinned": False, "exported": False, **r} for r in revisions]
    return page.evaluate(
        "([r, now, held]) => bw.retention.revisionsToDrop(r, now, new Set(held), (iso) => iso.slice(0, 10))", [full, now, list(held)]
    )


def day_of(day: int, hour: int = 12) -> str:
    return f"2026-03-{day:02d}T{hour:02d}:00:00.000Z"


def test_retention_keeps_three_of_today(page):
    revisions = [{"rev": i, "saved_at": day_of(10, i)} for i in range(1, 8)]
    assert drop(page, revisions, day_of(10, 20)) == [1, 2, 3, 4]


def test_retention_keeps_the_last_one_of_each_earlier_day(page):
    revisions = [{"rev": 10 * day + i, "saved_at": day_of(day, i)} for day in (5, 6, 7) for i in (1, 2)]
    assert drop(page, revisions, day_of(10)) == [51, 61, 71]


def test_retention_keeps_ten_in_all(page):
    revisions = [{"rev": day, "saved_at": day_of(day)} for day in range(1, 16)]
    assert drop(page, revisions, day_of(20)) == [1, 2, 3, 4, 5]


def test_retention_never_drops_the_newest(page):
    assert drop(page, [{"rev": 7, "saved_at": "nonsense"}], day_of(1)) == []
    assert 9 not in drop(page, [{"rev": i, "saved_at": day_of(1, i)} for i in range(10)], day_of(1, 20))


@pytest.mark.parametrize("mark", ["pinned", "exported"])
def test_retention_keeps_pinned_and_exported_besides_the_ten(page, mark):
    revisions = [{"rev": day, "saved_at": day_of(day)} for day in range(1, 16)]
    revisions[1][mark] = True
    assert drop(page, revisions, day_of(20)) == [1, 3, 4, 5]


def test_retention_keeps_the_undo_steps(page):
    revisions = [{"rev": i, "saved_at": day_of(10, i)} for i in range(1, 8)]
    assert drop(page, revisions, day_of(10, 20), held=[2, 3]) == [1, 4]


def test_retention_counts_a_record_of_tomorrow_as_of_today(page):
    revisions = [{"rev": i, "saved_at": day_of(20 + i)} for i in range(1, 7)]
    assert drop(page, revisions, day_of(10)) == [1, 2, 3]


def test_retention_is_stable(page):
    """What has been thinned out once is not thinned out again at the same moment."""
    revisions = [{"rev": 10 * day + i, "saved_at": day_of(day, i)} for day in range(1, 15) for i in range(5)]
    gone = set(drop(page, revisions, day_of(14, 20)))
    left = [r for r in revisions if r["rev"] not in gone]
    assert len(left) == 10
    assert drop(page, left, day_of(14, 20)) == []


# ---- undo list ---------------------------------------------------------------------------------------------------


def test_the_undo_list_is_at_least_fifty_deep_and_bounded(page):
    depth, entries = page.evaluate(
        """() => { let h = bw.history.EMPTY_HISTORY;
        for (let i = 1; i <= 300; i++) h = bw.history.withStep(h, {rev: i, label: String(i), at: ""});
        return [bw.history.describe(h).depth, h.entries.length]; }"""
    )
    assert depth >= 50
    assert entries == depth + 1


def test_a_new_step_after_undo_gives_up_what_was_undone(page):
    state = page.evaluate(
        """() => { let h = bw.history.EMPTY_HISTORY;
        for (const rev of [1, 2, 3]) h = bw.history.withStep(h, {rev, label: "s" + rev, at: ""});
        h = bw.history.withMove(h, -1, 4);
        const undone = bw.history.describe(h);
        return [undone, bw.history.describe(bw.history.withStep(h, {rev: 5, label: "s5", at: ""}))]; }"""
    )
    assert state[0] == {"canUndo": True, "canRedo": True, "undoLabel": "s2", "redoLabel": "s3", "depth": 1}
    assert state[1] == {"canUndo": True, "canRedo": False, "undoLabel": "s5", "redoLabel": None, "depth": 2}


@pytest.mark.parametrize(
    "bad", [None, 7, "x", {}, {"entries": [], "at": 3}, {"entries": [{}], "at": 0}, {"entries": [{"rev": "1", "label": ""}], "at": 0}]
)
def test_a_damaged_undo_list_is_an_empty_one(page, bad):
    assert page.evaluate("(bad) => bw.history.checkedHistory(bad)", bad) == {"entries": [], "at": -1}


# ---- migrations --------------------------------------------------------------------------------------------------


def test_migrations_are_numbered_without_gaps_and_each_stored_version_has_a_fixture(page):
    newest, steps = page.evaluate("() => [bw.migrations.RECORD_SCHEMA, bw.migrations.MIGRATIONS.map((m) => m.to)]")
    assert steps == list(range(2, newest + 1))
    for version in range(1, newest + 1):
        fixture = json.loads((FIXTURES / f"v{version}.json").read_text(encoding="utf-8"))
        assert fixture["schema"] == version
        assert fixture["stores"]["revisions"], "a fixture without records proves nothing"
        assert {r["schema"] for r in fixture["stores"]["revisions"]} == {version}


def test_migrations_do_not_change_once_released(page):
    """Each step's text is in a lock file; a step that has been released is never edited."""
    lock = json.loads((FIXTURES / "LOCK.json").read_text(encoding="utf-8"))
    for version, told in lock["fixtures"].items():
        assert hashlib.sha256((FIXTURES / f"v{version}.json").read_bytes()).hexdigest() == told, f"fixture of version {version}"
    steps = sorted((WEB / "src" / "store").glob("migration_*.ts"))
    assert {s.name for s in steps} == set(lock["migrations"])
    for step in steps:
        assert hashlib.sha256(step.read_bytes()).hexdigest() == lock["migrations"][step.name], step.name
    newest = page.evaluate("() => bw.migrations.RECORD_SCHEMA")
    assert set(lock["fixtures"]) == {str(v) for v in range(1, newest + 1)}


def test_steps_run_in_order_from_the_version_of_the_record(page):
    done = page.evaluate(
        """() => { const step = (to) => ({to, migrate: (p) => ({...p, done: [...(p.done ?? []), to]})});
        const steps = [step(4), step(2), step(3)];
        const run = (schema) => bw.migrations.migratePayload({schema, payload: {id: "a"}}, 4, steps).done ?? [];
        return [run(1), run(3), run(4)]; }"""
    )
    assert done == [[2, 3, 4], [4], []]


def test_a_missing_step_is_refused(page):
    got = page.evaluate("() => bw.outcome(() => bw.migrations.migratePayload({schema: 1, payload: {id: 'a'}}, 3, []))")
    assert got["code"] == "damaged"


# ---- limits ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("key", ["__proto__", "constructor", "prototype"])
def test_prototype_pollution_keys_are_refused_at_any_depth(page, key):
    text = json.dumps({"id": "a", "joints": [{"note": {key: {"x": 1}}}]})
    assert key in page.evaluate("(text) => bw.limits.findRefusal(JSON.parse(text))", text)


def test_too_deep_and_too_long_are_refused_with_the_limit(page):
    deep = page.evaluate("() => { let v = {}; for (let i = 0; i < 100000; i++) v = {v}; return bw.limits.findRefusal(v); }")
    assert "64 levels" in deep
    assert "10 characters" in page.evaluate("() => bw.limits.findRefusal({a: ['x'.repeat(11)]}, 10)")
    assert page.evaluate("() => bw.limits.findRefusal({a: ['x'.repeat(10)], b: [[[{}]]]}, 10)") is None


# ---- texts -------------------------------------------------------------------------------------------------------


def test_saved_text_says_the_time_and_where(page):
    text = page.evaluate("() => bw.texts.savedText('2026-03-04T13:32:10Z', new Date('2026-03-04T20:00:00Z'))")
    assert text == "Saved 14:32 on this tablet"
    text = page.evaluate("() => bw.texts.savedText('2026-03-04T13:32:10Z', new Date('2026-03-06T20:00:00Z'))")
    assert text == "Saved 4 Mar, 14:32 on this tablet"


@pytest.mark.parametrize(
    ("seconds", "expected"),
    [(5, "just now"), (130, "2 minutes ago"), (3600, "1 hour ago"), (3 * 86400 + 5, "3 days ago"), (86400, "1 day ago")],
)
def test_backup_age_in_words(page, seconds, expected):
    text = page.evaluate("(s) => bw.texts.backupText(new Date(1e12 - s * 1000).toISOString(), new Date(1e12))", seconds)
    assert text == f"Last backup {expected}"
