// One open job: what is on screen, what is saved, and the way from the one to the other.
// Commits go out in the order they came, each as a revision of its own; those that come while a write is under way
// go into the next one. Typing goes to a draft. Whatever fails stays here, on screen and in the queue.

import { isQuotaFault, nameOf, together, type Database, type WriteTx } from "./db";
import { clearDrafts, keptCopy, lastWordsSlot, writeLastWords } from "./drafts";
import { canonicalText, jsonCopy, seal } from "./envelope";
import { checkedHistory, describe, target, withMove, withStep } from "./history";
import { revisionsToDrop } from "./retention";
import { draftText, savedText, TEXT } from "./texts";
import {
  StoreError,
  type DraftRecord,
  type Envelope,
  type HistoryRecord,
  type HistoryState,
  type Job,
  type OpenResult,
  type Pointer,
  type RevisionMark,
  type SaveState,
} from "./types";

export const DRAFT_DELAY_MS = 300;
const RETRY_DELAYS_MS = [5_000, 15_000, 60_000];
/** Unsaved and recent states are held in memory too, so that undo works when the disk does not. */
const MOST_MEMORY_CHARS = 32 * 1024 ** 2;

export interface Stamp {
  schema: number;
  app: string;
  core: string;
  tables: string[];
}

export interface SessionContext {
  db: Database;
  window: string;
  stamp: () => Stamp;
  onState: (session: Session) => void;
  onSaved: (session: Session, newest: Envelope<Job>) => void;
  onStopped: (session: Session, code: "newer-app" | "other-window") => void;
  onNotice: (id: string, text: string) => void;
}

interface Waiting {
  job: Job;
  chars: number;
  reason: string;
  move: -1 | 0 | 1;
  pin: boolean;
  envelope: Envelope<Job> | null;
  settle: { resolve: () => void; reject: (error: unknown) => void } | null;
}

export class Session {
  readonly id: string;
  readonly #ctx: SessionContext;
  isLoaded = false;
  isWriter = false;
  readOnly: OpenResult["readOnly"] = null;
  pointer: Pointer | null = null;
  /** What the screen shows: the last thing committed or typed. */
  latest: Job | null = null;
  /** Drafts found at the start about which the user has not decided; the first one is offered. */
  offered: DraftRecord[] = [];
  /** Every draft there was at the start, the ones that say nothing new too. */
  #foundSlots: string[] = [];
  history: HistoryRecord = { entries: [], at: -1 };
  #nextRev = 1;
  #queue: Waiting[] = [];
  #pumping: Promise<void> | null = null;
  #typed: Job | null = null;
  #draftAt: string | null = null;
  #draftTimer: ReturnType<typeof setTimeout> | undefined;
  #retryTimer: ReturnType<typeof setTimeout> | undefined;
  #retryCount = 0;
  #failure: string | null = null;
  #isClaimed = false;
  #moving: Promise<unknown> = Promise.resolve();
  #memory = new Map<number, { job: Job; chars: number }>();
  #memoryChars = 0;

  constructor(id: string, ctx: SessionContext) {
    this.id = id;
    this.#ctx = ctx;
  }

  /** The load has ended: from here on, and not before, things may be written. */
  begin(pointer: Pointer | null, job: Job, drafts: { offered: DraftRecord[]; slots: string[] }, history: unknown): void {
    this.pointer = pointer;
    this.latest = job;
    this.offered = drafts.offered;
    this.#foundSlots = drafts.slots;
    this.#nextRev = Math.max(0, pointer?.rev ?? 0, ...(pointer?.revisions.map((r) => r.rev) ?? [])) + 1;
    this.history = checkedHistory(history);
    if (pointer !== null && this.history.entries[this.history.at]?.rev !== pointer.rev) {
      // The list ends elsewhere than the job (an older app, a repair): begin a new one here.
      this.history = withStep(this.history, { rev: pointer.rev, label: "Opened", at: pointer.saved_at });
    }
    if (pointer !== null) this.#remember(pointer.rev, job, pointer.revisions.find((mark) => mark.rev === pointer.rev)?.size ?? 0);
    this.isLoaded = true;
  }

  /** Numbers up to this one have been used, even if the records are gone. */
  skipTo(rev: number): void {
    this.#nextRev = Math.max(this.#nextRev, rev + 1);
  }

  get hasUnsaved(): boolean {
    return this.#queue.length > 0 || this.#typed !== null;
  }

  get historyState(): HistoryState {
    return describe(this.#historyWithQueue());
  }

  get state(): SaveState {
    const savedAt = this.pointer?.saved_at ?? null;
    if (this.#failure !== null) return { kind: "failed", savedAt, text: this.#failure };
    if (this.readOnly !== null) return { kind: "read-only", savedAt, text: this.readOnly.reason };
    if (this.#queue.length > 0) return { kind: "saving", savedAt, text: TEXT.saving };
    if (this.#typed !== null) {
      return { kind: "pending", savedAt, text: this.#draftAt === null ? TEXT.pending : draftText(this.#draftAt) };
    }
    if (savedAt === null) return { kind: "idle", savedAt, text: TEXT.idle };
    return { kind: "saved", savedAt, text: savedText(savedAt) };
  }

  // ---- typing -------------------------------------------------------------------------------------------------

  change(job: Job): void {
    if (!this.isLoaded) throw new StoreError("not-open", "The job is not open yet.");
    if (this.readOnly !== null) {
      this.#ctx.onState(this);
      return;
    }
    this.latest = job;
    this.#typed = job;
    this.#draftAt = null;
    clearTimeout(this.#draftTimer);
    this.#draftTimer = setTimeout(() => void this.writeDraft("relaxed").catch(() => undefined), DRAFT_DELAY_MS);
    this.#ctx.onState(this);
  }

  async writeDraft(durability: "relaxed" | "strict"): Promise<void> {
    clearTimeout(this.#draftTimer);
    const typed = this.#typed;
    if (typed === null || this.readOnly !== null) return;
    try {
      if (this.#isSaved(typed)) return await this.#dropDraft(typed, durability);
      const envelope = this.#sealDraft(typed);
      await this.#ctx.db.write(["jobs", "drafts", "meta"], durability, async (tx) => {
        await this.#guard(tx);
        await this.#clearDrafts(tx, null);
        await tx.objectStore("drafts").put({ id: this.id, slot: "now", envelope });
      });
      this.#forgetDrafts();
      this.#isClaimed = true;
      if (this.#typed === typed) this.#draftAt = envelope.saved_at;
      if (this.#queue.length === 0) this.#recover();
      this.#ctx.onState(this);
    } catch (error) {
      this.#fail(error);
      throw error;
    }
  }

  /** Typed back to what is saved: there is nothing left to offer, and the job is as saved as it was. */
  async #dropDraft(typed: Job, durability: "relaxed" | "strict"): Promise<void> {
    await this.#ctx.db.write(["jobs", "drafts", "meta"], durability, async (tx) => {
      await this.#guard(tx);
      await this.#clearDrafts(tx, typed);
      await tx.objectStore("drafts").delete([this.id, "now"]);
    });
    this.#forgetDrafts();
    this.#isClaimed = true;
    if (this.#typed === typed) this.#typed = null;
    if (this.#queue.length === 0) this.#recover();
    this.#ctx.onState(this);
  }

  #isSaved(job: Job): boolean {
    const saved = this.#queue.length === 0 && this.pointer !== null ? this.#memory.get(this.pointer.rev) : undefined;
    return saved !== undefined && canonicalText(saved.job) === canonicalText(job);
  }

  // ---- saving -------------------------------------------------------------------------------------------------

  commit(job: Job, reason: string, options: { move?: -1 | 1; pin?: boolean } = {}): Promise<void> {
    if (!this.isLoaded) return Promise.reject(new StoreError("not-open", "The job is not open yet."));
    if (this.readOnly !== null) return Promise.reject(new StoreError("read-only", this.readOnly.reason));
    if (job.id !== this.id) return Promise.reject(new StoreError("refused", "The job has another id than the one that is open."));
    let text: string;
    try {
      text = JSON.stringify(job);
    } catch (error) {
      return Promise.reject(new StoreError("refused", "The job holds something that cannot be written as JSON.", error));
    }
    const copy = JSON.parse(text) as Job;
    clearTimeout(this.#draftTimer);
    this.#typed = null;
    this.#draftAt = null;
    this.latest = copy;
    return new Promise((resolve, reject) => {
      const { move = 0, pin = false } = options;
      this.#queue.push({ job: copy, chars: text.length, reason, move, pin, envelope: null, settle: { resolve, reject } });
      void this.#pump();
      this.#ctx.onState(this);
    });
  }

  /** Undo (-1) or redo (+1): the state that is now on screen, and the promise that it is saved. */
  move(by: -1 | 1): Promise<{ job: Job; label: string; saved: Promise<void> } | null> {
    // Two quick taps are two steps: the second starts from where the first has come to.
    const moved = this.#moving.then(() => this.#moveOnce(by));
    this.#moving = moved.catch(() => undefined);
    return moved;
  }

  async #moveOnce(by: -1 | 1): Promise<{ job: Job; label: string; saved: Promise<void> } | null> {
    if (!this.isLoaded || this.readOnly !== null) return null;
    // Half-typed text becomes a step of its own, so that undo cannot lose it.
    if (this.#typed !== null) void this.commit(this.#typed, "Typing").catch(() => undefined);
    // The list is brought up to date with each write; it moves from where it stands once these are through.
    await this.#pump();
    const history = this.#historyWithQueue();
    const entry = target(history, by);
    const here = history.entries[history.at];
    if (entry === null) return null;
    const job = await this.#stateOf(entry.rev);
    if (job === null) {
      this.#ctx.onNotice(this.id, "That step is no longer kept.");
      return null;
    }
    const label = by < 0 ? (here?.label ?? "") : entry.label;
    const saved = this.commit(job, `${by < 0 ? "Undo" : "Redo"}: ${label}`, { move: by });
    saved.catch(() => undefined);
    return { job: jsonCopy(job), label, saved };
  }

  /** Say in the database that this window writes now; the one before is refused from here on. */
  async claim(): Promise<void> {
    await this.#ctx.db.write(["meta"], "strict", async (tx) => {
      await tx.objectStore("meta").put({ key: `writer/${this.id}`, value: this.#ctx.window });
    });
    this.#isClaimed = true;
  }

  /** Everything typed or committed is written, or this rejects. */
  async flush(): Promise<void> {
    clearTimeout(this.#retryTimer);
    const drafted = this.writeDraft("strict");
    drafted.catch(() => undefined);
    await this.#pump();
    await drafted;
    if (this.#failure !== null && this.hasUnsaved) throw new StoreError("failed", this.#failure);
  }

  /** The page is being hidden, perhaps for good. */
  hurry(): void {
    if (!this.isLoaded || this.readOnly !== null) return;
    if (this.#queue.length > 0 || (this.#typed !== null && this.#draftAt === null)) this.#lastWords();
    void this.#pump();
  }

  stop(): void {
    clearTimeout(this.#draftTimer);
    clearTimeout(this.#retryTimer);
  }

  /** No more writing from here. What was not saved stays on screen and, where that is safe, is kept as a copy. */
  async demote(readOnly: NonNullable<OpenResult["readOnly"]>, mayKeepCopy: boolean): Promise<void> {
    this.stop();
    // A draft that is written is safe: whoever writes next is offered it.
    const isLeft = this.#queue.length > 0 || (this.#typed !== null && this.#draftAt === null);
    const unsaved = isLeft ? this.latest : null;
    this.isWriter = false;
    this.readOnly = readOnly;
    this.#failure = null;
    for (const item of this.#queue.splice(0)) item.settle?.reject(new StoreError("read-only", readOnly.reason));
    this.#typed = null;
    if (unsaved !== null) {
      this.#failure = readOnly.code === "other-window" ? TEXT.fenced : `Not saved: ${readOnly.reason}`;
      if (mayKeepCopy) await this.#keepCopy(unsaved).catch(() => undefined);
    }
    this.#ctx.onState(this);
  }

  #pump(): Promise<void> {
    if (this.#pumping === null && this.#queue.length > 0) this.#pumping = this.#drain();
    return this.#pumping ?? Promise.resolve();
  }

  async #drain(): Promise<void> {
    clearTimeout(this.#retryTimer);
    while (this.#queue.length > 0) {
      const batch = [...this.#queue];
      try {
        const { pointer, history, isRebuilt } = await this.#write(batch);
        this.#queue.splice(0, batch.length);
        this.pointer = pointer;
        this.history = history;
        this.#nextRev = pointer.rev + 1;
        this.#forgetDrafts();
        this.#isClaimed = true;
        this.#recover();
        for (const item of batch) this.#remember(item.envelope!.rev, item.job, item.chars);
        this.#ctx.onState(this);
        this.#ctx.onSaved(this, batch[batch.length - 1]!.envelope!);
        for (const item of batch) item.settle?.resolve();
        if (isRebuilt) this.#ctx.onNotice(this.id, TEXT.dropped);
      } catch (error) {
        for (const item of batch) {
          item.settle?.reject(toStoreError(error));
          item.settle = null;
        }
        this.#fail(error);
        break;
      }
    }
    // Cleared in the same turn as the last look at the queue, so that nothing can slip in between unseen.
    this.#pumping = null;
  }

  async #write(batch: Waiting[]): Promise<{ pointer: Pointer; history: HistoryRecord; isRebuilt: boolean }> {
    // Hash and copy first: waiting for anything else inside a transaction would end it.
    const base = this.pointer;
    let parent = base?.rev ?? null;
    let history = this.history;
    const marks: RevisionMark[] = [];
    batch.forEach((item, i) => {
      const rev = this.#nextRev + i;
      if (item.envelope?.rev !== rev || item.envelope.parent !== parent) {
        const saved_at = new Date().toISOString();
        item.envelope = seal<Job>({ kind: "job", ...this.#identity(), rev, parent, saved_at, payload: item.job });
      }
      const at = item.envelope.saved_at;
      history = item.move === 0 ? withStep(history, { rev, label: item.reason, at }) : withMove(history, item.move, rev);
      marks.push({ rev, saved_at: at, reason: item.reason, size: item.chars, pinned: item.pin, exported: false });
      parent = rev;
    });
    const newest = batch[batch.length - 1]!;
    const envelope = newest.envelope!;
    const isDraftDone = this.#typed === null;
    const finalHistory = history;

    return this.#ctx.db.write(["jobs", "revisions", "drafts", "meta"], "strict", async (tx) => {
      const now = await this.#guard(tx);
      const isRebuilt = now === undefined && base !== null;
      if (now !== undefined && now.rev === envelope.rev && now.sha256 === envelope.sha256) {
        // The write before a lost connection had gone through after all.
        return { pointer: now, history: finalHistory, isRebuilt: false };
      }
      if (now !== undefined && now.rev !== base?.rev) throw new StoreError("conflict", TEXT.fenced);
      const older = (now?.revisions ?? []).map((mark) =>
        // A revision of an older layout is the untouched original: it stays.
        mark.rev === base?.rev && base.schema < envelope.schema ? { ...mark, pinned: true } : mark,
      );
      const all = [...older, ...marks];
      const held = new Set(finalHistory.entries.map((entry) => entry.rev));
      const drop = new Set(revisionsToDrop(all, envelope.saved_at, held));
      const pointer: Pointer = {
        id: this.id,
        rev: envelope.rev,
        sha256: envelope.sha256,
        schema: envelope.schema,
        ...summaryOf(newest.job),
        saved_at: envelope.saved_at,
        removed_at: null,
        backup: now?.backup ?? null,
        revisions: all.filter((mark) => !drop.has(mark.rev)),
      };
      const revisions = tx.objectStore("revisions");
      const meta = tx.objectStore("meta");
      await together([
        ...batch.filter((item) => !drop.has(item.envelope!.rev)).map((item) => () => revisions.put(item.envelope!)),
        ...[...drop].map((rev) => () => revisions.delete([this.id, rev])),
        () => tx.objectStore("jobs").put(pointer),
        () => meta.put({ key: `history/${this.id}`, value: finalHistory }),
        async () => {
          await this.#clearDrafts(tx, newest.job);
          if (isDraftDone) await tx.objectStore("drafts").delete([this.id, "now"]);
        },
      ]);
      return { pointer, history: finalHistory, isRebuilt };
    });
  }

  /** Refuse to write when a newer app or another window owns the data now. */
  async #guard(tx: WriteTx<"jobs" | "drafts" | "meta"> | WriteTx<"jobs" | "revisions" | "drafts" | "meta">): Promise<Pointer | undefined> {
    const write = tx as WriteTx<"jobs" | "drafts" | "meta">;
    const meta = write.objectStore("meta");
    const { schema } = this.#ctx.stamp();
    const [stored, writer, pointer] = await Promise.all([
      (async () => meta.get("schema"))(),
      (async () => meta.get(`writer/${this.id}`))(),
      (async () => write.objectStore("jobs").get(this.id))(),
    ]);
    if (typeof stored?.value === "number" && stored.value > schema) throw new StoreError("newer-app", TEXT.newerApp);
    if (stored === undefined) await meta.put({ key: "schema", value: schema });
    if (!this.#isClaimed) await meta.put({ key: `writer/${this.id}`, value: this.#ctx.window });
    else if (pointer !== undefined && writer?.value !== this.#ctx.window) throw new StoreError("conflict", TEXT.fenced);
    return pointer;
  }

  async #clearDrafts(tx: unknown, committed: Job | null): Promise<void> {
    const drafts = (tx as WriteTx<"drafts">).objectStore("drafts");
    await clearDrafts(drafts, this.id, this.offered, [...this.#foundSlots, lastWordsSlot(this.#ctx.window)], committed);
  }

  #forgetDrafts(): void {
    this.offered = [];
    this.#foundSlots = [];
  }

  /** The user has said no to the offered draft. */
  async discardOffered(keepCopy: boolean): Promise<void> {
    const [first, ...rest] = this.offered;
    if (first === undefined) return;
    const slots = this.#foundSlots;
    await this.#ctx.db.write(["drafts"], "strict", async (tx) => {
      const drafts = tx.objectStore("drafts");
      await together([
        ...(keepCopy ? [first, ...rest] : rest).map((draft) => () => drafts.put(keptCopy(draft))),
        ...slots.map((slot) => () => drafts.delete([this.id, slot])),
      ]);
    });
    this.#forgetDrafts();
  }

  async #keepCopy(job: Job): Promise<void> {
    const draft = keptCopy({ id: this.id, slot: "now", envelope: this.#sealDraft(job) });
    await this.#ctx.db.write(["drafts"], "strict", (tx) => tx.objectStore("drafts").put(draft));
  }

  #sealDraft(job: Job): Envelope<Job> {
    const rev = this.pointer?.rev ?? 0;
    const saved_at = new Date().toISOString();
    return seal<Job>({ kind: "draft", ...this.#identity(), rev, parent: rev, saved_at, payload: jsonCopy(job) });
  }

  #lastWords(): void {
    const { handle } = this.#ctx.db;
    if (handle !== null) writeLastWords(handle, this.#ctx.window, () => this.#sealDraft(this.latest!));
  }

  async #stateOf(rev: number): Promise<Job | null> {
    const unsaved = this.#queue[rev - this.#nextRev];
    if (unsaved !== undefined) return unsaved.job;
    const held = this.#memory.get(rev);
    if (held !== undefined) return held.job;
    const envelope = await this.#ctx.db.read(["revisions"], (tx) => tx.objectStore("revisions").get([this.id, rev]));
    return envelope === undefined ? null : envelope.payload;
  }

  /** The list as it will be once the queue is written; unsaved states get the numbers that they will have. */
  #historyWithQueue(): HistoryRecord {
    let history = this.history;
    this.#queue.forEach((item, i) => {
      const rev = this.#nextRev + i;
      const at = new Date().toISOString();
      history = item.move === 0 ? withStep(history, { rev, label: item.reason, at }) : withMove(history, item.move, rev);
    });
    return history;
  }

  #remember(rev: number, job: Job, chars: number): void {
    this.#memoryChars -= this.#memory.get(rev)?.chars ?? 0;
    this.#memory.set(rev, { job, chars });
    this.#memoryChars += chars;
    for (const [oldest, { chars: size }] of this.#memory) {
      if (this.#memoryChars <= MOST_MEMORY_CHARS || oldest >= this.#nextRev - 1) break;
      this.#memory.delete(oldest);
      this.#memoryChars -= size;
    }
  }

  #recover(): void {
    this.#failure = null;
    this.#retryCount = 0;
    clearTimeout(this.#retryTimer);
  }

  #fail(error: unknown): void {
    const code = error instanceof StoreError ? error.code : null;
    if (code === "newer-app" || code === "conflict") {
      this.#ctx.onStopped(this, code === "newer-app" ? "newer-app" : "other-window");
      return;
    }
    this.#failure = isQuotaFault(error) ? TEXT.full : code === "no-storage" ? TEXT.noStorage : TEXT.failed;
    const delay = RETRY_DELAYS_MS[Math.min(this.#retryCount++, RETRY_DELAYS_MS.length - 1)]!;
    clearTimeout(this.#retryTimer);
    this.#retryTimer = setTimeout(() => {
      void this.writeDraft("relaxed").catch(() => undefined);
      if (this.#queue.length > 0) void this.#pump();
    }, delay);
    this.#ctx.onState(this);
  }

  #identity(): Stamp & { id: string } {
    return { ...this.#ctx.stamp(), id: this.id };
  }
}

/** What a list of jobs shows. Nothing else in a job is looked at. */
export function summaryOf(job: Job): { title: string; joints: number } {
  return {
    title: typeof job.title === "string" ? job.title : "",
    joints: Array.isArray(job["joints"]) ? job["joints"].length : 0,
  };
}

export function toStoreError(error: unknown): StoreError {
  if (error instanceof StoreError) return error;
  if (isQuotaFault(error)) return new StoreError("quota", TEXT.full, error);
  return new StoreError("failed", `${TEXT.failed} (${nameOf(error) || "unknown"})`, error);
}
