"""Mutated job files through the import door: refused or read with named issues, never an exception.

10,000 files a run: half mutated as bytes, half as values. The seed is printed on failure.
"""

import json
import random

import pytest

from beadwright import desk
from beadwright.job import open_bytes
from jobs import make_job

ROUNDS, BLOCKS = 10_000, 20
SEED = 20261201
SWAPS = [b"\x00", b"\xff", b'"', b"{", b"}", b"[", b"]", b",", b":", b"\\", b"1e999", b"-", b"null", b"NaN", b"\xc3", b"\\ud800", b'"__proto__":', b"=", b"9" * 50]
VALUES = [None, True, [], {}, "", "=cmd()", "<script>", "9" * 100, -1, 1e308, 10**40, "900 degC", "0 mm", "𝔘", "a" * 3000, [[[[]]]], {"__proto__": 1}, "\u202e"]


def mutate_bytes(data: bytes, rng: random.Random) -> bytes:
    out = bytearray(data)
    for _ in range(rng.randint(1, 6)):
        at = rng.randrange(len(out) + 1)
        action = rng.randrange(5)
        if action == 0 and out:
            out[at - 1] ^= 1 << rng.randrange(8)
        elif action == 1:
            out[at:at] = rng.choice(SWAPS)
        elif action == 2:
            del out[at : at + rng.randint(1, 40)]
        elif action == 3:
            out[at:at] = out[at : at + rng.randint(1, 200)]
        else:
            out = out[: max(1, at)]
    return bytes(out)


def mutate_value(value, rng: random.Random):
    """Replace, drop or move one place of a decoded job, at random depth."""
    if isinstance(value, dict) and value and rng.random() < 0.8:
        key = rng.choice(list(value))
        out = dict(value)
        action = rng.randrange(4)
        if action == 0:
            del out[key]
        elif action == 1:
            out[rng.choice(["id", "width", "x" * rng.randint(1, 300)])] = rng.choice(VALUES)
        else:
            out[key] = mutate_value(value[key], rng)
        return out
    if isinstance(value, list) and value and rng.random() < 0.8:
        out = list(value)
        at = rng.randrange(len(out))
        out[at] = mutate_value(out[at], rng)
        return out * 2 if rng.random() < 0.1 else out
    return rng.choice(VALUES)


@pytest.mark.parametrize("block", range(BLOCKS))
def test_mutated_files_are_refused_or_read_with_named_issues(block):
    rng = random.Random(SEED + block)
    job = make_job({"causes": [{"id": "c", "label": "Load", "closing": "2 mm"}], "face": {"width": "15 mm", "surface": "20 degC", "air": "20 degC", "humidity": "60 %"}})
    clean = json.dumps(job, ensure_ascii=False).encode()
    read = refused = 0
    for _ in range(ROUNDS // BLOCKS):
        if rng.random() < 0.5:
            data = mutate_bytes(clean, rng)
        else:
            changed = job
            for _ in range(rng.randint(1, 5)):
                changed = mutate_value(changed, rng)
            data = json.dumps(changed).encode()
        opened = open_bytes(data)
        if opened.job is None:
            refused += 1
            assert len(opened.issues) == 1 and opened.issues[0].message
            continue
        read += 1
        answer = desk.evaluate(opened.job)
        desk.to_json(answer)
        assert all(issue["message"] and issue["code"] for issue in answer["issues"])
    # Both doors were really used; a run that refused everything would prove nothing.
    assert read > 50 and refused > 50
