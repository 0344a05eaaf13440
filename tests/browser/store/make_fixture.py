"""Lay down what the present app stores as a fixture that every later version must open.

Run once, when the number of the record version has been raised, and then never again for that number:

    python tests/browser/store/make_fixture.py

It refuses to write over a fixture that is there. All contents are invented.
"""

from __future__ import annotations

import hashlib
import json
import sys
import tempfile
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent))
import conftest

FILL = """
async () => {
  const store = await bw.open({app: "0.1.0", core: "0.1.0", tables: ["substrates@2026-1"]});
  const tower = {format: "beadwright-job", version: 1, id: "demo-tower", title: "Invented tower, east face", units: "metric", region: "europe",
    site: {note: "Invented for this fixture"}, sealants: [{id: "s1", name: "Sealant A", class: "iso-25"}],
    joints: [{id: "j1", name: "Panel to panel", kind: "butt", sealant: "s1", width: "16 mm", side_a: {length: "3.2 m"}, side_b: {length: "3.2 m"}, note: "9,5 mm at the foot · ½ in"},
             {id: "j2", name: "Sill", kind: "lap", width: "5/8 in", unheard_of: {kept: [1, null, true]}}],
    takeoff: {}, cure: {}, surveys: []};
  const hall = {...tower, id: "demo-hall", title: "Invented hall", units: "inch", joints: []};
  await store.create(tower, "New job");
  await store.pin("demo-tower", 1);
  const steps = ["17 mm", "18 mm", "19 mm"];
  for (const width of steps) await store.commit("demo-tower", {...tower, joints: [{...tower.joints[0], width}, tower.joints[1]]}, "Width");
  await (await store.undo("demo-tower")).saved;
  const photo = await store.attachPhoto("demo-tower", await bw.picture(48, 32), {name: "Joint at the foot"});
  const now = {...tower, joints: [{...tower.joints[0], width: "18 mm", photo: photo.id}, tower.joints[1]]};
  await store.commit("demo-tower", now, "Photo");
  store.change("demo-tower", {...now, title: "Yesterday's typing"});
  await bw.sleep(450);
  await store.dispose();
  const again = await bw.open({app: "0.1.0", core: "0.1.0", tables: ["substrates@2026-1"]});
  await again.open("demo-tower");
  await again.discardDraft("demo-tower", true);
  again.change("demo-tower", {...now, title: "Half typed"});
  await bw.sleep(450);
  await again.create(hall, "New job");
  await again.create({...hall, id: "demo-gone", title: "Invented, in the bin"}, "New job");
  await again.remove("demo-gone");
  await again.create({...hall, id: "demo-hurt", title: "x"}, "New job");
  await again.commit("demo-hurt", {...hall, id: "demo-hurt", title: "y"});
  await again.noteBackup();
  await again.dispose();
  await bw.raw(async (db) => { const r = await db.get("revisions", ["demo-hurt", 2]); r.payload.title = "z"; await db.put("revisions", r); });
  const last = await bw.open({app: "0.1.0", core: "0.1.0", tables: ["substrates@2026-1"]});
  const hurt = (await last.open("demo-hurt")).job;
  const expected = {jobs: {}, bin: ["demo-gone"], quarantine: 1};
  for (const [id, job, draft, kept] of [["demo-tower", now, {...now, title: "Half typed"}, 1], ["demo-hall", hall, null, 0], ["demo-hurt", hurt, null, 0]]) {
    expected.jobs[id] = {job, draft, kept_drafts: kept, revisions: (await last.revisions(id)).map((r) => r.rev), photos: (await last.photos(id)).map((p) => p.name)};
  }
  await last.dispose();
  const stores = await bw.dump();
  for (const name of Object.keys(stores)) stores[name] = stores[name].map(bw.pack);
  return {schema: bw.migrations.RECORD_SCHEMA, database: bw.migrations.DATABASE_VERSION, stores, expected};
}
"""


def main() -> int:
    from playwright.sync_api import sync_playwright

    with tempfile.TemporaryDirectory() as folder, sync_playwright() as pw:
        conftest.build_pages(Path(folder))
        with conftest.serve(Path(folder)) as url:
            browser = pw.chromium.launch(executable_path=conftest.find_chromium(), args=conftest.CHROMIUM_ARGUMENTS)
            page = browser.new_page()
            page.goto(f"{url}/store_page.html")
            page.wait_for_function("window.bw !== undefined")
            fixture = page.evaluate(FILL)
            browser.close()
    version = fixture["schema"]
    target = conftest.FIXTURES / f"v{version}.json"
    if target.exists():
        print(f"{target.name} is there already and is not written again")
        return 1
    fixture["about"] = f"What the app stored with record version {version}; invented contents. Never edited: every later version must open it."
    target.write_text(json.dumps(fixture, indent=1, ensure_ascii=False, sort_keys=True) + "\n", encoding="utf-8")
    lock_path = conftest.FIXTURES / "LOCK.json"
    lock = json.loads(lock_path.read_text(encoding="utf-8")) if lock_path.exists() else {"fixtures": {}, "migrations": {}}
    lock["fixtures"][str(version)] = hashlib.sha256(target.read_bytes()).hexdigest()
    lock_path.write_text(json.dumps(lock, indent=1, sort_keys=True) + "\n", encoding="utf-8")
    print(f"{target.name} and its hash in LOCK.json are written")
    return 0


if __name__ == "__main__":
    sys.exit(main())
