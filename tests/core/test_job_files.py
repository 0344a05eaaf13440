"""The door for foreign bytes: read with named issues, or refused with one reason."""

import json

import pytest

from beadwright.job import blank, compare, merge, open_bytes, to_bytes
from beadwright.job.limits import MAX_BYTES, MAX_DEPTH, MAX_JOINTS, MAX_TEXT

SMALL = {"format": "beadwright-job", "version": 1, "id": "j1", "title": "Shed", "units": "metric", "joints": [], "later": {"kept": [1, "two"]}}


def bytes_of(value: object) -> bytes:
    return json.dumps(value).encode()


def test_unknown_keys_survive_a_round_trip():
    opened = open_bytes(bytes_of(SMALL | {"site": {"summer_air": "34 degC", "colour_of_sky": "grey"}}))
    again = open_bytes(to_bytes(opened.job))
    assert again.job == opened.job
    assert again.job["later"] == {"kept": [1, "two"]} and again.job["site"]["colour_of_sky"] == "grey"


def test_what_was_typed_is_written_as_typed():
    job = SMALL | {"joints": [{"id": "a", "width": "9,5 mm", "side_a": {"length": "12' 6 1/2\""}}]}
    assert open_bytes(to_bytes(job)).job["joints"] == job["joints"]


REFUSED = [
    (b"", "file-empty"),
    (b"   \n", "file-empty"),
    (b"\xff\xfe\x00garbage", "not-text"),
    (b"{", "not-json"),
    (bytes_of(SMALL)[:-20], "not-json"),
    (b"[]", "foreign-file"),
    (b"null", "foreign-file"),
    (b'{"format": "something-else", "version": 1}', "foreign-file"),
    (b"PK\x03\x04 not ours", "not-json"),
    (b'{"format": "beadwright-job"}', "no-version"),
    (b'{"format": "beadwright-job", "version": true}', "no-version"),
    (b'{"format": "beadwright-job", "version": 0}', "no-version"),
    (b'{"format": "beadwright-job", "version": "1"}', "no-version"),
    (b'{"format": "beadwright-job", "version": 1, "a": NaN}', "not-a-number"),
    (b'{"format": "beadwright-job", "version": 1, "a": 1e999}', "not-a-number"),
    (b'{"format": "beadwright-job", "version": 1, "a": ' + b"9" * 5000 + b"}", "not-a-number"),
    (b'{"format": "beadwright-job", "version": 1, "version": 1}', "double-key"),
    (b'{"format": "beadwright-job", "version": 1, "__proto__": {"x": 1}}', "forbidden-key"),
    (b'{"format": "beadwright-job", "version": 1, "site": {"constructor": 1}}', "forbidden-key"),
    (b"[" * 100000, "too-deep"),
    (b'{"format": "beadwright-job", "version": 1, "a": ' + b"[" * (MAX_DEPTH + 5) + b"]" * (MAX_DEPTH + 5) + b"}", "too-deep"),
    (bytes_of(SMALL | {"note": "x" * (MAX_TEXT + 1)}), "text-too-long"),
    (b'{"format": "beadwright-job", "version": 1, "title": "\\ud800"}', "broken-text"),
    (bytes_of(SMALL | {"joints": [{}] * (MAX_JOINTS + 1)}), "too-many-rows"),
]  # fmt: skip


@pytest.mark.parametrize(("data", "code"), REFUSED, ids=[f"{index}-{row[1]}" for index, row in enumerate(REFUSED)])
def test_refused_with_one_plain_reason(data, code):
    opened = open_bytes(data)
    assert opened.job is None
    assert [issue.code for issue in opened.issues] == [code]
    assert opened.issues[0].severity == "error" and opened.issues[0].message.endswith((".", "."))


def test_too_large_a_file_is_refused_unread():
    assert open_bytes(b" " * (MAX_BYTES + 1)).issues[0].code == "file-too-large"


def test_brackets_inside_texts_do_not_count_as_nesting():
    assert open_bytes(bytes_of(SMALL | {"title": "[" * 200 + '\\"{'})).job is not None


def test_a_newer_file_opens_read_only_and_is_not_touched():
    newer = SMALL | {"version": 7, "joints": "a new shape"}
    opened = open_bytes(bytes_of(newer))
    assert opened.read_only and opened.job == newer and opened.from_version == 7
    assert [issue.code for issue in opened.issues] == ["newer-version"]


def test_damaged_parts_are_kept_and_named():
    opened = open_bytes(bytes_of(SMALL | {"joints": [{"id": "a"}, 5], "site": "wet", "surveys": {}}))
    assert opened.job["joints"] == [{"id": "a"}, 5] and opened.job["site"] == "wet"
    assert {issue.path for issue in opened.issues} == {"/joints/1", "/site", "/surveys"}


def test_a_blank_job_opens_without_a_finding():
    for units in ("metric", "inch"):
        opened = open_bytes(to_bytes(blank(units) | {"id": "x"}))
        assert opened.job["units"] == units and not opened.issues


# ---- compare and merge ------------------------------------------------------------------------

BASE = {"id": "j", "title": "T", "joints": [{"id": "a", "name": "First", "width": "10 mm"}, {"id": "b", "name": "Second", "width": "12 mm"}]}


def with_width(job, joint, width):
    return job | {"joints": [row | {"width": width} if row["id"] == joint else row for row in job["joints"]]}


def test_compare_names_each_place_that_would_change():
    theirs = with_width(BASE, "b", "14 mm") | {"note": "new"}
    changes = {change["path"]: change for change in compare(BASE, theirs)["changes"]}
    assert set(changes) == {"/joints/b/width", "/note"}
    assert changes["/joints/b/width"]["label"] == "joints › Second › width" and changes["/joints/b/width"]["mine"] == "12 mm"
    assert changes["/note"]["kind"] == "added"


def test_merge_takes_changes_of_both_sides_to_different_joints():
    mine, theirs = with_width(BASE, "a", "11 mm"), with_width(BASE, "b", "14 mm")
    merged = merge(mine, theirs, BASE)
    assert not merged["conflicts"]
    assert [row["width"] for row in merged["job"]["joints"]] == ["11 mm", "14 mm"]


def test_merge_shows_a_conflict_and_keeps_mine_until_told():
    mine, theirs = with_width(BASE, "a", "11 mm"), with_width(BASE, "a", "13 mm")
    merged = merge(mine, theirs, BASE)
    assert [(c["path"], c["base"], c["mine"], c["theirs"]) for c in merged["conflicts"]] == [("/joints/a/width", "10 mm", "11 mm", "13 mm")]
    assert merged["job"]["joints"][0]["width"] == "11 mm"
    told = merge(mine, theirs, BASE, {"/joints/a/width": "theirs"})
    assert told["job"]["joints"][0]["width"] == "13 mm"


def test_merge_without_a_base_keeps_rows_of_both_tablets():
    mine = BASE | {"joints": [*BASE["joints"], {"id": "c", "name": "Mine"}]}
    theirs = BASE | {"joints": [BASE["joints"][1], BASE["joints"][0], {"id": "d", "name": "Theirs"}]}
    assert {row["id"] for row in merge(mine, theirs)["job"]["joints"]} == {"a", "b", "c", "d"}


def test_a_row_deleted_on_one_side_and_changed_on_the_other_is_a_conflict():
    mine = BASE | {"joints": BASE["joints"][:1]}
    merged = merge(mine, with_width(BASE, "b", "14 mm"), BASE)
    assert [c["path"] for c in merged["conflicts"]] == ["/joints/b"]
    assert merge(mine, BASE, BASE)["job"] == mine
