"""Drafts, undo, the bin and the retention of revisions, in a real browser."""

from __future__ import annotations

import pytest

pytestmark = pytest.mark.browser


@pytest.fixture
def page(new_page):
    page = new_page()
    page.evaluate("async () => { window.store = await bw.open(); await store.create(bw.job('a', 'saved')); }")
    return page


def reload(page) -> None:
    page.reload()
    page.wait_for_function("window.bw !== undefined")
    page.evaluate("async () => { window.store = await bw.open(); }")


# ---- drafts ------------------------------------------------------------------------------------------------------


def test_typing_is_kept_as_a_draft_300_ms_after_the_last_key(page):
    got = page.evaluate(
        """async () => {
        bw.hooks.counts.relaxed = 0;
        for (let i = 0; i < 8; i++) { store.change("a", bw.job("a", "typed " + i)); await bw.sleep(60); }
        const during = (await bw.dump()).drafts.length;
        const waiting = store.saveState("a");
        await bw.sleep(450);
        return {during, waiting, after: (await bw.dump()).drafts.map((d) => d.envelope.payload.edit), relaxed: bw.hooks.counts.relaxed, state: store.saveState("a")}; }"""
    )
    assert got["during"] == 0
    assert got["waiting"] == {"kind": "pending", "savedAt": got["waiting"]["savedAt"], "text": "Not yet saved"}
    assert got["after"] == ["typed 7"]
    assert got["relaxed"] == 1, "one write for all the keys, and not a strict one"
    assert got["state"]["text"].startswith("Draft kept ")


@pytest.mark.parametrize("leave", ["hidden", "pagehide", "freeze"])
def test_typing_is_written_at_once_when_the_page_is_left(page, leave):
    """The transaction begins in the very turn of the event: there may be no other."""
    got = page.evaluate(
        """async (leave) => {
        store.change("a", bw.job("a", "half typed"));
        bw.hooks.counts.readwrite = 0;
        if (leave === "hidden") {
          Object.defineProperty(document, "visibilityState", {value: "hidden", configurable: true});
          document.dispatchEvent(new Event("visibilitychange"));
        } else if (leave === "pagehide") window.dispatchEvent(new PageTransitionEvent("pagehide"));
        else document.dispatchEvent(new Event("freeze"));
        const begun = bw.hooks.counts.readwrite;
        await bw.sleep(100);
        return [begun, (await bw.dump()).drafts.map((d) => d.envelope.payload.edit)]; }""",
        leave,
    )
    assert got == [1, ["half typed"]]


def test_typing_survives_the_real_end_of_a_page(page, new_page):
    """No made-up event here: the page goes elsewhere 10 ms after the last key."""
    page.evaluate("() => { store.change('a', bw.job('a', 'last words')); setTimeout(() => { location.href = 'empty.html'; }, 10); }")
    page.wait_for_url("**/empty.html")
    other = new_page()
    assert other.evaluate("async () => (await (await bw.open()).open('a')).draft.job.edit") == "last words"


def test_a_draft_is_offered_never_applied(page):
    page.evaluate("async () => { store.change('a', bw.job('a', 'typed')); await bw.sleep(450); }")
    reload(page)
    opened = page.evaluate("async () => store.open('a')")
    assert opened["job"]["edit"] == "saved"
    assert opened["draft"]["job"]["edit"] == "typed"
    assert page.evaluate("async () => (await bw.dump()).drafts.length") == 1


def test_a_draft_restored_is_saved_as_a_revision(page):
    page.evaluate("async () => { store.change('a', bw.job('a', 'typed')); await bw.sleep(450); }")
    reload(page)
    got = page.evaluate(
        """async () => { await store.open("a"); const job = await store.restoreDraft("a"); const dump = await bw.dump();
        return [job.edit, dump.revisions.at(-1).payload.edit, dump.drafts.length, (await store.revisions("a"))[0].reason]; }"""
    )
    assert got == ["typed", "typed", 0, "Draft restored"]


@pytest.mark.parametrize("keep", [True, False])
def test_a_draft_discarded_leaves_a_copy_if_wanted(page, keep):
    page.evaluate("async () => { store.change('a', bw.job('a', 'typed')); await bw.sleep(450); }")
    reload(page)
    got = page.evaluate(
        """async (keep) => { await store.open("a"); await store.discardDraft("a", keep);
        const kept = await store.keptDrafts("a"); await store.close("a");
        return [kept.map((k) => k.job.edit), (await store.open("a")).draft]; }""",
        keep,
    )
    assert got == [["typed"] if keep else [], None]


@pytest.mark.parametrize("how", ["change", "commit"])
def test_an_offered_draft_on_which_nobody_decided_is_set_aside_not_overwritten(page, how):
    page.evaluate("async () => { store.change('a', bw.job('a', 'yesterday')); await bw.sleep(450); }")
    reload(page)
    got = page.evaluate(
        """async (how) => { await store.open("a");
        if (how === "change") { store.change("a", bw.job("a", "today")); await bw.sleep(450); }
        else await store.commit("a", bw.job("a", "today"));
        const kept = (await store.keptDrafts("a")).map((k) => [k.slot, k.job.edit]);
        await store.deleteKeptDraft("a", kept[0][0]);
        return [kept.map((k) => k[1]), (await store.keptDrafts("a")).length, (await bw.dump()).drafts.map((d) => d.envelope.payload.edit)]; }""",
        how,
    )
    assert got == [["yesterday"], 0, ["today"] if how == "change" else []]


def test_typing_back_to_what_is_saved_leaves_no_draft_and_says_saved(page):
    got = page.evaluate(
        """async () => { store.change("a", bw.job("a", "typed")); await bw.sleep(450); const one = (await bw.dump()).drafts.length;
        store.change("a", bw.job("a", "saved")); await bw.sleep(450);
        return [one, (await bw.dump()).drafts.length, store.saveState("a").kind]; }"""
    )
    assert got == [1, 0, "saved"]


def test_a_damaged_draft_is_quarantined_and_the_job_opens(page):
    page.evaluate("async () => { store.change('a', bw.job('a', 'typed')); await bw.sleep(450); }")
    page.evaluate("async () => { await bw.raw(async (db) => { const d = await db.get('drafts', ['a', 'now']); d.envelope.payload.edit = 'flipped'; await db.put('drafts', d); }); }")
    reload(page)
    got = page.evaluate("async () => [await store.open('a'), (await store.quarantine()).map((q) => q.reason), (await bw.dump()).drafts.length]")
    assert got[0]["job"]["edit"] == "saved"
    assert got[0]["draft"] is None
    assert got[0]["recovered"] is None
    assert got[1:] == [["its checksum does not agree"], 0]


def test_flush_makes_a_draft_durable_and_waits_for_commits(page):
    got = page.evaluate(
        """async () => { void store.commit("a", bw.job("a", 2)); store.change("a", bw.job("a", "typed"));
        bw.hooks.counts.strict = 0; bw.hooks.counts.relaxed = 0;
        await store.flush(); const dump = await bw.dump();
        return [bw.hooks.counts.relaxed, dump.revisions.at(-1).payload.edit, dump.drafts[0].envelope.payload.edit]; }"""
    )
    assert got == [0, "2", "typed"]


def test_a_job_handed_over_and_changed_afterwards_is_saved_as_it_was(page):
    got = page.evaluate(
        """async () => { const job = bw.job("a", "as committed"); const saved = store.commit("a", job); job.edit = "changed later"; await saved;
        const dump = await bw.dump(); const head = dump.revisions.at(-1);
        return [head.payload.edit, bw.envelope.findFault(head)]; }"""
    )
    assert got == ["as committed", None]


def test_unknown_keys_and_odd_text_come_back_as_they_were(page):
    odd = {"": 1, "näme": "… \u2028 \U0001f9f1 \x00", "nested": [[], {}, None, 1e-300, -0.5], "joints": "not a list"}
    got = page.evaluate(
        """async (odd) => { await store.commit("a", {id: "a", ...odd}); await store.close("a"); return (await store.open("a")).job; }""", odd
    )
    assert got == {"id": "a", **odd}


# ---- undo --------------------------------------------------------------------------------------------------------


def test_undo_and_redo_go_through_the_whole_session_sixty_deep(page):
    got = page.evaluate(
        """async () => {
        for (let i = 1; i <= 60; i++) await store.commit("a", bw.job("a", i), "Edit " + i);
        const back = [], forth = [];
        for (let step; (step = await store.undo("a")) !== null;) back.push([step.job.edit, step.label]);
        await store.flush();
        for (let step; (step = await store.redo("a")) !== null;) forth.push(step.job.edit);
        await store.flush();
        return {back, forth, head: (await bw.dump()).revisions.at(-1).payload.edit, state: store.history("a")}; }"""
    )
    assert [b[0] for b in got["back"]] == [str(i) for i in range(59, 0, -1)] + ["saved"]
    assert got["back"][0][1] == "Edit 60"
    assert got["forth"] == [str(i) for i in range(1, 61)]
    assert got["head"] == "60"
    assert got["state"]["canRedo"] is False
    assert got["state"]["depth"] >= 50


def test_undo_survives_a_reload(page):
    page.evaluate("async () => { for (let i = 1; i <= 55; i++) await store.commit('a', bw.job('a', i), 'Edit ' + i); await (await store.undo('a')).saved; }")
    reload(page)
    got = page.evaluate(
        """async () => { const opened = await store.open("a"); const before = store.history("a");
        const redo = (await store.redo("a")).job.edit; const steps = [];
        for (let step; (step = await store.undo("a")) !== null;) steps.push(step.job.edit);
        return {shown: opened.job.edit, before, redo, steps}; }"""
    )
    assert got["shown"] == "54"
    assert (got["before"]["undoLabel"], got["before"]["redoLabel"]) == ("Edit 54", "Edit 55")
    assert got["redo"] == "55"
    assert len(got["steps"]) == 55
    assert got["steps"][-1] == "saved"


def test_quick_taps_on_undo_are_one_step_each(page):
    got = page.evaluate(
        """async () => { for (let i = 1; i <= 5; i++) await store.commit("a", bw.job("a", i));
        const steps = await Promise.all([store.undo("a"), store.undo("a"), store.undo("a")]); await store.flush();
        return [steps.map((s) => s.job.edit), (await bw.dump()).revisions.at(-1).payload.edit]; }"""
    )
    assert got == [["4", "3", "2"], "2"]


def test_undo_while_typing_keeps_what_was_typed_as_a_step(page):
    got = page.evaluate(
        """async () => { await store.commit("a", bw.job("a", 1)); store.change("a", bw.job("a", "half typed"));
        const back = await store.undo("a"); const forth = await store.redo("a"); await store.flush();
        return [back.job.edit, forth.job.edit, (await bw.dump()).revisions.at(-1).payload.edit]; }"""
    )
    assert got == ["1", "half typed", "half typed"]


def test_the_buttons_know_at_once_what_can_be_undone(page):
    got = page.evaluate("() => { void store.commit('a', bw.job('a', 1), 'Width'); return store.history('a'); }")
    assert got == {"canUndo": True, "canRedo": False, "undoLabel": "Width", "redoLabel": None, "depth": 1}


# ---- revisions ---------------------------------------------------------------------------------------------------


def test_revisions_are_thinned_out_in_the_database_and_pinned_ones_stay(page):
    got = page.evaluate(
        """async () => {
        await store.pin("a", 1);
        for (let i = 1; i <= 75; i++) await store.commit("a", bw.job("a", i));
        await store.noteBackup("a");
        const marks = await store.revisions("a"); const dump = await bw.dump();
        return {marks, revs: dump.revisions.map((r) => r.rev), first: (await store.openRevision("a", 1)).edit, gone: await bw.outcome(() => store.openRevision("a", 3))}; }"""
    )
    assert sorted(m["rev"] for m in got["marks"]) == got["revs"], "the list and the records agree"
    assert got["revs"][0] == 1
    assert got["revs"][1:] == list(range(76 - 60, 77)), "the undo steps, which hold the newest three too"
    assert got["first"] == "saved"
    assert got["gone"]["code"] == "not-found"
    assert next(m for m in got["marks"] if m["rev"] == 76)["exported"] is True


# ---- the bin -----------------------------------------------------------------------------------------------------


def test_a_removed_job_lies_in_the_bin_until_it_is_emptied(page):
    got = page.evaluate(
        """async () => {
        await store.create(bw.job("b", 1));
        await store.attachPhoto("a", await bw.picture(40, 30));
        await store.remove("a");
        const one = [(await store.list()).map((j) => j.id), (await store.bin()).map((j) => j.id), (await store.facts()).text.includes("1 job in the bin")];
        await store.putBack("a");
        const two = [(await store.list()).map((j) => j.id).sort(), (await store.open("a")).job.edit];
        await store.remove("a");
        const emptied = await store.emptyBin();
        const dump = await bw.dump();
        return {one, two, emptied, left: [dump.jobs, dump.revisions, dump.photos].map((s) => s.map((r) => r.id)), meta: dump.meta.map((m) => m.key)}; }"""
    )
    assert got["one"] == [["b"], ["a"], True]
    assert got["two"] == [["a", "b"], "saved"]
    assert got["emptied"] == 1
    assert got["left"] == [["b"], ["b"], []]
    assert not [k for k in got["meta"] if k.endswith("/a")]


def test_a_second_job_with_the_same_id_is_refused(page):
    got = page.evaluate("async () => [await bw.outcome(() => store.create(bw.job('a', 'other'))), (await store.open('a')).job.edit]")
    assert got[0]["code"] == "exists"
    assert got[1] == "saved"


# ---- opening and closing at awkward moments ----------------------------------------------------------------------


def test_opening_an_open_job_again_does_not_lose_what_is_being_typed(page):
    got = page.evaluate(
        """async () => { store.change("a", bw.job("a", "typed before")); const one = await store.open("a");
        const opening = store.open("a"); store.change("a", bw.job("a", "typed during")); await opening;
        const three = await store.takeOver("a"); await store.flush();
        return [one.job.edit, three.job.edit, (await bw.dump()).drafts[0].envelope.payload.edit]; }"""
    )
    assert got == ["typed before", "typed during", "typed during"]


def test_a_load_that_is_overtaken_by_typing_does_not_put_the_old_job_back(page):
    got = page.evaluate(
        """async () => { const opening = store.open("a"); store.change("a", bw.job("a", "typed during")); const two = await opening;
        await store.flush(); return [two.job.edit, (await bw.dump()).drafts[0].envelope.payload.edit]; }"""
    )
    assert got == ["typed during", "typed during"]


def test_a_job_that_cannot_be_saved_cannot_be_put_away(page):
    got = page.evaluate(
        """async () => { bw.hooks.onTransaction = (names, mode) => { if (mode === "readwrite") throw new DOMException("gone", "InvalidStateError"); };
        void store.commit("a", bw.job("a", "unsaved")).catch(() => undefined);
        const removed = await bw.outcome(() => store.remove("a")); const closed = await bw.outcome(() => store.close("a"));
        bw.hooks.onTransaction = null; await store.flush();
        return [removed.ok, closed.ok, (await bw.dump()).revisions.at(-1).payload.edit, (await store.list()).length]; }"""
    )
    assert got == [False, False, "unsaved", 1]


def test_a_start_without_storage_says_why(new_page):
    got = new_page().evaluate(
        """async () => { IDBFactory.prototype.open = () => { throw new DOMException("no", "UnknownError"); };
        const store = await bw.open(); return [store.startProblem, await bw.outcome(() => store.list())]; }"""
    )
    assert "cannot be reached" in got[0]
    assert got[1]["code"] == "failed"
    assert "cannot be reached" in got[1]["message"]
    assert "not saved" not in got[1]["message"].lower()
