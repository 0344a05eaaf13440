"""The promises of the store, each a test of that name, in a real browser.

1 and 2 are about killed browsers: see test_kill_harness.py. 11, 12 and 14 belong to the service worker.
"""

from __future__ import annotations

import json

import pytest

from .conftest import FIXTURES

pytestmark = pytest.mark.browser


def states(page, id_: str) -> list[str]:
    return page.evaluate("(id) => store.log.filter((e) => e.type === 'save-state' && e.id === id).map((e) => e.state.kind)", id_)


def begin(page, *, options: str = "{}") -> None:
    page.evaluate(f"async () => {{ window.store = await bw.open({options}); }}")


def read_anew(page, id_: str) -> dict:
    """What a page that starts now would read."""
    return page.evaluate(
        """async (id) => { const other = await bw.open();
        try { return await other.open(id); } finally { await other.dispose(); } }""",
        id_,
    )


# ---- 1 and 2, as far as they can be shown without a kill -----------------------------------------------------------


def test_promise_1_a_write_that_is_cut_off_leaves_the_old_revision_whole(page):
    """Every place at which the transaction can break off: after each put, delete and get."""
    begin(page)
    result = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "old"));
        const before = JSON.stringify((await bw.dump()).revisions);
        const seen = [];
        for (const [proto, method] of [[IDBObjectStore, "put"], [IDBObjectStore, "get"], [IDBObjectStore, "delete"]]) {
          for (let nth = 0; nth < 5; nth++) {
            const kept = proto.prototype[method];
            let count = 0, cut = false;
            proto.prototype[method] = function (...args) {
              const request = kept.apply(this, args);
              if (this.transaction.mode === "readwrite" && count++ === nth) { cut = true; this.transaction.abort(); }
              return request;
            };
            // The second try is cut off at the same place.
            bw.hooks.onTransaction = () => { count = 0; };
            const got = await bw.outcome(() => store.commit("a", bw.job("a", "new " + method + nth)));
            bw.hooks.onTransaction = null;
            proto.prototype[method] = kept;
            if (!cut) continue;
            const dump = await bw.dump();
            const head = dump.revisions.find((r) => r.rev === dump.jobs[0].rev);
            seen.push({at: method + nth, ok: got.ok, sound: bw.envelope.findFault(head) === null && head.sha256 === dump.jobs[0].sha256,
                       notes: [...new Set(head.payload.joints.map((j) => j.note).concat(head.payload.edit))].length});
          }
        }
        return seen; }"""
    )
    # Edits that failed stay queued, so later writes have more puts still.
    assert {row["at"] for row in result} >= {"put0", "put1", "put2", "get0", "get1", "get2", "delete0", "delete1"}
    for row in result:
        assert row["sound"] and row["notes"] == 1, row
    assert not all(row["ok"] for row in result), "no write was really cut off"


def test_promise_2_saved_is_said_only_after_the_transaction_is_complete(page):
    begin(page)
    order = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        const order = [];
        bw.hooks.onTransaction = (names, mode, options) => { if (mode === "readwrite" && names.includes("revisions")) order.push("begin " + options.durability); };
        const complete = Object.getOwnPropertyDescriptor(IDBTransaction.prototype, "oncomplete");
        const listen = IDBTransaction.prototype.addEventListener;
        IDBTransaction.prototype.addEventListener = function (type, listener, ...rest) {
          if (type === "complete") listen.call(this, "complete", () => order.push("complete"));
          return listen.call(this, type, listener, ...rest);
        };
        store.addEventListener("save-state", (e) => order.push(e.detail.state.kind));
        await store.commit("a", bw.job("a", 2));
        order.push("resolved");
        IDBTransaction.prototype.addEventListener = listen;
        return order; }"""
    )
    assert order[0] == "begin strict"
    assert order.index("complete") < order.index("saved") < order.index("resolved")
    assert "saved" not in order[: order.index("complete")]


# ---- 3 -----------------------------------------------------------------------------------------------------------


def test_promise_3_edits_typed_during_a_write_are_written_next(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 0));
        const first = store.commit("a", bw.job("a", 1), "one");
        const second = store.commit("a", bw.job("a", 2), "two");
        const third = store.commit("a", bw.job("a", 3), "three");
        store.change("a", bw.job("a", "3 and a half"));
        await first;
        const afterFirst = (await bw.dump()).jobs[0].rev;
        await third;
        const kind = store.saveState("a").kind;
        await bw.sleep(500);
        const dump = await bw.dump();
        return {afterFirst, kind, revs: dump.revisions.map((r) => [r.rev, r.parent, r.payload.edit]), draft: dump.drafts[0].envelope.payload.edit}; }"""
    )
    assert got["afterFirst"] >= 2
    assert got["kind"] == "pending", "what is still being typed must not be called saved"
    assert got["revs"] == [[1, None, "0"], [2, 1, "1"], [3, 2, "2"], [4, 3, "3"]]
    assert got["draft"] == "3 and a half"


def test_promise_3_a_commit_made_by_who_waited_for_the_last_one_is_written_too(page):
    """A fault that was near: a commit in the very moment in which the queue ran empty."""
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 0));
        for (let i = 1; i <= 40; i++) await Promise.race([store.commit("a", bw.job("a", i)), bw.sleep(3000).then(() => { throw new Error("stuck at " + i); })]);
        return (await bw.dump()).jobs[0].rev; }"""
    )
    assert got == 41


# ---- 4 -----------------------------------------------------------------------------------------------------------


def test_promise_4_nothing_is_written_before_the_load_ends(page, new_page):
    begin(page)
    page.evaluate("async () => { await store.create(bw.job('a', 'old')); await store.dispose(); }")
    got = page.evaluate(
        """async () => {
        let letGo; const gate = new Promise((resolve) => { letGo = resolve; });
        const late = await bw.open({validate: async () => { await gate; return true; }});
        const before = JSON.stringify(await bw.dump());
        bw.hooks.counts.readwrite = 0;
        const opening = late.open("a");
        await bw.sleep(50);
        const change = await bw.outcome(() => late.change("a", bw.job("a", "early")));
        const commit = await bw.outcome(() => late.commit("a", bw.job("a", "early")));
        document.dispatchEvent(new Event("visibilitychange"));
        window.dispatchEvent(new Event("pagehide"));
        await bw.sleep(500);
        const writes = bw.hooks.counts.readwrite;
        const same = before === JSON.stringify(await bw.dump());
        letGo();
        const opened = await opening;
        await late.commit("a", bw.job("a", "new"));
        return {change, commit, writes, same, job: opened.job.edit, after: (await bw.dump()).jobs[0].rev}; }"""
    )
    assert got["change"]["code"] == "not-open"
    assert got["commit"]["code"] == "not-open"
    assert got["writes"] == 0
    assert got["same"]
    assert got["job"] == "old"
    assert got["after"] == 2


# ---- 5 -----------------------------------------------------------------------------------------------------------


def test_promise_5_a_bad_checksum_is_quarantined_the_previous_revision_opens_the_user_is_told(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "first"));
        await store.commit("a", bw.job("a", "second"));
        await store.commit("a", bw.job("a", "third"));
        await store.dispose();
        await bw.raw(async (db) => { const r = await db.get("revisions", ["a", 3]); r.payload.joints[1].note = "flipped"; await db.put("revisions", r); });
        window.store = await bw.open();
        const opened = await store.open("a");
        const set = await store.quarantine();
        await store.commit("a", bw.job("a", "fourth"));
        const facts = await store.facts();
        const again = await bw.dump();
        return {opened, set, facts, jobs: again.jobs, revs: again.revisions.map((r) => [r.rev, r.parent, r.payload.edit])}; }"""
    )
    assert got["opened"]["job"]["edit"] == "second"
    assert "checksum does not agree" in got["opened"]["recovered"]
    assert "set aside" in got["opened"]["recovered"]
    assert len(got["set"]) == 1
    assert "flipped" in got["set"][0]["raw"], "the damaged record is kept as it was found"
    assert got["revs"] == [[1, None, "first"], [2, 1, "second"], [4, 2, "fourth"]]
    assert got["facts"]["quarantined"] == 1
    assert "1 damaged record set aside" in got["facts"]["text"]


@pytest.mark.parametrize(
    ("harm", "word"),
    [
        ("await db.delete('revisions', ['a', 2])", "missing"),
        ("const r = await db.get('revisions', ['a', 2]); delete r.sha256; await db.put('revisions', r)", "checksum is missing"),
        ("const r = await db.get('revisions', ['a', 2]); r.payload = null; await db.put('revisions', r)", "empty"),
        ("const r = await db.get('revisions', ['a', 2]); delete r.schema; await db.put('revisions', r)", "schema"),
        ("const p = await db.get('jobs', 'a'); p.sha256 = 'x'; await db.put('jobs', p)", "not the one that was saved last"),
    ],
)
def test_promise_5_whatever_is_wrong_with_the_newest_record(page, harm, word):
    begin(page)
    opened = page.evaluate(
        f"""async () => {{
        await store.create(bw.job("a", "first"));
        await store.commit("a", bw.job("a", "second"));
        await store.dispose();
        await bw.raw(async (db) => {{ {harm}; }});
        window.store = await bw.open();
        return store.open("a"); }}"""
    )
    assert opened["job"]["edit"] == "first"
    assert word in opened["recovered"]


def test_promise_5_a_job_that_the_core_refuses_is_set_aside_but_a_silent_core_is_no_judge(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "first"));
        await store.commit("a", bw.job("a", "bad"));
        await store.dispose();
        const failing = await bw.open({validate: async () => { throw new Error("no core"); }});
        const one = await failing.open("a"); await failing.dispose();
        const judging = await bw.open({validate: async (job) => job.edit !== "bad"});
        const two = await judging.open("a");
        return [one.job.edit, one.recovered, two.job.edit, two.recovered]; }"""
    )
    assert got[:2] == ["bad", None]
    assert got[2] == "first"
    assert "does not make sense" in got[3]


def test_promise_5_when_no_copy_can_be_read_the_job_is_not_silently_gone(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "only"));
        await store.dispose();
        await bw.raw(async (db) => { const r = await db.get("revisions", ["a", 1]); r.payload.edit = "flipped"; await db.put("revisions", r); });
        window.store = await bw.open();
        const opened = await bw.outcome(() => store.open("a"));
        return [opened, (await store.quarantine()).length, (await store.list()).length]; }"""
    )
    assert got[0]["code"] == "damaged"
    assert "set aside" in got[0]["message"]
    assert got[1:] == [1, 1]


def test_promise_5_a_lost_pointer_is_made_anew(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "first"));
        await store.commit("a", bw.job("a", "second"));
        await store.dispose();
        await bw.raw((db) => db.clear("jobs"));
        window.store = await bw.open();
        return [(await store.list()).length, (await store.open("a")).job.edit]; }"""
    )
    assert got == [1, "second"]


# ---- 6 -----------------------------------------------------------------------------------------------------------

NEWER = "{schema: 2, migrations: [{to: 2, migrate: (p) => ({...p, moved: true})}]}"


def test_promise_6_a_newer_file_opens_read_only_and_can_be_exported_raw(page):
    begin(page, options=NEWER)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", "from the future", {unheard: {of: [1]}}));
        await store.dispose();
        const before = JSON.stringify(await bw.dump());
        window.store = await bw.open();
        const listed = await store.list();
        const opened = await store.open("a");
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", "overwritten")));
        store.change("a", bw.job("a", "overwritten"));
        await bw.sleep(500);
        const raw = JSON.parse(await (await store.rawExport("a")).text());
        return {listed, opened, commit, state: store.saveState("a"), raw, fault: bw.envelope.findFault(raw), same: before === JSON.stringify(await bw.dump())}; }"""
    )
    assert got["listed"][0]["readOnly"] is True
    assert got["opened"]["readOnly"]["code"] == "newer-record"
    assert got["opened"]["job"]["edit"] == "from the future"
    assert got["commit"]["code"] == "read-only"
    assert got["state"]["kind"] == "read-only"
    assert got["raw"]["schema"] == 2
    assert got["raw"]["payload"]["unheard"] == {"of": [1]}
    assert got["fault"] is None
    assert got["same"], "an older app must not touch a newer record"


def test_promise_6_a_newer_database_layout_leaves_the_old_app_without_writing(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1)); await store.dispose();
        const newer = await bw.open({databaseVersion: 2}); await newer.dispose();
        const old = await bw.open();
        const listed = await bw.outcome(() => old.list());
        const made = await bw.outcome(() => old.create(bw.job("b", 1)));
        return [listed, made, old.saveState("b")]; }"""
    )
    assert got[0]["ok"] is False
    assert got[1]["ok"] is False
    assert got[2]["kind"] in ("read-only", "failed")


# ---- 7 -----------------------------------------------------------------------------------------------------------


def little_space(page, context):
    """Lower the browser's own quota. It must come before the first write: Chromium remembers the space it found."""
    devtools = context.new_cdp_session(page)
    origin = page.evaluate("location.origin")
    devtools.send("Storage.overrideQuotaForOrigin", {"origin": origin, "quotaSize": 200_000})
    return devtools, origin


def test_promise_7_a_full_disk_leaves_the_data_on_screen_visibly_unsaved_and_export_works(page, store_context):
    """The real thing: the browser's own quota is lowered until a write no longer fits, then raised again."""
    devtools, origin = little_space(page, store_context)
    begin(page)
    page.evaluate("async () => { await store.create(bw.job('a', 'before')); }")
    got = page.evaluate(
        """async () => {
        window.big = bw.job("a", "on a full disk", {note: Array.from({length: 3e5}, () => Math.random().toString(36)[3]).join("")});
        const commit = await bw.outcome(() => store.commit("a", window.big));
        const state = store.saveState("a");
        const raw = JSON.parse(await (await store.rawExport("a")).text());
        const backup = await (await store.backup()).text();
        const undo = await store.undo("a").then((u) => u && u.job.edit);
        const redo = await store.redo("a").then((u) => u && u.job.edit);
        return {commit, state, raw: raw.edit, backup: JSON.parse(backup).records.map((r) => r.record.payload.edit), undo, redo, unsaved: store.hasUnsaved}; }"""
    )
    assert got["commit"]["code"] == "quota"
    assert got["state"]["kind"] == "failed"
    assert got["state"]["text"].startswith("Not saved: this tablet has no space left")
    assert got["unsaved"] is True
    assert got["raw"] == "on a full disk"
    assert got["backup"] == ["on a full disk"]
    assert (got["undo"], got["redo"]) == ("before", "on a full disk")
    stored = page.evaluate("async () => (await bw.dump()).revisions.map((r) => r.payload.edit)")
    assert stored == ["before"]
    devtools.send("Storage.overrideQuotaForOrigin", {"origin": origin})
    page.evaluate("async () => { await store.flush(); }")
    assert page.evaluate("store.saveState('a').kind") == "saved"
    assert page.evaluate("async () => (await bw.dump()).revisions.at(-1).payload.edit") == "on a full disk"


def test_promise_7_space_that_comes_back_is_used_without_being_asked(page, store_context):
    devtools, origin = little_space(page, store_context)
    begin(page)
    page.evaluate("async () => { await store.create(bw.job('a', 'before')); }")
    page.evaluate("async () => { await bw.outcome(() => store.commit('a', bw.job('a', 'x'.repeat(1e6)))); }")
    assert page.evaluate("store.saveState('a').kind") == "failed"
    devtools.send("Storage.overrideQuotaForOrigin", {"origin": origin})
    page.wait_for_function("store.saveState('a').kind === 'saved'", timeout=9_000)


def test_promise_7_a_photo_that_does_not_fit_is_refused_in_words(page, store_context):
    little_space(page, store_context)
    begin(page)
    page.evaluate("async () => { await store.create(bw.job('a', 1)); }")
    got = page.evaluate("async () => bw.outcome(async () => store.attachPhoto('a', await bw.picture(1800, 1200), {keepOriginal: true}))")
    assert got["code"] == "quota"
    assert got["message"].startswith("The photo is not saved")


def test_promise_7_a_browser_that_keeps_nothing_still_lets_work_and_export(new_page):
    page = new_page()
    got = page.evaluate(
        """async () => {
        Object.defineProperty(window, "indexedDB", {value: undefined, configurable: true});
        const store = await bw.open({name: "none"});
        const made = await bw.outcome(() => store.create(bw.job("a", 1)));
        const saved = await bw.outcome(() => store.commit("a", bw.job("a", 2)));
        const backup = JSON.parse(await (await store.backup()).text());
        return [made, saved, store.saveState("a"), backup.records[0].record.payload.edit]; }"""
    )
    assert got[0]["code"] == got[1]["code"] == "no-storage"
    assert got[2]["kind"] == "failed"
    assert "only on screen" in got[2]["text"]
    assert got[3] == "2"


# ---- 8 -----------------------------------------------------------------------------------------------------------


def test_promise_8_a_dropped_connection_is_reopened_once_and_the_save_succeeds(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        bw.hooks.handle.close();
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", 2)));
        bw.hooks.handle.close();
        store.change("a", bw.job("a", 3));
        await bw.sleep(600);
        bw.hooks.handle.close();
        const listed = await store.list();
        const dump = await bw.dump();
        return {commit, kinds: store.log.filter((e) => e.type === "save-state").map((e) => e.state.kind), rev: listed[0].rev, draft: dump.drafts[0].envelope.payload.edit}; }"""
    )
    assert got["commit"]["ok"] is True
    assert "failed" not in got["kinds"]
    assert got["rev"] == 2
    assert got["draft"] == "3"


def test_promise_8_a_connection_that_breaks_in_the_middle_of_a_write(page):
    """The transaction is cut off by the closing database, as when a tablet reclaims the storage process."""
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        const put = IDBObjectStore.prototype.put;
        let broken = 0;
        IDBObjectStore.prototype.put = function (...args) {
          const request = put.apply(this, args);
          if (broken++ === 0) this.transaction.abort();
          return request;
        };
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", 2)));
        IDBObjectStore.prototype.put = put;
        return [broken > 1, commit.ok, (await bw.dump()).revisions.map((r) => r.payload.edit)]; }"""
    )
    assert got == [True, True, ["1", "2"]]


def test_promise_8_when_it_fails_twice_not_saved_is_said(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        const put = IDBObjectStore.prototype.put;
        let tries = 0;
        bw.hooks.onTransaction = (names, mode) => { if (mode === "readwrite") { tries++; throw new DOMException("gone", "InvalidStateError"); } };
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", 2)));
        const state = store.saveState("a");
        bw.hooks.onTransaction = null;
        await store.commit("a", bw.job("a", 3));
        return [tries, commit, state, store.saveState("a").kind, (await bw.dump()).revisions.map((r) => r.payload.edit)]; }"""
    )
    assert got[0] == 2, "once, and once more"
    assert got[1]["code"] == "failed"
    assert got[2]["kind"] == "failed"
    assert got[2]["text"].startswith("Not saved")
    assert got[3] == "saved"
    assert got[4] == ["1", "2", "3"], "the edit that could not be saved is written with the next one"


def test_promise_8_a_write_that_went_through_before_the_connection_broke_is_not_a_conflict(page):
    begin(page)
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("a", 1));
        // The first try completes, but the page is told that the connection is gone.
        const listen = IDBTransaction.prototype.addEventListener;
        let lied = 0;
        IDBTransaction.prototype.addEventListener = function (type, listener, ...rest) {
          if (type === "complete" && this.mode === "readwrite" && lied++ === 0) {
            return listen.call(this, "complete", () => { this.dispatchEvent(new Event("abort")); }, ...rest);
          }
          return listen.call(this, type, listener, ...rest);
        };
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", 2)));
        IDBTransaction.prototype.addEventListener = listen;
        await store.commit("a", bw.job("a", 3));
        return [lied, commit.ok, (await bw.dump()).revisions.map((r) => [r.rev, r.payload.edit])]; }"""
    )
    assert got[0] >= 2
    assert got[1] is True
    assert got[2] == [[1, "1"], [2, "2"], [3, "3"]]


def test_promise_8_a_database_that_the_browser_dropped_is_written_again_from_the_screen(page, store_context):
    begin(page)
    page.evaluate("async () => { await store.create(bw.job('a', 1)); await store.commit('a', bw.job('a', 2)); }")
    devtools = store_context.new_cdp_session(page)
    devtools.send("Storage.clearDataForOrigin", {"origin": page.evaluate("location.origin"), "storageTypes": "indexeddb"})
    got = page.evaluate(
        """async () => {
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", 3)));
        return [commit.ok, store.log.filter((e) => e.type === "notice").map((e) => e.text), (await bw.dump()).revisions.map((r) => r.payload.edit)]; }"""
    )
    assert got[0] is True
    assert "saved again from the screen" in got[1][0]
    assert got[2] == ["3"]
    assert read_anew(page, "a")["job"]["edit"] == "3"


def test_promise_8_jobs_of_a_dropped_database_come_back_from_the_second_copy(page, store_context):
    """The whole database goes while nobody looks, as browsers do with one that they find damaged after a crash."""
    begin(page)
    page.evaluate(
        """async () => { await store.create(bw.job("a", 1)); await store.commit("a", bw.job("a", 2)); await store.create(bw.job("b", 7));
        await store.create(bw.job("c", 8)); await store.remove("c"); await store.emptyBin(); await bw.sleep(1300); }"""
    )
    page.goto(page.url.replace("store_page", "empty"))
    devtools = store_context.new_cdp_session(page)
    devtools.send("Storage.clearDataForOrigin", {"origin": page.evaluate("location.origin"), "storageTypes": "indexeddb"})
    page.goto(page.url.replace("empty", "store_page"))
    page.wait_for_function("window.bw !== undefined")
    assert page.evaluate("async () => (await indexedDB.databases()).length") == 0
    begin(page)
    got = page.evaluate(
        """async () => { await bw.sleep(0); const list = await store.list(); const opened = await store.open("a");
        await store.commit("a", bw.job("a", 3)); await (await store.undo("a")).saved;
        return [list.map((j) => j.id).sort(), opened.job.edit, opened.rev, opened.recovered, store.log.filter((e) => e.type === "notice").map((e) => e.text), (await bw.dump()).revisions.at(-2).payload.edit]; }"""
    )
    assert got[0] == ["a", "b"], "and what was thrown away stays away"
    assert got[1:4] == ["2", 2, None]
    assert len(got[4]) == 1
    assert "2 jobs were brought back" in got[4][0]


def test_promise_8_a_damaged_second_copy_brings_nothing_back_and_none_is_needed(page):
    begin(page)
    got = page.evaluate(
        """async () => { await store.create(bw.job("a", 1)); await bw.sleep(1300);
        const cache = await caches.open("beadwright-second-copy"); const [request] = await cache.keys();
        const copy = await (await cache.match(request)).json(); copy.payload.edit = "flipped"; await cache.put(request, Response.json(copy));
        await store.dispose(); await bw.raw(async (db) => { await db.clear("jobs"); await db.clear("revisions"); });
        const other = await bw.open(); const list = await other.list(); await other.dispose();
        Object.defineProperty(window, "caches", {value: undefined, configurable: true});
        const bare = await bw.open(); await bare.create(bw.job("z", 1)); await bw.sleep(1300);
        return [list, (await bare.list()).length]; }"""
    )
    assert got == [[], 1]


# ---- 9 -----------------------------------------------------------------------------------------------------------

WITHOUT_LOCKS = "Object.defineProperty(navigator, 'locks', {value: undefined})"


@pytest.mark.parametrize("locks", ["with locks", "without locks"])
def test_promise_9_of_two_tabs_one_writes_the_other_reads_and_can_take_over(store_context, new_page, locks):
    if locks == "without locks":
        store_context.add_init_script(WITHOUT_LOCKS)
    one, two = new_page(), new_page()
    begin(one)
    one.evaluate("async () => { await store.create(bw.job('a', 'one')); }")
    begin(two)
    reader = two.evaluate("async () => store.open('a')")
    assert reader["readOnly"]["code"] == "other-window"
    assert reader["job"]["edit"] == "one"
    assert two.evaluate("async () => bw.outcome(() => store.commit('a', bw.job('a', 'two')))")["code"] == "read-only"

    # The reader hears of what the writer saves.
    one.evaluate("async () => { await store.commit('a', bw.job('a', 'one again')); }")
    two.wait_for_function("store.log.some((e) => e.type === 'jobs' && e.isOther && e.rev === 2)")

    # Typed but not committed: the writer's last words are written before it lets go.
    one.evaluate("() => store.change('a', bw.job('a', 'half typed'))")
    taken = two.evaluate("async () => store.takeOver('a')")
    assert taken["readOnly"] is None
    assert taken["job"]["edit"] == "one again"
    assert taken["draft"]["job"]["edit"] == "half typed"
    two.evaluate("async () => { await store.commit('a', bw.job('a', 'two')); }")
    assert one.evaluate("store.saveState('a').kind") == "read-only"
    assert one.evaluate("store.log.some((e) => e.type === 'writer' && !e.isWriter)")
    assert one.evaluate("async () => bw.outcome(() => store.commit('a', bw.job('a', 'one too late')))")["code"] == "read-only"
    assert two.evaluate("async () => (await bw.dump()).revisions.at(-1).payload.edit") == "two"

    # And back again.
    back = one.evaluate("async () => store.takeOver('a')")
    assert back["job"]["edit"] == "two"
    one.evaluate("async () => { await store.commit('a', bw.job('a', 'one at last')); }")
    assert two.evaluate("store.saveState('a').kind") == "read-only"


def test_promise_9_a_tab_that_was_frozen_during_the_take_over_cannot_write_over_the_other(new_page):
    one, two = new_page(), new_page()
    begin(one)
    one.evaluate("async () => { await store.create(bw.job('a', 'one')); }")
    begin(two)
    two.evaluate("async () => { await store.open('a'); }")
    # Asleep: the page is told of nothing.
    one.evaluate("() => { store.constructor; bw.deaf = BroadcastChannel.prototype.postMessage; }")
    two.evaluate(
        """async () => { await bw.raw((db) => db.put("meta", {key: "writer/a", value: "another window"}));
        await bw.raw(async (db) => { const p = await db.get("jobs", "a"); const r = await db.get("revisions", ["a", 1]);
          const next = bw.envelope.seal({...r, rev: 2, parent: 1, payload: bw.job("a", "two")});
          await db.put("revisions", next); await db.put("jobs", {...p, rev: 2, sha256: next.sha256, revisions: [...p.revisions, {...p.revisions[0], rev: 2}]}); }); }"""
    )
    got = one.evaluate(
        """async () => { const late = await bw.outcome(() => store.commit("a", bw.job("a", "one, late")));
        await bw.sleep(300);
        return [late, store.saveState("a"), (await bw.dump()).revisions.map((r) => r.payload.edit), (await bw.dump()).drafts.map((d) => d.envelope.payload.edit)]; }"""
    )
    assert got[0]["ok"] is False
    assert got[1]["kind"] == "failed"
    assert got[1]["text"].startswith("Not saved: another window")
    assert got[2] == ["one", "two"]
    assert got[3] == ["one, late"], "the late edit is kept as a copy"


def test_promise_9_a_window_that_does_not_answer_is_passed_over(new_page):
    one, two = new_page(), new_page()
    # Deaf to messages, like a frozen tab; the lock is still held.
    one.evaluate("() => { Object.defineProperty(BroadcastChannel.prototype, 'onmessage', {set() {}, get() { return null; }}); }")
    begin(one)
    one.evaluate("async () => { await store.create(bw.job('a', 'one')); store.change('a', bw.job('a', 'typed')); }")
    begin(two)
    taken = two.evaluate("async () => store.takeOver('a')")
    assert taken["readOnly"] is None
    two.evaluate("async () => { await store.commit('a', bw.job('a', 'two')); }")
    one.wait_for_function("store.saveState('a').kind !== 'saved' && !store.isWriter('a')")
    assert one.evaluate("async () => bw.outcome(() => store.commit('a', bw.job('a', 'late')))")["ok"] is False
    assert two.evaluate("async () => (await bw.dump()).revisions.at(-1).payload.edit") == "two"


def test_promise_9_a_closed_tab_frees_the_job(new_page):
    one, two = new_page(), new_page()
    begin(one)
    one.evaluate("async () => { await store.create(bw.job('a', 'one')); }")
    one.close()
    begin(two)
    assert two.evaluate("async () => (await store.open('a')).readOnly") is None


# ---- 10 ----------------------------------------------------------------------------------------------------------


def test_promise_10_an_old_tab_stops_writing_when_a_newer_app_has_migrated_the_data(new_page):
    old, new = new_page(), new_page()
    begin(old)
    old.evaluate("async () => { await store.create(bw.job('a', 'old')); await store.create(bw.job('b', 'old')); }")
    begin(new, options=NEWER)
    old.wait_for_function("store.saveState('a').kind === 'read-only'")
    assert "newer version" in old.evaluate("store.saveState('a').text")
    assert old.evaluate("async () => bw.outcome(() => store.commit('a', bw.job('a', 'late')))")["code"] == "read-only"
    assert old.evaluate("async () => bw.outcome(() => store.create(bw.job('c', 'late')))")["ok"] is False
    got = new.evaluate(
        """async () => { const opened = await store.open("a"); await store.commit("a", {...opened.job, edit: "new"});
        const dump = await bw.dump();
        return [opened.job.moved, opened.readOnly, dump.revisions.filter((r) => r.id === "a").map((r) => [r.schema, r.payload.edit]),
                (await store.revisions("a")).map((r) => [r.rev, r.pinned])]; }"""
    )
    assert got[0] is True, "the migration has run"
    assert got[1] is None
    assert got[2] == [[1, "old"], [2, "new"]]
    assert got[3] == [[2, False], [1, True]], "the untouched original is kept"


def test_promise_10_an_old_tab_that_heard_nothing_is_stopped_by_its_next_write(new_page):
    old = new_page()
    begin(old)
    got = old.evaluate(
        """async () => {
        await store.create(bw.job("a", "old"));
        await bw.raw((db) => db.put("meta", {key: "schema", value: 2}));
        const commit = await bw.outcome(() => store.commit("a", bw.job("a", "late")));
        store.change("a", bw.job("a", "later"));
        await bw.sleep(500);
        const dump = await bw.dump();
        return [commit.ok, store.saveState("a"), dump.revisions.map((r) => r.payload.edit), dump.drafts.length, JSON.parse(await (await store.rawExport("a")).text()).edit]; }"""
    )
    assert got[0] is False
    assert got[1]["kind"] == "failed"
    assert "newer version" in got[1]["text"]
    assert got[2] == ["old"]
    assert got[3] == 0
    assert got[4] == "late", "what is on screen can still be exported"


def test_promise_10_a_change_of_layout_waits_for_the_last_words_of_the_old_tab(new_page):
    """versionchange: what is typed is written, then the handle is closed, so that nobody has to close a tab."""
    old, new = new_page(), new_page()
    begin(old)
    old.evaluate("async () => { await store.create(bw.job('a', 'old')); store.change('a', bw.job('a', 'half typed')); }")
    begin(new, options="{databaseVersion: 2}")
    opened = new.evaluate("async () => store.open('a')")
    assert opened["draft"]["job"]["edit"] == "half typed"
    assert opened["readOnly"] is None
    assert old.evaluate("store.saveState('a').kind") in ("read-only", "failed")
    assert old.evaluate("async () => bw.outcome(() => store.commit('a', bw.job('a', 'late')))")["code"] == "read-only"


# ---- 13 ----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("fixture", sorted(p.stem for p in FIXTURES.glob("v*.json")))
def test_promise_13_a_fixture_of_every_stored_version_opens_today(page, fixture):
    data = json.loads((FIXTURES / f"{fixture}.json").read_text(encoding="utf-8"))
    page.evaluate("async ([stores, version]) => { await bw.load(stores, version); }", [data["stores"], data["database"]])
    begin(page)
    got = page.evaluate(
        """async () => { const out = {list: await store.list(), bin: await store.bin(), jobs: {}, photos: {}, quarantine: await store.quarantine()};
        for (const {id} of [...out.list]) {
          const opened = await store.open(id);
          out.jobs[id] = {...opened, revisions: await store.revisions(id), kept: await store.keptDrafts(id)};
          for (const r of out.jobs[id].revisions) await store.openRevision(id, r.rev);
          out.photos[id] = [];
          for (const ref of await store.photos(id)) out.photos[id].push({name: ref.name, bytes: (await store.photo(ref)).size});
          await store.commit(id, {...opened.job, edit: "today"});
          const undone = await store.undo(id); await undone.saved;
          out.jobs[id].undone = undone.job;
        }
        return out; }"""
    )
    for id_, expected in data["expected"]["jobs"].items():
        job = got["jobs"][id_]
        assert job["job"] == expected["job"]
        assert job["readOnly"] is None
        assert job["recovered"] is None
        assert job["undone"] == expected["job"]
        assert [r["rev"] for r in job["revisions"]] == expected["revisions"]
        assert (job["draft"] or {"job": None})["job"] == expected["draft"]
        assert len(job["kept"]) == expected["kept_drafts"]
        assert [p["name"] for p in got["photos"][id_]] == expected["photos"]
    assert {j["id"] for j in got["list"]} == set(data["expected"]["jobs"])
    assert [j["id"] for j in got["bin"]] == data["expected"]["bin"]
    assert len(got["quarantine"]) == data["expected"]["quarantine"]


# ---- start-up ----------------------------------------------------------------------------------------------------


def test_no_promise_of_the_browser_holds_up_the_start(store_context, new_page):
    """persist(), persisted() and estimate() may never answer; navigator.storage may be missing."""
    page = new_page()
    got = page.evaluate(
        """async () => {
        const never = () => new Promise(() => undefined);
        Object.defineProperty(navigator, "storage", {value: {persist: never, persisted: never, estimate: never}, configurable: true});
        const began = performance.now();
        const store = await bw.open(); await store.create(bw.job("a", 1)); await store.open("a");
        const started = performance.now() - began;
        void store.requestPersistence();
        const facts = await store.facts();
        Object.defineProperty(navigator, "storage", {value: undefined, configurable: true});
        return [started, facts, await store.facts(), await store.requestPersistence()]; }"""
    )
    assert got[0] < 1000
    for facts in got[1:3]:
        assert facts["persisted"] is None
        assert facts["usageBytes"] is None
        assert "This browser does not say whether it keeps these jobs, so make backups" in facts["text"]
    assert got[3] is None
