// The database handle. A tablet browser closes connections behind the page's back: a handle that fails is dropped,
// opened again once and the work is done once more; after that the caller hears about it.

import { openDB, type DBSchema, type IDBPDatabase, type IDBPTransaction, type StoreNames } from "idb";
import type { DraftRecord, Envelope, Job, PhotoRecord, Pointer, QuarantineRecord } from "./types";
import { StoreError } from "./types";

/** The browser may never answer: no one waits longer than this. */
const OPEN_LIMIT_MS = 8_000;
const OPEN_AGAIN_MS = 400;
const WORK_LIMIT_MS = 20_000;

export interface Schema extends DBSchema {
  jobs: { key: string; value: Pointer };
  revisions: { key: [string, number]; value: Envelope<Job> };
  drafts: { key: [string, string]; value: DraftRecord };
  quarantine: { key: string; value: QuarantineRecord };
  photos: { key: [string, string]; value: PhotoRecord; indexes: { job: string } };
  meta: { key: string; value: { key: string; value: unknown } };
}

export type Name = StoreNames<Schema>;
export type Handle = IDBPDatabase<Schema>;
export type WriteTx<N extends Name> = IDBPTransaction<Schema, N[], "readwrite">;
export type ReadTx<N extends Name> = IDBPTransaction<Schema, N[], "readonly">;

export interface DatabaseEvents {
  /** A newer app wants to change the layout: write what is left, the handle closes afterwards. */
  onVersionChange: () => void;
  /** Older windows keep this one from opening. */
  onBlocked: () => void;
}

export class Database {
  readonly #name: string;
  readonly #version: number;
  readonly #events: DatabaseEvents;
  #handle: Handle | null = null;
  #opening: Promise<Handle> | null = null;
  #isRetired = false;

  constructor(name: string, version: number, events: DatabaseEvents) {
    this.#name = name;
    this.#version = version;
    this.#events = events;
  }

  /** The open handle, for work that cannot wait for a promise. */
  get handle(): Handle | null {
    return this.#handle;
  }

  async open(): Promise<Handle> {
    if (this.#isRetired) throw new StoreError("newer-app", "The database belongs to a newer version of the app.");
    if (this.#handle !== null) return this.#handle;
    this.#opening ??= this.#openTwice().finally(() => {
      this.#opening = null;
    });
    return this.#opening;
  }

  async #openTwice(): Promise<Handle> {
    try {
      return await this.#openOnce();
    } catch (error) {
      // After a crash the files may still be held for a moment by what is left of the old process.
      if (!isConnectionFault(error) || nameOf(error) === "TimeoutError") throw error;
      await new Promise((resolve) => setTimeout(resolve, OPEN_AGAIN_MS));
      return this.#openOnce();
    }
  }

  async #openOnce(): Promise<Handle> {
    if (typeof indexedDB === "undefined") throw new StoreError("no-storage", "This browser has no IndexedDB.");
    let isLate = false;
    const opening = openDB<Schema>(this.#name, this.#version, {
      upgrade: createStores,
      blocked: () => this.#events.onBlocked(),
      blocking: () => {
        // Transactions begun here still finish: close() waits for them.
        this.#events.onVersionChange();
        this.retire();
      },
      terminated: () => this.drop(),
    });
    void opening.then((late) => { if (isLate) late.close(); }, () => undefined);
    try {
      this.#handle = await withLimit(opening, OPEN_LIMIT_MS, "The browser did not open its storage in time.");
      return this.#handle;
    } catch (error) {
      isLate = true;
      if (nameOf(error) === "VersionError") {
        this.#isRetired = true;
        throw new StoreError("newer-app", "The database belongs to a newer version of the app.", error);
      }
      throw error;
    }
  }

  /** Forget the handle; the next use opens a new one. */
  drop(): void {
    const handle = this.#handle;
    this.#handle = null;
    try {
      handle?.close();
    } catch {
      // A broken connection may refuse even this; it is gone either way.
    }
  }

  /** Close for good: a newer app owns the data now, or the page is done. */
  retire(): void {
    this.#isRetired = true;
    this.drop();
  }

  async read<N extends Name, T>(names: N[], work: (tx: ReadTx<N>) => Promise<T>): Promise<T> {
    return this.#twice(async (handle) => {
      const tx = handle.transaction(names, "readonly");
      const [result] = await Promise.all([work(tx), tx.done]);
      return result;
    });
  }

  /** Resolves when the transaction is complete, which with `strict` means that it is on the disk. */
  async write<N extends Name, T>(
    names: N[],
    durability: "strict" | "relaxed",
    work: (tx: WriteTx<N>) => Promise<T>,
  ): Promise<T> {
    return this.#twice((handle) => writeOn(handle, names, durability, work));
  }

  async #twice<T>(work: (handle: Handle) => Promise<T>): Promise<T> {
    try {
      return await this.#once(work);
    } catch (error) {
      if (!isConnectionFault(error) || this.#isRetired) throw error;
      this.drop();
      return this.#once(work);
    }
  }

  async #once<T>(work: (handle: Handle) => Promise<T>): Promise<T> {
    // Without a handle at hand the work starts later, with one it starts in this very turn of the event loop.
    const handle = this.#handle ?? (await this.open());
    return withLimit(work(handle), WORK_LIMIT_MS, "The browser's storage did not answer in time.");
  }
}

export async function writeOn<N extends Name, T>(
  handle: Handle,
  names: N[],
  durability: "strict" | "relaxed",
  work: (tx: WriteTx<N>) => Promise<T>,
): Promise<T> {
  const tx = handle.transaction(names, "readwrite", { durability });
  // `done` is watched from the start: an abort must not become an unhandled rejection while the work waits.
  const done = tx.done.then(
    () => null,
    (error: unknown) => ({ error }),
  );
  let result: T;
  try {
    result = await work(tx);
  } catch (error) {
    try {
      tx.abort();
    } catch {
      // Already over.
    }
    const failed = await done;
    // When the browser ended the transaction, its reason says more than the request that was cut off.
    if (failed !== null && nameOf(error) === "AbortError" && failed.error !== null) throw failed.error;
    throw error;
  }
  const failed = await done;
  if (failed !== null) throw failed.error ?? new StoreError("failed", "The browser ended the write.");
  return result;
}

/** Begin all requests in this turn. A request that is refused on the spot must not leave the others unwatched. */
export async function together(requests: (() => unknown)[]): Promise<void> {
  await Promise.all(requests.map(async (request) => request()));
}

function createStores(db: Handle): void {
  const make = (name: Name, keyPath: string | string[]): void => {
    if (db.objectStoreNames.contains(name)) return;
    const store = db.createObjectStore(name, { keyPath });
    if (name === "photos") (store as unknown as IDBObjectStore).createIndex("job", "job");
  };
  make("jobs", "id");
  make("revisions", ["id", "rev"]);
  make("drafts", ["id", "slot"]);
  make("quarantine", "key");
  make("photos", ["id", "part"]);
  make("meta", "key");
}

export function nameOf(error: unknown): string {
  return typeof error === "object" && error !== null && "name" in error ? String((error as { name: unknown }).name) : "";
}

/** Faults of the connection, which a new one may cure, as against faults of the data or of the disk. */
export function isConnectionFault(error: unknown): boolean {
  if (error instanceof StoreError) return false;
  return ["InvalidStateError", "UnknownError", "AbortError", "TransactionInactiveError", "NotFoundError", "TimeoutError"].includes(
    nameOf(error),
  );
}

export function isQuotaFault(error: unknown): boolean {
  return nameOf(error) === "QuotaExceededError" || (error instanceof StoreError && error.code === "quota");
}

async function withLimit<T>(work: Promise<T>, limitMs: number, message: string): Promise<T> {
  let timer: ReturnType<typeof setTimeout> | undefined;
  const limit = new Promise<never>((_, reject) => {
    timer = setTimeout(() => reject(new DOMException(message, "TimeoutError")), limitMs);
  });
  try {
    return await Promise.race([work, limit]);
  } finally {
    clearTimeout(timer);
  }
}
