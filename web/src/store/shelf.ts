// What lies on the shelf while no job is open: the list, the bin, older copies, what was set aside.

import { together, type Database } from "./db";
import { findFault } from "./envelope";
import { migratePayload } from "./migrations";
import * as photos from "./photos";
import { isSoundPointer, type Rules } from "./reading";
import { toStoreError } from "./session";
import { TEXT } from "./texts";
import { StoreError, type Envelope, type Job, type Pointer, type QuarantineInfo, type RevisionInfo } from "./types";

/** Newest first, those in the bin too. */
export async function pointers(db: Database): Promise<Pointer[]> {
  const all = await db.read(["jobs"], (tx) => tx.objectStore("jobs").getAll()).catch(cannotRead);
  return all.filter(isSoundPointer).sort((a, b) => b.saved_at.localeCompare(a.saved_at));
}

export async function changePointer(db: Database, id: string, change: (pointer: Pointer) => Pointer): Promise<void> {
  try {
    await db.write(["jobs"], "strict", async (tx) => {
      const pointer = await tx.objectStore("jobs").get(id);
      if (pointer === undefined) throw new StoreError("not-found", "There is no such job on this tablet.");
      await tx.objectStore("jobs").put(change(pointer));
    });
  } catch (error) {
    throw toStoreError(error);
  }
}

// ---- copies -----------------------------------------------------------------------------------------------------

export async function revisions(db: Database, id: string): Promise<RevisionInfo[]> {
  const pointer = await db.read(["jobs"], (tx) => tx.objectStore("jobs").get(id)).catch(cannotRead);
  return (pointer?.revisions ?? []).map(({ saved_at, ...mark }) => ({ ...mark, savedAt: saved_at })).reverse();
}

export async function openRevision(db: Database, id: string, rev: number, rules: Rules): Promise<Job> {
  const record = await db.read(["revisions"], (tx) => tx.objectStore("revisions").get([id, rev])).catch(cannotRead);
  if (record === undefined) throw new StoreError("not-found", "That copy is no longer kept.");
  const fault = findFault(record);
  if (fault !== null) throw new StoreError("damaged", `That copy cannot be used: ${fault}.`);
  if (record.schema > rules.schema) throw new StoreError("read-only", TEXT.newerRecord);
  return migratePayload(record, rules.schema, rules.migrations);
}

/** An older copy that came with a backup; pinned there, pinned here. */
export async function addRevision(db: Database, record: Envelope<Job>): Promise<void> {
  await db.write(["jobs", "revisions"], "strict", async (tx) => {
    const pointer = await tx.objectStore("jobs").get(record.id);
    if (pointer === undefined || pointer.revisions.some((mark) => mark.rev === record.rev) || record.rev >= pointer.rev) return;
    const size = JSON.stringify(record.payload).length;
    const mark = { rev: record.rev, saved_at: record.saved_at, reason: "From a backup", size, pinned: true, exported: false };
    const marks = [...pointer.revisions, mark].sort((a, b) => a.rev - b.rev);
    await tx.objectStore("revisions").put(record);
    await tx.objectStore("jobs").put({ ...pointer, revisions: marks });
  });
}

export async function keptDrafts(db: Database, id: string, rules: Rules): Promise<{ slot: string; at: string; job: Job }[]> {
  const range = IDBKeyRange.bound([id, "kept "], [id, "kept \uffff"]);
  const records = await db.read(["drafts"], (tx) => tx.objectStore("drafts").getAll(range)).catch(cannotRead);
  return records
    .filter(({ envelope }) => findFault(envelope) === null && envelope.schema <= rules.schema)
    .map(({ slot, envelope }) => ({ slot, at: envelope.saved_at, job: migratePayload(envelope, rules.schema, rules.migrations) }));
}

export async function quarantined(db: Database): Promise<QuarantineInfo[]> {
  const records = await db.read(["quarantine"], (tx) => tx.objectStore("quarantine").getAll()).catch(cannotRead);
  return records.map(({ key, id, reason, at, record }) => ({ key, id, reason, at, raw: JSON.stringify(record) }));
}

// ---- the bin and the backup -------------------------------------------------------------------------------------

/** The ids that are gone for good, photos and copies with them. */
export async function emptyBin(db: Database, only?: string[]): Promise<string[]> {
  const removed = (await pointers(db)).filter((p) => p.removed_at !== null && (only?.includes(p.id) ?? true));
  for (const { id } of removed) {
    const attached = await photos.list(db, id);
    await photos.remove(db, attached.map((photo) => photo.id));
    await db.write(["jobs", "revisions", "drafts", "meta"], "strict", (tx) =>
      together([
        () => tx.objectStore("revisions").delete(IDBKeyRange.bound([id, -Infinity], [id, Infinity])),
        () => tx.objectStore("drafts").delete(IDBKeyRange.bound([id, ""], [id, "\uffff"])),
        () => tx.objectStore("meta").delete(`history/${id}`),
        () => tx.objectStore("meta").delete(`writer/${id}`),
        () => tx.objectStore("jobs").delete(id),
      ]),
    );
  }
  return removed.map((pointer) => pointer.id);
}

export async function noteBackup(db: Database, id?: string): Promise<void> {
  const at = new Date().toISOString();
  await db.write(["jobs", "meta"], "strict", async (tx) => {
    const jobs = tx.objectStore("jobs");
    for (const pointer of await jobs.getAll()) {
      if (!isSoundPointer(pointer) || (id !== undefined && pointer.id !== id)) continue;
      // A copy that went out alone is kept, so that it can be compared with when it comes back.
      const marks = id === undefined ? pointer.revisions : pointer.revisions.map((m) => (m.rev === pointer.rev ? { ...m, exported: true } : m));
      await jobs.put({ ...pointer, revisions: marks, backup: { rev: pointer.rev, at } });
    }
    await tx.objectStore("meta").put({ key: "last-backup", value: at });
  });
}

/** A failed reading says so in words of its own: nothing has been lost. */
export function cannotRead(error: unknown): never {
  throw error instanceof StoreError ? error : new StoreError("failed", TEXT.unreachable, error);
}
