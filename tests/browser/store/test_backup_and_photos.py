"""Backup of all jobs and photos in one file, its restore, and photos as attachments, in a real browser."""

from __future__ import annotations

import base64
import hashlib
import json

import pytest

pytestmark = pytest.mark.browser

# A small camera picture: 8 x 4 pixels, JPEG. Made by the canvas of the browser in the test below.
NEITHER_PICTURE = "new File(['this is no picture'], 'IMG 1.heic', {type: 'image/heic'})"


@pytest.fixture
def page(new_page):
    page = new_page()
    page.evaluate("async () => { window.store = await bw.open(); }")
    return page


FILL = """
    await store.create(bw.job("a", "one", {title: "Tower"}));
    await store.commit("a", bw.job("a", "two", {title: "Tower"}));
    await store.pin("a", 1);
    const ref = await store.attachPhoto("a", await bw.picture(2400, 1200), {keepOriginal: true, name: "Joint 3"});
    await store.commit("a", bw.job("a", "three", {title: "Tower", photo: ref.id}));
    await store.create(bw.job("b", "x", {title: "Annex"}));
"""

EMPTY = "for (const id of ['a', 'b']) await store.remove(id); await store.emptyBin();"


# ---- backup ------------------------------------------------------------------------------------------------------


def test_a_backup_is_one_readable_json_file_whose_hashes_can_be_checked_elsewhere(page):
    text = page.evaluate(f"async () => {{ {FILL} return (await store.backup()).text(); }}")
    value = json.loads(text)
    assert value["format"] == "beadwright-backup"
    assert value["version"] == 1
    assert value["complete"] is True
    assert value["count"] == len(value["records"]) == 4
    for line in value["records"]:
        told = line["record"].pop("sha256")
        body = json.dumps(line["record"], sort_keys=True, separators=(",", ":"), ensure_ascii=False)
        assert hashlib.sha256(body.encode()).hexdigest() == told
        assert set(line["record"]) == {"kind", "schema", "id", "rev", "parent", "saved_at", "app", "core", "tables", "payload"}
        if line["is"] == "photo":
            for data, expected in ((line["data"], line["record"]["payload"]), (line["original_data"], line["record"]["payload"]["original"])):
                assert hashlib.sha256(base64.b64decode(data)).hexdigest() == expected["data_sha256"]


def test_a_backup_restores_jobs_photos_and_pinned_copies(page):
    got = page.evaluate(
        f"""async () => {{ {FILL}
        const file = await store.backup();
        const before = await (await store.photo(ref.id, "original")).text();
        {EMPTY}
        const nothing = [(await store.list()).length, (await bw.dump()).photos.length];
        const result = await store.restore(file, () => {{ throw new Error("nothing clashes"); }});
        const opened = await store.open("a");
        const photos = await store.photos("a");
        return {{nothing, result, job: opened.job, photos, same: before === await (await store.photo(opened.job.photo, "original")).text(),
                 pinned: (await store.revisions("a")).filter((r) => r.pinned).length, list: (await store.list()).map((j) => j.title).sort()}}; }}"""
    )
    assert got["nothing"] == [0, 0]
    assert got["result"] == {"restored": 2, "skipped": 0, "photos": 1, "issues": []}
    assert got["job"]["edit"] == "three"
    assert got["job"]["photo"] == got["photos"][0]["id"]
    assert got["photos"][0]["name"] == "Joint 3"
    assert got["same"]
    assert got["list"] == ["Annex", "Tower"]


def test_a_backup_of_one_job_holds_that_job_and_its_photos_only(page):
    records = page.evaluate(f"async () => {{ {FILL} return JSON.parse(await (await store.backup(['a'])).text()).records.map((r) => [r.is, r.record.id]); }}")
    assert {r[0] for r in records} == {"job", "revision", "photo"}
    assert not [r for r in records if r[1] == "b"]


def test_restoring_what_is_here_already_asks_nothing_and_changes_nothing(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const file = await store.backup(); const before = JSON.stringify((await bw.dump()).revisions);
        let asked = 0; const result = await store.restore(file, () => {{ asked++; return "replace"; }});
        return [asked, result, before === JSON.stringify((await bw.dump()).revisions)]; }}"""
    )
    assert got == [0, {"restored": 0, "skipped": 2, "photos": 0, "issues": []}, True]


@pytest.mark.parametrize("choice", ["keep", "replace", "both"])
def test_a_clash_is_put_to_the_user_job_by_job(page, choice):
    got = page.evaluate(
        f"""async (choice) => {{ {FILL}
        const file = await store.backup();
        await store.commit("a", bw.job("a", "mine", {{title: "Tower"}}));
        const asked = [];
        const result = await store.restore(file, async (clash) => {{ asked.push(clash); return choice; }});
        const list = await store.list();
        const jobs = {{}};
        for (const {{id}} of list) jobs[id] = (await store.open(id)).job;
        const photos = (await bw.dump()).photos.filter((p) => p.part === "meta").map((p) => [p.id, p.job]);
        const revs = []; for (const r of await store.revisions("a")) revs.push([(await store.openRevision("a", r.rev)).edit, r.pinned]);
        return {{asked, result, jobs, photos, revs, state: store.saveState("a").kind}}; }}""",
        choice,
    )
    assert [(c["id"], c["title"], c["mine"]["rev"], c["theirs"]["rev"]) for c in got["asked"]] == [("a", "Tower", 4, 3)]
    assert got["state"] == "saved"
    copies = {i: j for i, j in got["jobs"].items() if i not in ("a", "b")}
    if choice == "keep":
        assert got["jobs"]["a"]["edit"] == "mine"
        assert not copies
        assert got["result"]["skipped"] == 2
    elif choice == "replace":
        assert got["jobs"]["a"]["edit"] == "three"
        assert ["mine", True] in got["revs"], "what was replaced is kept, pinned"
        assert not copies
    else:
        assert got["jobs"]["a"]["edit"] == "mine"
        (copy_id, copy), = copies.items()
        assert copy["edit"] == "three"
        assert copy["id"] == copy_id
        assert [copy["photo"], copy_id] in got["photos"], "the copy has a photo of its own"
        assert len(got["photos"]) == 2


def test_a_backup_with_a_changed_byte_is_noticed_and_the_rest_restored(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const text = await (await store.backup()).text(); {EMPTY}
        const broken = text.replace('"edit":"three"', '"edit":"thrEe"');
        const result = await store.restore(new Blob([broken]), () => "keep");
        return [result, (await store.list()).map((j) => j.id), broken !== text]; }}"""
    )
    assert got[2]
    assert got[1] == ["b"]
    assert got[0]["restored"] == 1
    assert got[0]["issues"] == ["Job “Tower” was left out: its checksum does not agree."]


def test_a_photo_with_a_changed_byte_is_left_out_by_name(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const text = await (await store.backup()).text(); {EMPTY}
        const at = text.indexOf('"data":"') + 400;
        const broken = text.slice(0, at) + (text[at] === "A" ? "B" : "A") + text.slice(at + 1);
        const result = await store.restore(new Blob([broken]), () => "keep");
        return [result, (await store.open("a")).job.edit]; }}"""
    )
    assert got[0]["restored"] == 2
    assert got[0]["photos"] == 0
    assert got[0]["issues"] == ["Photo “Joint 3” was left out: the checksum of its picture does not agree."]
    assert got[1] == "three"


def test_a_backup_cut_short_restores_what_is_whole_and_says_so(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const text = await (await store.backup()).text(); {EMPTY}
        return store.restore(new Blob([text.slice(0, text.length * 0.6)]), () => "keep"); }}"""
    )
    assert got["restored"] == 1
    assert any("ends too early" in issue for issue in got["issues"])


def test_a_backup_laid_out_anew_by_another_program_is_read_too(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const text = await (await store.backup()).text(); {EMPTY}
        const value = JSON.parse(text); value.records.reverse();
        const result = await store.restore(new Blob([JSON.stringify(value, null, 2)]), () => "keep");
        return [result, (await store.open("a")).job.edit]; }}"""
    )
    assert got[0] == {"restored": 2, "skipped": 0, "photos": 1, "issues": []}
    assert got[1] == "three"


@pytest.mark.parametrize(
    ("text", "word"),
    [
        ("", "empty"),
        ("hello", "not a backup file"),
        ("[]", "not a backup file"),
        ('{"format":"beadwright-job","version":1}', "not a backup file"),
        ('{"format":"beadwright-backup","version":9,"records":[\n]}', "newer version"),
        ('{"format":"beadwright-backup","version":9,"records":[]}', "newer version"),
        ('{"format":"beadwright-backup","version":1,"records":[\n7,\n{"is":"job"},\n{"is":"job","record":null},\nnonsense\n],"complete":true}', "cannot be read"),
        ("\x00\xff" * 500, "not a backup file"),
        ("[" * 100_000, "not a backup file"),
    ],
)
def test_what_is_no_backup_is_refused_in_words(page, text, word):
    got = page.evaluate("async (text) => store.restore(new Blob([text]), () => 'replace')", text)
    assert got["restored"] == 0
    assert any(word in issue for issue in got["issues"]), got["issues"]


@pytest.mark.parametrize("key", ["__proto__", "constructor", "prototype"])
def test_prototype_pollution_keys_are_refused_on_restore(page, key):
    got = page.evaluate(
        """async (key) => {
        const payload = JSON.parse(`{"id":"evil","title":"Evil","site":{"${key}":{"polluted":true}}}`);
        const record = bw.envelope.seal({kind: "job", schema: 1, id: "evil", rev: 1, parent: null, saved_at: "2026-01-01T00:00:00.000Z", app: "", core: "", tables: [], payload});
        const file = new Blob(['{"format":"beadwright-backup","version":1,"records":[\\n' + JSON.stringify({is: "job", photos: [], record}) + '\\n],"complete":true}']);
        const result = await store.restore(file, () => "replace");
        return [result, await store.list(), ({}).polluted ?? null]; }""",
        key,
    )
    assert got[0]["restored"] == 0
    assert key in got[0]["issues"][0]
    assert got[1:] == [[], None]


def test_three_hundred_damaged_backups_are_each_refused_or_read_without_a_fault(page):
    """Bytes changed, cut out, doubled and cut off at random places, with a fixed seed; nothing damaged gets in."""
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "one", {title: "Tower"})); await store.attachPhoto("a", await bw.picture(60, 40)); await store.create(bw.job("b", "x"));
        const bytes = new Uint8Array(await (await store.backup()).arrayBuffer());
        const honest = new Map((await bw.dump()).revisions.map((r) => [r.id, JSON.stringify(r.payload)]));
        let seed = 12345; const dice = (n) => { seed = (Math.imul(seed, 1103515245) + 12345) >>> 0; return (seed >>> 8) % n; };
        const out = {faults: [], false: [], quiet: 0, named: 0};
        const other = await bw.open({name: "fuzzed"});
        for (let round = 0; round < 300; round++) {
          const at = dice(bytes.length), n = 1 + dice(40);
          const parts = [[bytes.slice(0, at), new Uint8Array(n).map(() => dice(256)), bytes.slice(at + n)], [bytes.slice(0, at), bytes.slice(at + n)],
                         [bytes.slice(0, at), bytes.slice(Math.max(0, at - n))], [bytes.slice(0, at)]][round % 4];
          try {
            const result = await other.restore(new Blob(parts), () => "replace");
            out[result.issues.length > 0 ? "named" : "quiet"]++;
          } catch (error) { out.faults.push(String(error)); }
          for (const {id} of await other.list()) {
            const opened = await other.open(id);
            if (honest.get(id) !== JSON.stringify(opened.job)) out.false.push([round, id]);
            await other.close(id); await other.remove(id);
          }
          await other.emptyBin();
        }
        return out; }"""
    )
    assert got["faults"] == []
    assert got["false"] == []
    assert got["named"] > 250, got


def test_a_record_of_a_newer_app_is_left_out_and_of_an_older_one_migrated(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const file = await store.backup(); {EMPTY} await store.dispose();
        const steps = [{{to: 2, migrate: (p) => ({{...p, moved: true}})}}];
        const newer = await bw.open({{name: "newer", schema: 2, migrations: steps}});
        await newer.restore(file, () => "keep");
        const moved = (await newer.open("a")).job.moved;
        const later = await newer.backup();
        const old = await bw.open({{name: "old"}});
        return [moved, await old.restore(later, () => "keep")]; }}"""
    )
    assert got[0] is True
    assert got[1]["restored"] == 0
    assert "a newer version of the app saved it" in got[1]["issues"][0]


def test_the_core_may_refuse_a_job_from_a_backup(page):
    got = page.evaluate(
        f"""async () => {{ {FILL} const file = await store.backup();
        const other = await bw.open({{name: "judging", validate: async (job) => job.id !== "a"}});
        return [await other.restore(file, () => "keep"), (await other.list()).map((j) => j.id)]; }}"""
    )
    assert got[0]["restored"] == 1
    assert "does not make sense" in got[0]["issues"][0]
    assert got[1] == ["b"]


def test_replacing_a_job_that_is_open_in_another_window_is_refused(new_page, page):
    file = page.evaluate(f"async () => {{ {FILL} await store.close('b'); return (await store.backup()).text(); }}")
    other = new_page()
    got = other.evaluate(
        """async (text) => { window.store = await bw.open();
        await store.open("b"); await store.commit("b", bw.job("b", "changed", {title: "Annex"})); await store.close("b");
        return text; }""",
        file,
    )
    page.evaluate("async () => { await store.open('b'); }")
    got = other.evaluate("async (text) => store.restore(new Blob([text]), () => 'replace')", file)
    assert got["restored"] == 0
    assert "another window" in got["issues"][0]


def test_the_age_of_the_last_backup_and_what_it_lacks_are_facts(page):
    got = page.evaluate(
        f"""async () => {{ {FILL}
        const none = (await store.facts()).text; await store.noteBackup(); const all = (await store.facts()).text;
        await store.commit("a", bw.job("a", "newer")); const one = (await store.facts()).text;
        return [none, all, one]; }}"""
    )
    assert got[0][:2] == ["No backup yet", "2 jobs have changes that are in no backup"]
    assert got[1][0] == "Last backup just now"
    assert not any("no backup" in line for line in got[1])
    assert got[2][1] == "1 job has changes that are in no backup"


# ---- photos ------------------------------------------------------------------------------------------------------


def test_a_photo_is_made_smaller_and_the_original_kept_only_if_wanted(page):
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        const file = await bw.picture(3000, 1500);
        const one = await store.attachPhoto("a", file);
        const two = await store.attachPhoto("a", file, {keepOriginal: true, longestEdgePx: 800});
        const shown = await createImageBitmap(await store.photo(one));
        return {size: file.size, one, two, shown: [shown.width, shown.height], type: (await store.photo(one)).type,
                original: (await store.photo(two, "original")).size, none: await bw.outcome(() => store.photo(one, "original")),
                list: (await store.photos("a")).map((p) => p.id)}; }"""
    )
    assert got["shown"] == [1600, 800]
    assert (got["one"]["width"], got["one"]["height"]) == (1600, 800)
    assert got["type"] == "image/jpeg"
    assert got["one"]["original"] is None
    assert got["none"]["code"] == "not-found"
    assert (got["two"]["width"], got["two"]["height"]) == (800, 400)
    assert got["two"]["original"]["bytes"] == got["original"] == got["size"]
    assert got["list"] == [got["one"]["id"], got["two"]["id"]]
    assert got["one"]["problem"] is None


def test_photos_are_counted(page):
    got = page.evaluate(
        """async () => { await store.create(bw.job("a", 1));
        const ref = await store.attachPhoto("a", await bw.picture(900, 600), {keepOriginal: true});
        const facts = await store.facts(); await store.removePhoto(ref);
        return [ref, facts, await store.facts(), (await bw.dump()).photos.length]; }"""
    )
    ref, facts, after, left = got
    kept_original = ref["original"]["bytes"] if ref["original"] else 0
    assert facts["photos"] == 1
    assert facts["photoBytes"] == ref["bytes"] + kept_original
    assert any(line.startswith("1 photo, ") for line in facts["text"])
    assert (after["photos"], after["photoBytes"], left) == (0, 0, 0)


def test_a_file_that_cannot_be_shown_is_kept_and_the_trouble_reported(page):
    got = page.evaluate(
        f"""async () => {{ await store.create(bw.job("a", 1));
        const ref = await store.attachPhoto("a", {NEITHER_PICTURE}, {{keepOriginal: true}});
        return [ref, await (await store.photo(ref)).text()]; }}"""
    )
    assert "cannot show the picture" in got[0]["problem"]
    assert got[0]["name"] == "IMG 1.heic"
    assert got[0]["width"] is None
    assert got[1] == "this is no picture"


def test_a_picture_that_is_too_large_is_refused_with_the_limit(page):
    got = page.evaluate("async () => bw.outcome(() => store.attachPhoto('a', new Blob([new Uint8Array(41 * 1024 ** 2)])))")
    assert got["code"] == "too-large"
    assert "42 MB" in got["message"]


def test_a_damaged_photo_is_not_shown_as_sound(page):
    got = page.evaluate(
        """async () => { await store.create(bw.job("a", 1)); const ref = await store.attachPhoto("a", await bw.picture(90, 60));
        await bw.raw(async (db) => { const r = await db.get("photos", [ref.id, "shown"]); new Uint8Array(r.data)[50] ^= 1; await db.put("photos", r); });
        return [await bw.outcome(() => store.photo(ref)), JSON.parse(await (await store.backup()).text()).count]; }"""
    )
    assert got[0]["code"] == "damaged"
    assert got[1] == 1, "the job is backed up all the same"


def test_a_photo_outlives_the_page(page):
    id_ = page.evaluate("async () => { await store.create(bw.job('a', 1)); return (await store.attachPhoto('a', await bw.picture(90, 60))).id; }")
    page.reload()
    page.wait_for_function("window.bw !== undefined")
    assert page.evaluate("async (id) => (await (await bw.open()).photo(id)).size", id_) > 100
