// All jobs and photos in one JSON file, and the way back. The file is one JSON value, laid out with one record a
// line, so that it can be written and read in pieces: photos need not all be in memory at once.

import type { Database } from "./db";
import { canonicalText, findFault, jsonCopy, newId, seal } from "./envelope";
import * as limits from "./limits";
import { migratePayload } from "./migrations";
import * as photos from "./photos";
import { isSoundPointer, type Rules } from "./reading";
import { sha256 } from "./sha256";
import { toStoreError, type Stamp } from "./session";
import { bytesText } from "./texts";
import { StoreError, type Clash, type ClashChoice, type Envelope, type Job, type PhotoMeta, type RestoreResult } from "./types";

export const BACKUP_FORMAT = "beadwright-backup";
export const BACKUP_VERSION = 1;
const BASE64_STEP_BYTES = 3 * 8192;

type Line =
  | { is: "job"; record: Envelope<Job>; photos: string[] }
  | { is: "revision"; record: Envelope<Job> }
  | { is: "photo"; record: Envelope<PhotoMeta>; data: string; original_data?: string };

/** `unsaved` are jobs whose newest state is only on screen; they are written as they are there. */
export async function writeBackup(db: Database, stamp: Stamp, unsaved: Map<string, Job>, only?: string[]): Promise<Blob> {
  const head = { format: BACKUP_FORMAT, version: BACKUP_VERSION, made_at: new Date().toISOString(), app: stamp.app };
  const parts: Blob[] = [new Blob([JSON.stringify(head).slice(0, -1) + ',"records":[\n'])];
  let count = 0;
  const add = (line: Line): void => {
    // A Blob may live on disk; a string would stay in memory until the end.
    parts.push(new Blob([(count > 0 ? ",\n" : "") + JSON.stringify(line)]));
    count++;
  };
  const stored = await db.read(["jobs"], (tx) => tx.objectStore("jobs").getAll()).catch((error: unknown) => {
    if (unsaved.size > 0) return [];
    throw toStoreError(error);
  });
  const pointers = new Map(stored.filter((p) => isSoundPointer(p) && p.removed_at === null).map((p) => [p.id, p]));
  const ids = new Set([...pointers.keys(), ...unsaved.keys()]);
  for (const id of ids) {
    if (only !== undefined && !only.includes(id)) continue;
    const pointer = pointers.get(id);
    const onScreen = unsaved.get(id);
    const attached = await photos.list(db, id).catch(() => []);
    const photoIds = attached.map((photo) => photo.id);
    const revs = pointer?.revisions.map((mark) => mark.rev).reverse() ?? [];
    const read = (rev: number): Promise<Envelope<Job> | undefined> =>
      db.read(["revisions"], (tx) => tx.objectStore("revisions").get([id, rev]));
    let newest: Envelope<Job> | null = null;
    if (onScreen !== undefined) {
      const rev = (pointer?.rev ?? 0) + 1;
      const parent = pointer?.rev ?? null;
      newest = seal<Job>({ kind: "job", ...stamp, id, rev, parent, saved_at: head.made_at, payload: jsonCopy(onScreen) });
    } else {
      for (const rev of revs) {
        const record = await read(rev);
        if (record !== undefined && findFault(record) === null) {
          newest = record;
          break;
        }
      }
    }
    if (newest !== null) add({ is: "job", record: newest, photos: photoIds });
    for (const mark of pointer?.revisions.filter((m) => m.pinned && m.rev !== newest?.rev) ?? []) {
      const record = await read(mark.rev);
      if (record !== undefined && findFault(record) === null) add({ is: "revision", record });
    }
    for (const photo of attached) {
      try {
        const { blob, envelope } = await photos.read(db, photo.id, "shown");
        const line: Line = { is: "photo", record: envelope, data: await toBase64(blob) };
        if (photo.original !== null) line.original_data = await toBase64((await photos.read(db, photo.id, "original")).blob);
        add(line);
      } catch {
        // A damaged photo must not keep the rest from being backed up; it stays where it is.
      }
    }
  }
  parts.push(new Blob([`\n],"count":${count},"complete":true}\n`]));
  return new Blob(parts, { type: "application/json" });
}

export interface RestoreDoor {
  db: Database;
  rules: Rules;
  /** The job with this id as it is here, or null. */
  find: (id: string) => Promise<{ job: Job; rev: number; savedAt: string } | null>;
  /** Save as a new job, or as a new revision on top of the one that is here, which is then pinned. */
  save: (job: Job, reason: string) => Promise<void>;
  addRevision: (record: Envelope<Job>) => Promise<void>;
}

export async function readBackup(
  file: Blob,
  choose: (clash: Clash) => ClashChoice | Promise<ClashChoice>,
  door: RestoreDoor,
): Promise<RestoreResult> {
  const result: RestoreResult = { restored: 0, skipped: 0, photos: 0, issues: [] };
  if (file.size > limits.MOST_BACKUP_BYTES) {
    result.issues.push(`The file has ${bytesText(file.size)}; the most is ${bytesText(limits.MOST_BACKUP_BYTES)}.`);
    return result;
  }
  /** Job id in the file -> where it went, or null when it was left out. */
  const places = new Map<string, { id: string; photoIds: Map<string, string> } | null>();
  try {
    for await (const line of readLines(file, result.issues)) {
      try {
        if (line.is === "job") await restoreJob(line, places, choose, door, result);
        else if (line.is === "photo") await restorePhoto(line, places, door, result);
        else await restoreRevision(line, places, door);
      } catch (error) {
        const problem = toStoreError(error);
        result.issues.push(`${nameOfLine(line)} was left out: ${problem.message}`);
        if (problem.code === "quota") break;
      }
    }
  } catch (error) {
    result.issues.push(error instanceof StoreError ? error.message : "The file could not be read to its end.");
  }
  return result;
}

async function restoreJob(
  line: Extract<Line, { is: "job" }>,
  places: Map<string, { id: string; photoIds: Map<string, string> } | null>,
  choose: (clash: Clash) => ClashChoice | Promise<ClashChoice>,
  door: RestoreDoor,
  result: RestoreResult,
): Promise<void> {
  const { record } = line;
  places.set(record.id, null);
  const job = await understand(record, door.rules);
  const asIs = { id: record.id, photoIds: new Map<string, string>() };
  const reason = `From the backup of ${record.saved_at.slice(0, 10)}`;
  const mine = await door.find(record.id);
  if (mine === null) {
    await door.save(job, reason);
    places.set(record.id, asIs);
    result.restored++;
    return;
  }
  if (canonicalText(mine.job) === canonicalText(job)) {
    // The same job is here already; only photos may be missing.
    places.set(record.id, asIs);
    result.skipped++;
    return;
  }
  const choice = await choose({
    id: record.id,
    title: typeof job.title === "string" ? job.title : "",
    mine: { rev: mine.rev, savedAt: mine.savedAt },
    theirs: { rev: record.rev, savedAt: record.saved_at },
  });
  if (choice === "replace") {
    await door.save(job, reason);
    places.set(record.id, asIs);
    result.restored++;
  } else if (choice === "both") {
    const photoIds = new Map(line.photos.map((id) => [id, newId()]));
    const copy = { ...(renamed(job, photoIds) as Job), id: newId() };
    await door.save(copy, reason);
    places.set(record.id, { id: copy.id, photoIds });
    result.restored++;
  } else {
    result.skipped++;
  }
}

async function restoreRevision(
  { record }: Extract<Line, { is: "revision" }>,
  places: Map<string, { id: string } | null>,
  door: RestoreDoor,
): Promise<void> {
  const place = places.get(record.id);
  if (place === undefined || place === null || place.id !== record.id) return;
  await understand(record, door.rules);
  await door.addRevision(record);
}

async function restorePhoto(
  line: Extract<Line, { is: "photo" }>,
  places: Map<string, { id: string; photoIds: Map<string, string> } | null>,
  door: RestoreDoor,
  result: RestoreResult,
): Promise<void> {
  const { record } = line;
  const place = places.get(record.payload?.job);
  if (place === null) return;
  if (place === undefined) throw new StoreError("refused", "its job is not in the file.");
  const fault = findFault(record) ?? limits.findRefusal(record);
  if (fault !== null) throw new StoreError("damaged", `${fault}.`);
  const shown = fromBase64(line.data);
  const original = line.original_data === undefined ? null : fromBase64(line.original_data);
  await checkBytes(shown, record.payload.data_sha256);
  if (original !== null) await checkBytes(original, record.payload.original?.data_sha256);
  const id = place.photoIds.get(record.id) ?? record.id;
  const known = await door.db.read(["photos"], (tx) => tx.objectStore("photos").get([id, "meta"]));
  if (known !== undefined) return;
  const payload = { ...record.payload, job: place.id, original: original === null ? null : record.payload.original };
  const { kind, schema, rev, parent, saved_at, app, core, tables } = record;
  await photos.put(door.db, seal<PhotoMeta>({ kind, schema, id, rev, parent, saved_at, app, core, tables, payload }), shown, original);
  result.photos++;
}

async function understand(record: Envelope<Job>, rules: Rules): Promise<Job> {
  const fault = findFault(record);
  if (fault !== null) throw new StoreError("damaged", `${fault}.`);
  if (record.schema > rules.schema) throw new StoreError("refused", "a newer version of the app saved it.");
  const refusal = limits.findRefusal(record);
  if (refusal !== null) throw new StoreError("refused", `${refusal}.`);
  if (record.payload.id !== record.id) throw new StoreError("refused", "it belongs to another job.");
  const job = migratePayload(record, rules.schema, rules.migrations);
  if (JSON.stringify(job).length > limits.MOST_JOB_CHARS) {
    throw new StoreError("too-large", `it is longer than ${bytesText(limits.MOST_JOB_CHARS)}.`);
  }
  if (rules.validate !== null && !(await rules.validate(job))) throw new StoreError("refused", "the job in it does not make sense.");
  return job;
}

/** Every text that is exactly one of the old ids becomes the new id. */
function renamed(value: unknown, ids: Map<string, string>): unknown {
  if (typeof value === "string") return ids.get(value) ?? value;
  if (Array.isArray(value)) return value.map((item) => renamed(item, ids));
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, renamed(item, ids)]));
}

function nameOfLine(line: Line): string {
  const record = line.record as Envelope<{ title?: unknown; name?: unknown }> | undefined;
  const name = record?.payload?.title ?? record?.payload?.name ?? record?.id;
  const kind = line.is === "photo" ? "Photo" : line.is === "revision" ? "An older copy of" : "Job";
  return `${kind} “${typeof name === "string" ? name.slice(0, 80) : "?"}”`;
}

// ---- the file, line by line -------------------------------------------------------------------------------------

async function* readLines(file: Blob, issues: string[]): AsyncGenerator<Line> {
  let isFirst = true;
  let isComplete = false;
  let count = 0;
  for await (const text of textLines(file)) {
    const trimmed = text.trim();
    if (trimmed === "") continue;
    if (isFirst) {
      isFirst = false;
      if (!trimmed.endsWith('"records":[') || !isOurs(trimmed + "]}")) {
        yield* readWhole(file, issues);
        return;
      }
      continue;
    }
    if (trimmed.startsWith("]")) {
      isComplete = /"complete":true\}$/.test(trimmed);
      break;
    }
    if (++count > limits.MOST_RECORDS) throw new StoreError("too-large", `The file has more than ${limits.MOST_RECORDS} records.`);
    const line = parseLine(trimmed.endsWith(",") ? trimmed.slice(0, -1) : trimmed);
    if (line === null) issues.push(`Record ${count} of the file cannot be read and was left out.`);
    else yield line;
  }
  if (isFirst) throw new StoreError("refused", "The file is empty.");
  if (!isComplete) issues.push("The file ends too early. What was in it has been read; something may be missing.");
}

/** For a file that some other program has laid out anew. */
async function* readWhole(file: Blob, issues: string[]): AsyncGenerator<Line> {
  if (file.size > limits.MOST_UNLINED_BYTES) throw new StoreError("refused", "This is not a backup file of this app.");
  let value: { records?: unknown };
  try {
    const text = await file.text();
    if (!isOurs(text)) throw new Error("other");
    value = JSON.parse(text) as { records?: unknown };
  } catch (error) {
    if (error instanceof StoreError) throw error;
    throw new StoreError("refused", "This is not a backup file of this app.");
  }
  const records = Array.isArray(value.records) ? (value.records as unknown[]) : [];
  const lines = records.map((record) => asLine(record));
  if (lines.includes(null)) issues.push("Some records of the file cannot be read and were left out.");
  // Jobs come before what hangs on them, whatever the order in the file.
  const order = { job: 0, revision: 1, photo: 2 };
  yield* lines.filter((line) => line !== null).sort((a, b) => order[a.is] - order[b.is]);
}

function isOurs(text: string): boolean {
  const head = JSON.parse(text) as { format?: unknown; version?: unknown } | null;
  if (typeof head !== "object" || head === null || head.format !== BACKUP_FORMAT) return false;
  if (typeof head.version === "number" && head.version > BACKUP_VERSION) {
    throw new StoreError("refused", "A newer version of the app made this backup. Update the app, then try again.");
  }
  return true;
}

function parseLine(text: string): Line | null {
  try {
    return asLine(JSON.parse(text));
  } catch {
    return null;
  }
}

function asLine(value: unknown): Line | null {
  if (typeof value !== "object" || value === null) return null;
  const line = value as Partial<Extract<Line, { is: "photo" }>> & { photos?: unknown };
  if (typeof line.record !== "object" || line.record === null || typeof line.record.id !== "string") return null;
  if (!["job", "revision", "photo"].includes(line.is ?? "")) return null;
  if (line.is === "photo") return typeof line.data === "string" ? (value as Line) : null;
  const ids = Array.isArray(line.photos) ? line.photos.filter((id): id is string => typeof id === "string") : [];
  return { ...(value as Extract<Line, { is: "job" }>), photos: ids };
}

async function* textLines(file: Blob): AsyncGenerator<string> {
  const reader = file.stream().getReader();
  const decoder = new TextDecoder();
  let pieces: string[] = [];
  let chars = 0;
  try {
    for (;;) {
      const { done, value } = await reader.read();
      let text = done ? decoder.decode() : decoder.decode(value, { stream: true });
      for (let end = text.indexOf("\n"); end >= 0; end = text.indexOf("\n")) {
        yield pieces.join("") + text.slice(0, end);
        pieces = [];
        chars = 0;
        text = text.slice(end + 1);
      }
      pieces.push(text);
      chars += text.length;
      if (chars > limits.MOST_LINE_CHARS) throw new StoreError("too-large", "A record in the file is too long.");
      if (done) break;
    }
    if (chars > 0) yield pieces.join("");
  } finally {
    void reader.cancel().catch(() => undefined);
  }
}

// ---- bytes as text ----------------------------------------------------------------------------------------------

async function toBase64(blob: Blob): Promise<string> {
  const bytes = new Uint8Array(await blob.arrayBuffer());
  const pieces: string[] = [];
  for (let at = 0; at < bytes.length; at += BASE64_STEP_BYTES) {
    pieces.push(btoa(String.fromCharCode(...bytes.subarray(at, at + BASE64_STEP_BYTES))));
  }
  return pieces.join("");
}

function fromBase64(text: string): ArrayBuffer {
  if (text.length > (limits.MOST_PHOTO_BYTES * 4) / 3 + 4) throw new StoreError("too-large", "the picture is too large.");
  let binary: string;
  try {
    binary = atob(text);
  } catch {
    throw new StoreError("damaged", "its picture cannot be read.");
  }
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i++) bytes[i] = binary.charCodeAt(i);
  return bytes.buffer;
}

async function checkBytes(data: ArrayBuffer, told: string | undefined): Promise<void> {
  if ((await sha256(new Uint8Array(data))) !== told) throw new StoreError("damaged", "the checksum of its picture does not agree.");
}
