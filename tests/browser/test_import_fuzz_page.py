"""300 mutated job files through the page's own file picker: each refused in words or offered, and the page lives on."""

import random

from playwright.sync_api import expect

from jobs import make_job
from mutated import mutated_file

from . import shell

FILES, SEED = 300, 20261202
TAKEN_EVERY = 6


def test_three_hundred_damaged_files_are_refused_or_offered_and_never_break_the_page(tablet, site):
    page = shell.home(tablet, site.url)
    shell.calculator_ready(page)
    rng = random.Random(SEED)
    job = make_job({"causes": [{"id": "c", "label": "Load", "closing": "2 mm"}], "face": {"width": "15 mm"}})
    refused = offered = opened = 0
    for index in range(FILES):
        data = mutated_file(job | {"id": f"f{index}"}, rng)
        page.get_by_test_id("open-file").set_input_files({"name": f"strange-{index}.json", "mimeType": "application/json", "buffer": data})
        card = page.get_by_test_id("import")
        expect(card).to_contain_text(f"strange-{index}.json", timeout=shell.WORKING_LIMIT_MS)
        new = page.get_by_test_id("import-new")
        if new.count() == 0:
            refused += 1
            assert len(card.inner_text()) > 60, "a refusal says why"
        else:
            offered += 1
            if offered % TAKEN_EVERY == 0:
                new.click()
                expect(page.locator("main[data-page=wall]")).to_be_visible()
                expect(page.locator("main h1")).to_be_visible()
                opened += 1
                page.goto(site.url + "#/")
                expect(page.get_by_test_id("open-file")).to_be_attached()
                continue
        page.get_by_test_id("import-cancel").click()
        expect(page.get_by_test_id("open-file")).to_be_attached()
    assert tablet.requests.page_errors == []
    # All three ways were really walked.
    assert refused > 40 and offered > 40 and opened > 5
