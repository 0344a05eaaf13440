// The door of the store. See types.ts for what goes through it.

import { writeBackup, readBackup } from "./backup";
import { Database, isQuotaFault } from "./db";
import { jsonCopy } from "./envelope";
import { askPersistence, gatherFacts } from "./facts";
import { DATABASE_VERSION, MIGRATIONS, RECORD_SCHEMA } from "./migrations";
import { bringBack, Mirror } from "./mirror";
import * as photos from "./photos";
import { mendPointers, readJob, setAside, type Rules } from "./reading";
import { Session, toStoreError, type SessionContext, type Stamp } from "./session";
import { broughtBackText, TEXT } from "./texts";
import {
  StoreError,
  type Clash,
  type ClashChoice,
  type HistoryState,
  type Job,
  type JobSummary,
  type OpenResult,
  type PhotoOptions,
  type PhotoRef,
  type Pointer,
  type QuarantineInfo,
  type RestoreResult,
  type RevisionInfo,
  type SaveState,
  type StoreFacts,
  type StoreOptions,
} from "./types";
import * as shelf from "./shelf";
import { Channel, WriterLocks, type Message } from "./writer";

export type * from "./types";
export { StoreError } from "./types";
export { newId } from "./envelope";
export { ageText, bytesText, clockText } from "./texts";
export { RECORD_SCHEMA } from "./migrations";

const DEFAULT_NAME = "beadwright";

export interface StoreEvents {
  /** The state of one job's saving has changed. */
  "save-state": { id: string; state: SaveState };
  /** The list of jobs, or a job in it, has changed; `isOther` when another window did it. */
  jobs: { id: string | null; rev: number | null; isOther: boolean };
  /** This window has begun or ceased to be the writer of a job. */
  writer: { id: string; isWriter: boolean; text: string };
  facts: Record<string, never>;
  /** Something that the user should be told once. */
  notice: { id: string | null; text: string };
}

export class Store extends EventTarget {
  readonly #options: StoreOptions;
  readonly #rules: Rules;
  readonly #db: Database;
  readonly #channel: Channel;
  readonly #locks: WriterLocks;
  readonly #mirror: Mirror;
  readonly #sessions = new Map<string, Session>();
  #core: string;
  #tables: string[];
  #stopped: string | null = null;
  #hasListener = false;
  readonly #untold: StoreEvents["notice"][] = [];
  /** Why the kept jobs could not be reached when the page started, ready to show, or null. */
  startProblem: string | null = null;

  private constructor(options: StoreOptions) {
    super();
    this.#options = options;
    this.#core = options.core ?? "";
    this.#tables = options.tables ?? [];
    this.#rules = {
      schema: options.schema ?? RECORD_SCHEMA,
      migrations: options.migrations ?? MIGRATIONS,
      validate: options.validate ?? null,
    };
    const name = options.name ?? DEFAULT_NAME;
    this.#db = new Database(name, options.databaseVersion ?? DATABASE_VERSION, {
      onVersionChange: () => {
        // The newer app has changed nothing yet: last words are still welcome.
        this.#hurry();
        this.#stop(TEXT.newerApp);
      },
      onBlocked: () => {
        this.startProblem = TEXT.blocked;
        this.#emit("notice", { id: null, text: TEXT.blocked });
      },
    });
    this.#mirror = new Mirror(name);
    this.#channel = new Channel(name);
    this.#channel.listen((message) => this.#hear(message));
    this.#locks = new WriterLocks(`${name}:job:`, this.#channel);
    this.#locks.onAsked = async (id) => this.#sessions.get(id)?.flush();
    this.#locks.onLost = (id) => this.#lose(id, TEXT.takenOver);
    if (typeof document !== "undefined") {
      document.addEventListener("visibilitychange", this.#onVisibility);
      addEventListener("pagehide", this.#hurry);
      document.addEventListener("freeze", this.#hurry);
    }
  }

  /** Never rejects for want of storage: jobs can then be worked on and exported, and every save says that it failed. */
  static async open(options: StoreOptions): Promise<Store> {
    const store = new Store(options);
    try {
      await store.#db.open();
      await store.#announceSchema();
      const mended = await mendPointers(store.#db);
      if (mended.length > 0) store.#emit("jobs", { id: null, rev: null, isOther: false });
      const pointers = await shelf.pointers(store.#db);
      const bringingBack = store.#bringBack(new Set(pointers.map((pointer) => pointer.id)));
      // Only an empty list waits: there may be all the jobs to bring back.
      if (pointers.length === 0) await bringingBack;
    } catch (error) {
      const { code, message } = toStoreError(error);
      if (code === "newer-app") store.#stopped = store.startProblem = TEXT.newerApp;
      if (code === "no-storage") store.startProblem = TEXT.noStorage;
      store.startProblem ??= code === "failed" ? TEXT.unreachable : message;
      store.#emit("notice", { id: null, text: store.startProblem });
    }
    return store;
  }

  /** Versions that go into each record; the core's are known only once it runs. */
  describe(core: string, tables: string[]): void {
    this.#core = core;
    this.#tables = [...tables];
  }

  // ---- jobs ---------------------------------------------------------------------------------------------------

  async list(): Promise<JobSummary[]> {
    return (await shelf.pointers(this.#db)).filter((pointer) => pointer.removed_at === null).map((p) => this.#summary(p));
  }

  async bin(): Promise<JobSummary[]> {
    return (await shelf.pointers(this.#db)).filter((pointer) => pointer.removed_at !== null).map((p) => this.#summary(p));
  }

  async open(id: string): Promise<OpenResult> {
    const open = this.#sessions.get(id);
    if (open?.isLoaded && open.isWriter && open.hasUnsaved) {
      // Opened again while something is unsaved: what is on screen is the truth.
      return this.#result(open, null, null);
    }
    const isWriter = this.#stopped === null && (await this.#locks.tryTake(id));
    try {
      return await this.#load(id, isWriter);
    } catch (error) {
      if (isWriter && !this.#sessions.has(id)) this.#locks.release(id);
      return shelf.cannotRead(error);
    }
  }

  /** Give up the job: what is left is written, then another window may take it. */
  async close(id: string): Promise<void> {
    const session = this.#sessions.get(id);
    if (session === undefined) return;
    await session.flush();
    session.stop();
    this.#sessions.delete(id);
    this.#locks.release(id);
  }

  async create(job: Job, reason = "New job"): Promise<void> {
    const existing = await this.#db.read(["jobs"], (tx) => tx.objectStore("jobs").get(job.id)).catch(() => undefined);
    if (existing !== undefined || this.#sessions.has(job.id)) throw new StoreError("exists", "There is a job with this id already.");
    await this.#locks.tryTake(job.id);
    const session = new Session(job.id, this.#context);
    session.isWriter = true;
    this.#sessions.set(job.id, session);
    session.begin(null, jsonCopy(job), { offered: [], slots: [] }, undefined);
    if (this.#stopped !== null) session.readOnly = { code: "newer-app", reason: this.#stopped };
    await session.commit(job, reason);
  }

  /** While typing: kept as a draft a moment later. */
  change(id: string, job: Job): void {
    this.#session(id).change(job);
  }

  /** Resolves when the revision is on the disk. A rejected save stays queued, on screen, and is tried again. */
  commit(id: string, job: Job, reason = "Edit"): Promise<void> {
    const session = this.#sessions.get(id);
    if (session === undefined) return Promise.reject(new StoreError("not-open", "The job is not open yet."));
    return session.commit(job, reason);
  }

  /** All that was typed or committed is on the disk, or this rejects. Call before an update, an export, a finish. */
  async flush(): Promise<void> {
    const results = await Promise.allSettled([...this.#sessions.values()].map((session) => session.flush()));
    for (const result of results) if (result.status === "rejected") throw toStoreError(result.reason);
  }

  saveState(id: string): SaveState {
    return this.#sessions.get(id)?.state ?? { kind: "idle", savedAt: null, text: TEXT.idle };
  }

  get hasUnsaved(): boolean {
    return [...this.#sessions.values()].some((session) => session.hasUnsaved);
  }

  isWriter(id: string): boolean {
    return this.#sessions.get(id)?.isWriter ?? false;
  }

  /** Become the writer; the other window writes its last edits and reads from then on. */
  async takeOver(id: string): Promise<OpenResult> {
    if (this.#stopped !== null) throw new StoreError("newer-app", this.#stopped);
    const mine = this.#sessions.get(id);
    if (mine?.isLoaded && mine.isWriter && mine.readOnly === null) return this.#result(mine, null, null);
    await this.#locks.takeOver(id);
    const result = await this.#load(id, true);
    // Should the write fail, the other window is still refused as soon as this one has saved something.
    await this.#session(id).claim().catch(() => undefined);
    this.#emit("writer", { id, isWriter: true, text: "" });
    return result;
  }

  // ---- drafts -------------------------------------------------------------------------------------------------

  async restoreDraft(id: string): Promise<Job> {
    const session = this.#session(id);
    const [draft] = session.offered;
    if (draft === undefined) throw new StoreError("not-found", "There is no draft of this job.");
    const job = draft.envelope.payload;
    await session.commit(job, "Draft restored");
    return jsonCopy(job);
  }

  async discardDraft(id: string, keepCopy = true): Promise<void> {
    await this.#session(id).discardOffered(keepCopy);
  }

  async keptDrafts(id: string): Promise<{ slot: string; at: string; job: Job }[]> {
    return shelf.keptDrafts(this.#db, id, this.#rules);
  }

  async deleteKeptDraft(id: string, slot: string): Promise<void> {
    if (!slot.startsWith("kept ")) return;
    await this.#db.write(["drafts"], "strict", (tx) => tx.objectStore("drafts").delete([id, slot]));
  }

  // ---- undo ---------------------------------------------------------------------------------------------------

  history(id: string): HistoryState {
    return this.#session(id).historyState;
  }

  /** The state to show, or null; `saved` settles like a commit. */
  async undo(id: string): Promise<{ job: Job; label: string; saved: Promise<void> } | null> {
    return this.#session(id).move(-1);
  }

  async redo(id: string): Promise<{ job: Job; label: string; saved: Promise<void> } | null> {
    return this.#session(id).move(1);
  }

  // ---- revisions ----------------------------------------------------------------------------------------------

  async revisions(id: string): Promise<RevisionInfo[]> {
    return shelf.revisions(this.#db, id);
  }

  async openRevision(id: string, rev: number): Promise<Job> {
    return shelf.openRevision(this.#db, id, rev, this.#rules);
  }

  async pin(id: string, rev: number, isPinned = true): Promise<void> {
    await this.#changePointer(id, (pointer) => ({
      ...pointer,
      revisions: pointer.revisions.map((mark) => (mark.rev === rev ? { ...mark, pinned: isPinned } : mark)),
    }));
  }

  // ---- the bin ------------------------------------------------------------------------------------------------

  async remove(id: string): Promise<void> {
    // What cannot be saved cannot be put away either: it would be lost when the page ends.
    await this.close(id);
    if (!(await this.#locks.tryTake(id))) throw new StoreError("read-only", TEXT.otherWindow);
    try {
      await this.#changePointer(id, (pointer) => ({ ...pointer, removed_at: new Date().toISOString() }));
    } finally {
      this.#locks.release(id);
    }
  }

  async putBack(id: string): Promise<void> {
    await this.#changePointer(id, (pointer) => ({ ...pointer, removed_at: null }));
  }

  /** Deletes for good what is in the bin, photos and copies too. */
  async emptyBin(ids?: string[]): Promise<number> {
    const removed = await shelf.emptyBin(this.#db, ids);
    for (const id of removed) this.#mirror.note(id, null);
    await this.#mirror.flush();
    for (const id of removed) this.#emit("jobs", { id, rev: null, isOther: false });
    if (removed.length > 0) this.#emit("facts", {});
    return removed.length;
  }

  // ---- what could not be read, and raw export -----------------------------------------------------------------

  async quarantine(): Promise<QuarantineInfo[]> {
    return shelf.quarantined(this.#db);
  }

  async deleteQuarantined(key: string): Promise<void> {
    await this.#db.write(["quarantine"], "strict", (tx) => tx.objectStore("quarantine").delete(key));
    this.#emit("facts", {});
  }

  /** What is on screen when it is unsaved, else the newest record as it is stored, whatever wrote it. */
  async rawExport(id: string): Promise<Blob> {
    const session = this.#sessions.get(id);
    if (session?.latest && (session.hasUnsaved || session.state.kind === "failed")) {
      return new Blob([JSON.stringify(session.latest, null, 1)], { type: "application/json" });
    }
    const record = await this.#db.read(["jobs", "revisions"], async (tx) => {
      const pointer = await tx.objectStore("jobs").get(id);
      return pointer === undefined ? undefined : tx.objectStore("revisions").get([id, pointer.rev]);
    });
    if (record === undefined) throw new StoreError("not-found", "There is no such job on this tablet.");
    return new Blob([JSON.stringify(record, null, 1)], { type: "application/json" });
  }

  // ---- backup -------------------------------------------------------------------------------------------------

  /** All jobs and photos, or those of the jobs named, in one file. Tell `noteBackup` once it is out of the browser. */
  async backup(only?: string[]): Promise<Blob> {
    await this.flush().catch(() => undefined);
    const unsaved = new Map<string, Job>();
    for (const [id, session] of this.#sessions) {
      if (session.latest !== null && (session.hasUnsaved || session.state.kind === "failed")) unsaved.set(id, session.latest);
    }
    return writeBackup(this.#db, this.#stamp(), unsaved, only);
  }

  async restore(file: Blob, choose: (clash: Clash) => ClashChoice | Promise<ClashChoice>): Promise<RestoreResult> {
    if (this.#stopped !== null) throw new StoreError("newer-app", this.#stopped);
    const result = await readBackup(file, choose, {
      db: this.#db,
      rules: this.#rules,
      find: (id) => this.#findForRestore(id),
      save: (job, reason) => this.#saveRestored(job, reason),
      addRevision: (record) => shelf.addRevision(this.#db, record),
    });
    this.#emit("facts", {});
    return result;
  }

  /** A job, or with no id everything, is in a file outside the browser now. */
  async noteBackup(id?: string): Promise<void> {
    await shelf.noteBackup(this.#db, id);
    this.#emit("facts", {});
  }

  // ---- photos -------------------------------------------------------------------------------------------------

  async attachPhoto(jobId: string, file: Blob, options: PhotoOptions = {}): Promise<PhotoRef> {
    if (this.#stopped !== null) throw new StoreError("newer-app", this.#stopped);
    try {
      const ref = await photos.attach(this.#db, this.#stamp(), jobId, file, options);
      this.#emit("facts", {});
      return ref;
    } catch (error) {
      if (isQuotaFault(error)) throw new StoreError("quota", "The photo is not saved: this tablet has no space left.", error);
      throw toStoreError(error);
    }
  }

  async photos(jobId: string): Promise<PhotoRef[]> {
    return photos.list(this.#db, jobId);
  }

  async photo(ref: { id: string } | string, part: "shown" | "original" = "shown"): Promise<Blob> {
    return (await photos.read(this.#db, typeof ref === "string" ? ref : ref.id, part)).blob;
  }

  async removePhoto(ref: { id: string } | string): Promise<void> {
    await photos.remove(this.#db, [typeof ref === "string" ? ref : ref.id]);
    this.#emit("facts", {});
  }

  // ---- facts --------------------------------------------------------------------------------------------------

  async facts(): Promise<StoreFacts> {
    return gatherFacts(this.#db);
  }

  /** Ask the browser to keep the data. It may take long or never answer: do not wait for it on the way to a screen. */
  async requestPersistence(): Promise<boolean | null> {
    const answer = await askPersistence();
    this.#emit("facts", {});
    return answer;
  }

  /** For the end of a page or a test: write what is left and let everything go. */
  async dispose(): Promise<void> {
    await this.flush().catch(() => undefined);
    await this.#mirror.flush();
    for (const session of this.#sessions.values()) session.stop();
    this.#sessions.clear();
    this.#locks.releaseAll();
    this.#channel.close();
    document.removeEventListener("visibilitychange", this.#onVisibility);
    removeEventListener("pagehide", this.#hurry);
    document.removeEventListener("freeze", this.#hurry);
    this.#db.retire();
  }

  // ---- inside -------------------------------------------------------------------------------------------------

  get #context(): SessionContext {
    return {
      db: this.#db,
      window: this.#locks.window,
      stamp: () => this.#stamp(),
      onState: (session) => this.#emit("save-state", { id: session.id, state: session.state }),
      onSaved: (session, newest) => {
        this.#mirror.note(session.id, newest);
        const rev = session.pointer?.rev ?? null;
        this.#emit("jobs", { id: session.id, rev, isOther: false });
        this.#channel.send({ type: "changed", id: session.id, rev: rev ?? 0 });
      },
      onStopped: (session, code) => (code === "newer-app" ? this.#stop(TEXT.newerApp) : this.#lose(session.id, TEXT.takenOver)),
      onNotice: (id, text) => this.#emit("notice", { id, text }),
    };
  }

  #stamp(): Stamp {
    return { schema: this.#rules.schema, app: this.#options.app, core: this.#core, tables: this.#tables };
  }

  #session(id: string): Session {
    const session = this.#sessions.get(id);
    if (session === undefined) throw new StoreError("not-open", "The job is not open yet.");
    return session;
  }

  async #load(id: string, isWriter: boolean): Promise<OpenResult> {
    const reading = await readJob(this.#db, id, this.#rules).catch(async (error: unknown) => {
      if (error instanceof StoreError && error.code === "damaged" && Array.isArray(error.cause) && isWriter) {
        await setAside(this.#db, id, { faulty: error.cause, pointer: null });
        this.#emit("facts", {});
      }
      throw error;
    });
    const session = new Session(id, this.#context);
    session.isWriter = isWriter;
    session.readOnly = reading.readOnly;
    if (this.#stopped !== null) session.readOnly ??= { code: "newer-app", reason: this.#stopped };
    if (!isWriter) session.readOnly ??= { code: "other-window", reason: TEXT.otherWindow };
    session.begin(reading.pointer, reading.job, reading.drafts, reading.history);
    session.skipTo(reading.highestRev);
    const before = this.#sessions.get(id);
    // Something was typed while this load was under way: the screen is right, the load is late.
    if (before?.isLoaded && before.isWriter && before.readOnly === null && before.hasUnsaved) return this.#result(before, null, null);
    before?.stop();
    this.#sessions.set(id, session);
    if (session.readOnly === null && reading.faulty.length > 0) {
      await setAside(this.#db, id, reading);
      this.#emit("facts", {});
    }
    const [draft] = reading.drafts.offered;
    const offer = draft === undefined ? null : { job: jsonCopy(draft.envelope.payload), at: draft.envelope.saved_at };
    return this.#result(session, offer, reading.recovered);
  }

  #result(session: Session, draft: OpenResult["draft"], recovered: string | null): OpenResult {
    return {
      job: jsonCopy(session.latest!),
      rev: session.pointer?.rev ?? 0,
      savedAt: session.pointer?.saved_at ?? null,
      draft,
      recovered,
      readOnly: session.readOnly,
    };
  }

  #summary({ id, title, joints, saved_at, rev, schema }: Pointer): JobSummary {
    return { id, title, joints, savedAt: saved_at, rev, readOnly: schema > this.#rules.schema };
  }

  async #changePointer(id: string, change: (pointer: Pointer) => Pointer): Promise<void> {
    if (this.#stopped !== null) throw new StoreError("newer-app", this.#stopped);
    await shelf.changePointer(this.#db, id, change);
    this.#emit("jobs", { id, rev: null, isOther: false });
    this.#channel.send({ type: "changed", id, rev: 0 });
  }

  async #findForRestore(id: string): Promise<{ job: Job; rev: number; savedAt: string } | null> {
    const pointer = await this.#db.read(["jobs"], (tx) => tx.objectStore("jobs").get(id));
    if (pointer === undefined) return null;
    const session = this.#sessions.get(id);
    const job = session?.latest ?? (await readJob(this.#db, id, { ...this.#rules, validate: null })).job;
    return { job, rev: pointer.rev, savedAt: pointer.saved_at };
  }

  async #saveRestored(job: Job, reason: string): Promise<void> {
    const wasOpen = this.#sessions.has(job.id);
    const pointer = await this.#db.read(["jobs"], (tx) => tx.objectStore("jobs").get(job.id));
    if (pointer === undefined) {
      await this.create(job, reason);
    } else {
      if (!wasOpen) await this.open(job.id);
      const session = this.#session(job.id);
      if (session.readOnly !== null) {
        if (!wasOpen) await this.close(job.id);
        throw new StoreError("read-only", session.readOnly.reason);
      }
      await this.pin(job.id, pointer.rev);
      await session.commit(job, reason);
    }
    if (!wasOpen) await this.close(job.id);
  }

  /** A job that is in the second copy and not in the database has been lost by the browser. */
  async #bringBack(known: ReadonlySet<string>): Promise<void> {
    if (this.#stopped !== null) return;
    try {
      const back = await bringBack(this.#db, await this.#mirror.readOthers(known), this.#rules.schema);
      if (back.length === 0) return;
      this.#emit("notice", { id: null, text: broughtBackText(back.length) });
      this.#emit("jobs", { id: null, rev: null, isOther: false });
    } catch {
      // The copies stay where they are; the next start tries again.
    }
  }

  /** Tell older windows, now and whenever they write, which layout the records have from here on. */
  async #announceSchema(): Promise<void> {
    const { schema } = this.#rules;
    const stored = await this.#db.read(["meta"], (tx) => tx.objectStore("meta").get("schema"));
    const known = typeof stored?.value === "number" ? stored.value : null;
    if (known !== null && known > schema) {
      this.#stopped = TEXT.newerApp;
      return;
    }
    if (known === null || known === schema) return;
    await this.#db.write(["meta"], "strict", (tx) => tx.objectStore("meta").put({ key: "schema", value: schema }));
    this.#channel.send({ type: "schema", schema });
  }

  /** A newer app owns the data: nothing more is written from this window. */
  #stop(text: string): void {
    if (this.#stopped !== null) return;
    this.#stopped = text;
    for (const session of this.#sessions.values()) void session.demote({ code: "newer-app", reason: text }, false);
    this.#locks.releaseAll();
    this.#emit("notice", { id: null, text });
  }

  #lose(id: string, text: string): void {
    const session = this.#sessions.get(id);
    this.#locks.release(id);
    if (session === undefined || session.readOnly !== null) return;
    void session.demote({ code: "other-window", reason: text }, true);
    this.#emit("writer", { id, isWriter: false, text });
  }

  #hear(message: Message): void {
    if (message.type === "schema" && message.schema > this.#rules.schema) this.#stop(TEXT.newerApp);
    if (message.type === "changed") this.#emit("jobs", { id: message.id, rev: message.rev, isOther: true });
  }

  readonly #hurry = (): void => {
    for (const session of this.#sessions.values()) session.hurry();
    void this.#mirror.flush();
  };

  readonly #onVisibility = (): void => {
    // Hidden: the tab may be killed without another word. Visible again: failed saves get another try.
    this.#hurry();
  };

  /** What there is to tell from the start is told to the first who listens. */
  override addEventListener(...args: Parameters<EventTarget["addEventListener"]>): void {
    super.addEventListener(...args);
    if (args[0] !== "notice" || this.#hasListener) return;
    this.#hasListener = true;
    queueMicrotask(() => {
      for (const detail of this.#untold.splice(0)) this.#emit("notice", detail);
    });
  }

  #emit<K extends keyof StoreEvents>(type: K, detail: StoreEvents[K]): void {
    if (type === "notice" && !this.#hasListener) {
      this.#untold.push(detail as StoreEvents["notice"]);
      return;
    }
    this.dispatchEvent(new CustomEvent(type, { detail }));
  }
}
