// Reading a job: check the hash, migrate, ask the core; what fails is set aside and the revision before it is tried.

import type { Database } from "./db";
import { canonicalText, findFault } from "./envelope";
import { findRefusal } from "./limits";
import { migratePayload } from "./migrations";
import { summaryOf } from "./session";
import { recoveredText, TEXT } from "./texts";
import {
  StoreError,
  type DraftRecord,
  type Envelope,
  type Job,
  type MigrationStep,
  type OpenResult,
  type Pointer,
  type QuarantineRecord,
} from "./types";

/** A core that does not answer must not keep a job from opening. */
const VALIDATE_LIMIT_MS = 3_000;

export interface Rules {
  schema: number;
  migrations: readonly MigrationStep[];
  validate: ((job: Job) => Promise<boolean>) | null;
}

export interface Reading {
  pointer: Pointer | null;
  job: Job;
  /** Drafts that say something else than the job, newest first, and the places of all that were found. */
  drafts: { offered: DraftRecord[]; slots: string[] };
  history: unknown;
  recovered: string | null;
  readOnly: OpenResult["readOnly"];
  /** Records to be set aside once the load is over. */
  faulty: { record: unknown; from: "revisions" | "drafts"; key: [string, number] | [string, string]; reason: string }[];
  highestRev: number;
}

export async function readJob(db: Database, id: string, rules: Rules): Promise<Reading> {
  const { pointer, found: foundDrafts, history, schema, head } = await db.read(["jobs", "revisions", "drafts", "meta"], async (tx) => {
    const pointer = await tx.objectStore("jobs").get(id);
    const [found, history, schema, head] = await Promise.all([
      tx.objectStore("drafts").getAll(IDBKeyRange.bound([id, "left "], [id, "now"])),
      tx.objectStore("meta").get(`history/${id}`),
      tx.objectStore("meta").get("schema"),
      pointer === undefined ? undefined : tx.objectStore("revisions").get([id, pointer.rev]),
    ]);
    return { pointer, found, history: history?.value, schema: schema?.value, head };
  });
  if (pointer === undefined && foundDrafts.length === 0) throw new StoreError("not-found", "There is no such job on this tablet.");

  const faulty: Reading["faulty"] = [];
  const isNewer = typeof schema === "number" && schema > rules.schema;
  const none = { offered: [], slots: [] };
  const reading = { drafts: none, history, recovered: null, faulty, highestRev: pointer?.rev ?? 0 };
  if (head !== undefined && head.schema > rules.schema) {
    const readOnly = { code: "newer-record" as const, reason: TEXT.newerRecord };
    return { ...reading, pointer: pointer ?? null, job: asJob(head.payload, id), readOnly };
  }

  const readOnly = isNewer ? { code: "newer-app" as const, reason: TEXT.newerApp } : null;
  const sound: DraftRecord[] = [];
  for (const draft of foundDrafts) {
    const checked = await checkDraft(draft, rules, faulty);
    if (checked !== null) sound.push(checked);
  }
  sound.sort((a, b) => b.envelope.saved_at.localeCompare(a.envelope.saved_at));
  const slots = sound.map((draft) => draft.slot);
  const found = pointer === undefined ? null : await findSound(db, id, pointer, head, rules, faulty);
  if (found === null) {
    const [newest, ...others] = sound;
    if (newest === undefined) {
      const reason = faulty[0]?.reason ?? "it is missing";
      throw new StoreError("damaged", `No copy of this job can be read: ${reason}. What was found is set aside.`, faulty);
    }
    const job = newest.envelope.payload;
    const recovered = "No saved copy of this job could be read. The draft was opened instead.";
    return { ...reading, drafts: { offered: others, slots }, pointer: null, job, readOnly, recovered };
  }

  const first = faulty.find((f) => f.from === "revisions");
  const shown = canonicalText(found.job);
  const offered = sound.filter((draft) => canonicalText(draft.envelope.payload) !== shown);
  return {
    ...reading,
    pointer: found.pointer,
    job: found.job,
    drafts: { offered, slots },
    readOnly,
    recovered: first === undefined ? null : recoveredText(pointer!.rev, first.reason, found.pointer.saved_at),
  };
}

async function findSound(
  db: Database,
  id: string,
  pointer: Pointer,
  head: Envelope<Job> | undefined,
  rules: Rules,
  faulty: Reading["faulty"],
): Promise<{ pointer: Pointer; job: Job } | null> {
  const older = await olderRevs(db, id, pointer.rev);
  for (const rev of [pointer.rev, ...older]) {
    const record = rev === pointer.rev ? head : await db.read(["revisions"], (tx) => tx.objectStore("revisions").get([id, rev]));
    const reason = record === undefined ? "it is missing" : (findFault(record) ?? (record.schema > rules.schema ? "a newer app wrote it" : null));
    let job: Job | null = null;
    let why = reason ?? (rev === pointer.rev && record!.sha256 !== pointer.sha256 ? "it is not the one that was saved last" : null);
    if (why === null) ({ job, why } = await understand(record!, rules));
    if (job !== null) {
      if (rev === pointer.rev) return { pointer, job };
      const gone = new Set(faulty.map((f) => f.key[1]));
      const revisions = pointer.revisions.filter((mark) => !gone.has(mark.rev) && mark.rev <= rev);
      const { sha256, schema, saved_at } = record!;
      return { pointer: { ...pointer, ...summaryOf(job), rev, sha256, schema, saved_at, revisions }, job };
    }
    faulty.push({ record: record ?? { missing: true, id, rev }, from: "revisions", key: [id, rev], reason: why ?? "it cannot be read" });
  }
  return null;
}

async function olderRevs(db: Database, id: string, below: number): Promise<number[]> {
  const range = IDBKeyRange.bound([id, -Infinity], [id, below], false, true);
  const keys = await db.read(["revisions"], (tx) => tx.objectStore("revisions").getAllKeys(range));
  return keys.map(([, rev]) => rev).reverse();
}

async function understand(record: Envelope<Job>, rules: Rules): Promise<{ job: Job | null; why: string | null }> {
  let job: Job;
  try {
    job = migratePayload(record, rules.schema, rules.migrations);
  } catch {
    return { job: null, why: "it could not be brought up to date" };
  }
  const refusal = findRefusal(job);
  if (refusal !== null) return { job: null, why: refusal };
  if (job.id !== record.id) return { job: null, why: "it belongs to another job" };
  if (rules.validate !== null && !(await isAccepted(rules.validate, job))) return { job: null, why: "the job in it does not make sense" };
  return { job, why: null };
}

/** Only a clear no counts: a core that fails or is late says nothing about the job. */
async function isAccepted(validate: (job: Job) => Promise<boolean>, job: Job): Promise<boolean> {
  let timer: ReturnType<typeof setTimeout> | undefined;
  const late = new Promise<boolean>((resolve) => {
    timer = setTimeout(() => resolve(true), VALIDATE_LIMIT_MS);
  });
  try {
    return await Promise.race([validate(job).catch(() => true), late]);
  } finally {
    clearTimeout(timer);
  }
}

async function checkDraft(draft: DraftRecord, rules: Rules, faulty: Reading["faulty"]): Promise<DraftRecord | null> {
  const fault = findFault(draft.envelope) ?? (draft.envelope.schema > rules.schema ? "a newer app wrote it" : null);
  if (fault === null) {
    const { job, why } = await understand(draft.envelope, { ...rules, validate: null });
    if (job !== null) return { ...draft, envelope: { ...draft.envelope, payload: job } };
    faulty.push({ record: draft, from: "drafts", key: [draft.id, draft.slot], reason: why ?? "it cannot be read" });
  } else if (draft.envelope.schema <= rules.schema) {
    faulty.push({ record: draft, from: "drafts", key: [draft.id, draft.slot], reason: fault });
  }
  return null;
}

function asJob(payload: unknown, id: string): Job {
  return typeof payload === "object" && payload !== null ? ({ ...payload, id } as Job) : { id };
}

/** Move what could not be read to quarantine and let the pointer name the revision that was opened. */
export async function setAside(db: Database, id: string, reading: Pick<Reading, "faulty" | "pointer">): Promise<void> {
  if (reading.faulty.length === 0) return;
  const at = new Date().toISOString();
  await db.write(["jobs", "revisions", "drafts", "quarantine"], "strict", async (tx) => {
    for (const { record, from, key, reason } of reading.faulty) {
      const entry: QuarantineRecord = { key: `${id} ${from} ${key[1]} ${at}`, id, from, reason, at, record };
      await tx.objectStore("quarantine").put(entry);
      if (from === "revisions") await tx.objectStore("revisions").delete(key as [string, number]);
      else await tx.objectStore("drafts").delete(key as [string, string]);
    }
    if (reading.pointer !== null) await tx.objectStore("jobs").put(reading.pointer);
  });
}

/** Pointers that are lost or cannot be read are made anew from the revisions that are there. */
export async function mendPointers(db: Database): Promise<string[]> {
  const { keys, pointers } = await db.read(["jobs", "revisions"], async (tx) => {
    const [keys, pointers] = await Promise.all([tx.objectStore("revisions").getAllKeys(), tx.objectStore("jobs").getAll()]);
    return { keys, pointers };
  });
  const sound = new Set(pointers.filter(isSoundPointer).map((pointer) => pointer.id));
  const orphans = new Set(keys.map(([id]) => id).filter((id) => !sound.has(id)));
  const mended: string[] = [];
  for (const id of orphans) {
    const range = IDBKeyRange.bound([id, -Infinity], [id, Infinity]);
    const records = await db.read(["revisions"], (tx) => tx.objectStore("revisions").getAll(range));
    const good = records.filter((record) => findFault(record) === null);
    const newest = good[good.length - 1];
    if (newest === undefined) continue;
    const pointer: Pointer = {
      id,
      rev: newest.rev,
      sha256: newest.sha256,
      schema: newest.schema,
      ...summaryOf(newest.payload),
      saved_at: newest.saved_at,
      removed_at: null,
      backup: null,
      revisions: good.map((record) => ({
        rev: record.rev,
        saved_at: record.saved_at,
        reason: "Found again",
        size: JSON.stringify(record.payload).length,
        pinned: false,
        exported: false,
      })),
    };
    await db.write(["jobs"], "strict", async (tx) => {
      const now = await tx.objectStore("jobs").get(id);
      if (now === undefined || !isSoundPointer(now)) await tx.objectStore("jobs").put(pointer);
    });
    mended.push(id);
  }
  return mended;
}

export function isSoundPointer(pointer: Pointer): boolean {
  return (
    typeof pointer.id === "string" &&
    Number.isInteger(pointer.rev) &&
    typeof pointer.saved_at === "string" &&
    Array.isArray(pointer.revisions) &&
    pointer.revisions.every((mark) => Number.isInteger(mark?.rev) && typeof mark.saved_at === "string")
  );
}
