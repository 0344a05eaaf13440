// What can be said about the keeping of the data. The browser may not know, or may never answer: each question has
// a time limit, and none is asked on the way to the first screen.

import type { Database } from "./db";
import * as photos from "./photos";
import { isSoundPointer } from "./reading";
import { backupText, bytesText, persistText } from "./texts";
import type { StoreFacts } from "./types";

const ANSWER_LIMIT_MS = 1_000;
/** A prompt may stay open for a while; after this the answer counts as not given. */
const PROMPT_LIMIT_MS = 30_000;

function storageManager(): Partial<StorageManager> | null {
  const storage = (navigator as { storage?: Partial<StorageManager> }).storage;
  return storage ?? null;
}

async function answer<T>(question: Promise<T> | undefined, limitMs: number): Promise<T | null> {
  if (question === undefined) return null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  const late = new Promise<null>((resolve) => {
    timer = setTimeout(() => resolve(null), limitMs);
  });
  try {
    return await Promise.race([question, late]);
  } catch {
    return null;
  } finally {
    clearTimeout(timer);
  }
}

export async function askPersistence(): Promise<boolean | null> {
  return answer(storageManager()?.persist?.(), PROMPT_LIMIT_MS);
}

export async function gatherFacts(db: Database, now: Date = new Date()): Promise<StoreFacts> {
  const storage = storageManager();
  const [persisted, estimate] = await Promise.all([
    answer(storage?.persisted?.(), ANSWER_LIMIT_MS),
    answer(storage?.estimate?.(), ANSWER_LIMIT_MS),
  ]);
  const { pointers, quarantined, lastBackup } = await db
    .read(["jobs", "quarantine", "meta"], async (tx) => {
      const [pointers, quarantined, lastBackup] = await Promise.all([
        tx.objectStore("jobs").getAll(),
        tx.objectStore("quarantine").count(),
        tx.objectStore("meta").get("last-backup"),
      ]);
      return { pointers: pointers.filter(isSoundPointer), quarantined, lastBackup };
    })
    .catch(() => ({ pointers: [], quarantined: 0, lastBackup: undefined }));
  const attached = await photos.list(db).catch(() => []);
  const jobs = pointers.filter((pointer) => pointer.removed_at === null);
  const facts = {
    persisted,
    usageBytes: estimate?.usage ?? null,
    quotaBytes: estimate?.quota ?? null,
    lastBackupAt: typeof lastBackup?.value === "string" ? lastBackup.value : null,
    quarantined,
    notBackedUp: jobs.filter((pointer) => pointer.backup?.rev !== pointer.rev).length,
    jobs: jobs.length,
    inBin: pointers.length - jobs.length,
    photos: attached.length,
    photoBytes: attached.reduce((sum, photo) => sum + photo.bytes + (photo.original?.bytes ?? 0), 0),
  };
  return { ...facts, text: factTexts(facts, now) };
}

export function factTexts(facts: Omit<StoreFacts, "text">, now: Date = new Date()): string[] {
  const many = (n: number, one: string, more: string): string => `${n} ${n === 1 ? one : more}`;
  const lines = [backupText(facts.lastBackupAt, now)];
  if (facts.notBackedUp > 0) lines.push(`${many(facts.notBackedUp, "job has", "jobs have")} changes that are in no backup`);
  lines.push(persistText(facts.persisted));
  if (facts.usageBytes !== null && facts.quotaBytes !== null) {
    const free = Math.max(0, facts.quotaBytes - facts.usageBytes);
    lines.push(`${bytesText(facts.usageBytes)} used, about ${bytesText(free)} free for this app`);
  }
  if (facts.photos > 0) lines.push(`${many(facts.photos, "photo", "photos")}, ${bytesText(facts.photoBytes)}`);
  if (facts.inBin > 0) lines.push(`${many(facts.inBin, "job", "jobs")} in the bin`);
  if (facts.quarantined > 0) lines.push(`${many(facts.quarantined, "damaged record", "damaged records")} set aside`);
  return lines;
}
