"""Mutated job files from a seed, for the import door in CPython and through the page."""

from __future__ import annotations

import json
import random
from typing import Any

SWAPS = [b"\x00", b"\xff", b'"', b"{", b"}", b"[", b"]", b",", b":", b"\\", b"1e999", b"-", b"null", b"NaN", b"\xc3", b"\\ud800", b'"__proto__":', b"=", b"9" * 50]
VALUES = [None, True, [], {}, "", "=cmd()", "<script>", "9" * 100, -1, 1e308, 10**40, "900 degC", "0 mm", "𝔘", "a" * 3000, [[[[]]]], {"__proto__": 1}, "\u202e"]


def mutate_bytes(data: bytes, rng: random.Random) -> bytes:
    """One to six cuts, flips, doublings and foreign bytes."""
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


def mutate_value(value: Any, rng: random.Random) -> Any:
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


def mutated_file(job: dict[str, Any], rng: random.Random) -> bytes:
    """A file of a job, damaged as bytes or as values, half and half."""
    if rng.random() < 0.5:
        return mutate_bytes(json.dumps(job, ensure_ascii=False).encode(), rng)
    changed: Any = job
    for _ in range(rng.randint(1, 5)):
        changed = mutate_value(changed, rng)
    return json.dumps(changed).encode()
