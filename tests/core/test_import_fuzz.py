"""Mutated job files through the import door: refused or read with named issues, never an exception.

10,000 files a run: half mutated as bytes, half as values.
"""

import random

import pytest

from beadwright import desk
from beadwright.job import open_bytes
from jobs import make_job
from mutated import mutated_file

ROUNDS, BLOCKS = 10_000, 20
SEED = 20261201


@pytest.mark.parametrize("block", range(BLOCKS))
def test_mutated_files_are_refused_or_read_with_named_issues(block):
    rng = random.Random(SEED + block)
    job = make_job({"causes": [{"id": "c", "label": "Load", "closing": "2 mm"}], "face": {"width": "15 mm", "surface": "20 degC", "air": "20 degC", "humidity": "60 %"}})
    read = refused = 0
    for _ in range(ROUNDS // BLOCKS):
        opened = open_bytes(mutated_file(job, rng))
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
