// A second copy of the newest state of each job, in another store of the browser (Cache Storage). Chromium drops a
// whole database when it finds it damaged after a crash ("checksum mismatch" in its log; seen by the kill harness about
// once in 150 kills), and says so to nobody. The copy is written just after a save, never in its way: it is a net, not
// the promise. Photos are not in it.

import type { Database } from "./db";
import { findFault, jsonCopy } from "./envelope";
import { findRefusal } from "./limits";
import { summaryOf } from "./session";
import type { Envelope, Job, Pointer } from "./types";

/** The first save after a rest is copied at once, those that follow quickly together. */
const REST_MS = 150;
const ANSWER_LIMIT_MS = 2_000;

export class Mirror {
  readonly #name: string;
  readonly #waiting = new Map<string, Envelope<Job> | null>();
  #timer: ReturnType<typeof setTimeout> | undefined;
  #writing: Promise<void> = Promise.resolve();

  constructor(name: string) {
    this.#name = `${name}-second-copy`;
  }

  /** Keep this state of the job, or with null none any more. The newest wins. */
  note(id: string, envelope: Envelope<Job> | null): void {
    this.#waiting.set(id, envelope);
    if (this.#timer !== undefined) return;
    void this.#writeWaiting();
    this.#timer = setTimeout(() => {
      this.#timer = undefined;
      void this.#writeWaiting();
    }, REST_MS);
  }

  async flush(): Promise<void> {
    clearTimeout(this.#timer);
    this.#timer = undefined;
    await this.#writeWaiting();
  }

  async #writeWaiting(): Promise<void> {
    const batch = [...this.#waiting];
    this.#waiting.clear();
    if (batch.length > 0) this.#writing = this.#writing.then(() => this.#write(batch)).catch(() => undefined);
    await this.#writing;
  }

  async #write(batch: [string, Envelope<Job> | null][]): Promise<void> {
    const cache = await this.#open();
    if (cache === null) return;
    for (const [id, envelope] of batch) {
      const address = this.#address(id);
      // Without room, or with a browser that refuses, there is just no net.
      if (envelope === null) await cache.delete(address).catch(() => undefined);
      else await cache.put(address, Response.json(envelope)).catch(() => undefined);
    }
  }

  /** The copies of jobs that are not among these ids. */
  async readOthers(known: ReadonlySet<string>): Promise<Envelope<Job>[]> {
    const reading = this.#read(known).catch(() => []);
    let timer: ReturnType<typeof setTimeout> | undefined;
    const late = new Promise<Envelope<Job>[]>((resolve) => {
      timer = setTimeout(() => resolve([]), ANSWER_LIMIT_MS);
    });
    return Promise.race([reading, late]).finally(() => clearTimeout(timer));
  }

  async #read(known: ReadonlySet<string>): Promise<Envelope<Job>[]> {
    const cache = await this.#open();
    if (cache === null) return [];
    const found: Envelope<Job>[] = [];
    for (const request of await cache.keys()) {
      const id = decodeURIComponent(new URL(request.url).pathname.split("/").pop() ?? "");
      if (known.has(id)) continue;
      const record = (await (await cache.match(request))?.json().catch(() => null)) as Envelope<Job> | null;
      if (findFault(record) === null && findRefusal(record) === null && record!.id === id) found.push(record!);
    }
    return found;
  }

  async #open(): Promise<Cache | null> {
    if (typeof caches === "undefined") return null;
    return caches.open(this.#name).catch(() => null);
  }

  /** Never fetched: only a name that Cache Storage accepts. */
  #address(id: string): string {
    return new URL(`/second-copy/${encodeURIComponent(id)}`, location.origin).href;
  }
}

/** Put lost jobs back as they were last seen. Those that are there meanwhile stay untouched. */
export async function bringBack(db: Database, records: Envelope<Job>[], schema: number): Promise<string[]> {
  const fit = records.filter((record) => record.schema <= schema);
  if (fit.length === 0) return [];
  return db.write(["jobs", "revisions"], "strict", async (tx) => {
    const back: string[] = [];
    for (const record of fit) {
      if ((await tx.objectStore("jobs").get(record.id)) !== undefined) continue;
      const { id, rev, sha256, saved_at, payload } = record;
      const size = JSON.stringify(payload).length;
      const mark = { rev, saved_at, reason: "From the second copy", size, pinned: false, exported: false };
      const pointer: Pointer = {
        id, rev, sha256, schema: record.schema, ...summaryOf(jsonCopy(payload)), saved_at, removed_at: null, backup: null, revisions: [mark],
      };
      await tx.objectStore("revisions").put(record);
      await tx.objectStore("jobs").put(pointer);
      back.push(id);
    }
    return back;
  });
}
