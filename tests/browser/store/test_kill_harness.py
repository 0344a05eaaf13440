"""Promises 1 and 2, by killing a real browser: 20 rounds here, any number with `kill_harness.py --rounds N`."""

from __future__ import annotations

import copy

import pytest

from . import kill_harness
from .conftest import CHROMIUM_ARGUMENTS, WEB, find_chromium, serve

pytestmark = pytest.mark.browser

ROUNDS = 20
SEED = 20260301


def run(store_url: str, rounds: int, **more) -> kill_harness.Report:
    return kill_harness.run(
        rounds,
        url=f"{store_url}/harness_page.html",
        blank=f"{store_url}/empty.html",
        executable=find_chromium(),
        arguments=CHROMIUM_ARGUMENTS,
        seed=SEED,
        **more,
    )


@pytest.fixture(scope="module")
def report(store_url, in_own_thread) -> kill_harness.Report:
    return in_own_thread(run, store_url, ROUNDS)


def test_promise_1_a_kill_during_a_write_gives_the_old_or_the_new_revision_never_a_mix(report):
    assert report.torn == 0, report.faults
    assert report.faults == []
    assert report.cut_short > 0, "no kill met an edit under way: the rounds prove nothing"


def test_promise_2_a_kill_after_complete_gives_the_new_revision(report):
    assert report.rounds == ROUNDS
    assert report.acknowledged >= ROUNDS
    assert report.lost == 0, report.faults
    # When the browser throws its own database away, the job comes back from the second copy.
    assert report.brought_back == report.dropped
    print(report.text())


def test_the_harness_goes_red_when_a_save_is_said_too_early(store_url, in_own_thread):
    """A harness that cannot fail proves nothing. Two transactions instead of one fail within a few rounds."""
    report = in_own_thread(run, store_url, 4, fault="two-writes")
    assert report.torn > 0
    assert report.lost > 0
    assert not report.is_clean


def test_the_app_itself_loses_nothing_when_it_is_killed(in_own_thread):
    """The same, through the fields of the app as built; `tests/run.py` builds it first."""
    dist = WEB / "dist"
    if not (dist / "index.html").exists():
        pytest.skip("web/dist is not built")
    with serve(dist) as base:
        report = in_own_thread(kill_harness.run_app, 6, base, executable=find_chromium(), arguments=CHROMIUM_ARGUMENTS, seed=SEED)
    assert report.is_clean, report.faults
    assert report.acknowledged > 0
    print(report.text())


# ---- the check itself, on records made to be torn ----------------------------------------------------------------


@pytest.fixture(scope="module")
def sound_dump(store_browser, store_url):
    context = store_browser.new_context()
    page = context.new_page()
    page.goto(f"{store_url}/store_page.html")
    page.wait_for_function("window.bw !== undefined")
    dump = page.evaluate(
        """async () => { const store = await bw.open(); const job = (n) => bw.job("kill", n, {title: String(n), filler: n + "0123456789abcdef".repeat(2048)});
        await store.create(job(0)); await store.commit("kill", job(1)); store.change("kill", job(2)); await bw.sleep(450); return bw.dump(); }"""
    )
    context.close()
    return dump


def test_sound_records_are_called_sound(sound_dump):
    assert len(sound_dump["drafts"]) == 1
    assert kill_harness.find_torn(sound_dump, "kill", is_uniform=True) == []


@pytest.mark.parametrize(
    ("word", "harm"),
    [
        ("checksum", lambda d: d["revisions"][1]["payload"].update(title="x")),
        ("checksum", lambda d: d["drafts"][0]["envelope"]["payload"].update(title="x")),
        ("parts of different edits", lambda d: d["revisions"][0]["payload"]["joints"][2].update(note="7")),
        ("without its revision", lambda d: d["revisions"].pop()),
        ("without its revision", lambda d: d["jobs"][0].update(sha256="0")),
        ("listed and not there", lambda d: d["revisions"].pop(0)),
        ("there and not listed", lambda d: d["jobs"][0]["revisions"].pop(0)),
        ("undo list", lambda d: next(m for m in d["meta"] if m["key"] == "history/kill")["value"].update(at=0)),
        ("quarantine", lambda d: d["quarantine"].append({})),
    ],
)
def test_every_kind_of_tear_is_seen(sound_dump, word, harm):
    dump = copy.deepcopy(sound_dump)
    harm(dump)
    assert any(word in fault for fault in kill_harness.find_torn(dump, "kill", is_uniform=True))


@pytest.mark.long
def test_promises_1_and_2_hold_over_two_hundred_rounds(store_url, in_own_thread):
    report = in_own_thread(run, store_url, 200)
    print(report.text())
    assert report.is_clean, report.faults
    assert report.rounds == 200
