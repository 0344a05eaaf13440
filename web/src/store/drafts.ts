// Where drafts lie: "now" is what is being typed, "left …" the last words of a window that went away, "kept …" a copy
// that was set aside, of which twenty a job are held.

import { together, type Handle, type WriteTx } from "./db";
import { canonicalText } from "./envelope";
import type { DraftRecord, Envelope, Job } from "./types";

const MOST_KEPT = 20;

export function lastWordsSlot(window: string): string {
  return `left ${window}`;
}

export function keptCopy(draft: DraftRecord): DraftRecord {
  return { ...draft, slot: `kept ${draft.envelope.saved_at}` };
}

/**
 * One put and an explicit commit, both in this turn: a page that goes away never hears the answer to a question, so
 * the usual checks cannot be made. The record therefore has a place of its own, where it cannot harm another's.
 */
export function writeLastWords(handle: Handle, window: string, sealNow: () => Envelope<Job>): void {
  try {
    const envelope = sealNow();
    const tx = handle.transaction("drafts", "readwrite", { durability: "relaxed" });
    tx.done.catch(() => undefined);
    tx.store.put({ id: envelope.id, slot: lastWordsSlot(window), envelope }).catch(() => undefined);
    tx.commit();
  } catch {
    // Nothing more can be done in this turn; the timer and the queue go on if the page does.
  }
}

/** Drafts that were offered and not decided on are set aside before another, or a commit, takes their place. */
export async function clearDrafts(
  drafts: ReturnType<WriteTx<"drafts">["objectStore"]>,
  id: string,
  offered: readonly DraftRecord[],
  slots: readonly string[],
  committed: Job | null,
): Promise<void> {
  const now = committed === null ? null : canonicalText(committed);
  const undecided = offered.filter((draft) => canonicalText(draft.envelope.payload) !== now);
  await together([...undecided.map((draft) => () => drafts.put(keptCopy(draft))), ...slots.map((slot) => () => drafts.delete([id, slot]))]);
  if (undecided.length === 0) return;
  const kept = await drafts.getAllKeys(IDBKeyRange.bound([id, "kept "], [id, "kept \uffff"]));
  await together(kept.slice(0, Math.max(0, kept.length - MOST_KEPT)).map((key) => () => drafts.delete(key)));
}
