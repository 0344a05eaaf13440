// One writer a job. navigator.locks decides where it exists; elsewhere the windows ask each other. In both cases a
// token in the database fences off a window that woke up late: it is checked inside every writing transaction.

import { nameOf } from "./db";
import { newId } from "./envelope";

/** How long a window is given to write its last edits before the lock is taken from it. */
const HAND_OVER_MS = 3_000;
/** How long to wait for another window to say that it writes, where there are no locks. */
const ASK_MS = 250;

export type Message =
  | { type: "schema"; schema: number }
  | { type: "changed"; id: string; rev: number }
  | { type: "release"; id: string; from: string }
  | { type: "released"; id: string; from: string }
  | { type: "who-writes"; id: string; from: string }
  | { type: "i-write"; id: string; from: string };

/** BroadcastChannel where there is one; silence where there is none. */
export class Channel {
  readonly #channel: BroadcastChannel | null;
  readonly #listeners = new Set<(message: Message) => void>();

  constructor(name: string) {
    this.#channel = typeof BroadcastChannel === "undefined" ? null : new BroadcastChannel(name);
    if (this.#channel === null) return;
    this.#channel.onmessage = (event: MessageEvent<Message>) => {
      for (const listener of [...this.#listeners]) listener(event.data);
    };
  }

  send(message: Message): void {
    try {
      this.#channel?.postMessage(message);
    } catch {
      // A closed channel only means that nobody is told.
    }
  }

  listen(listener: (message: Message) => void): () => void {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  /** Wait for a message that fits, or for the time to pass. */
  async wait(fits: (message: Message) => boolean, limitMs: number): Promise<boolean> {
    return new Promise((resolve) => {
      const timer = setTimeout(() => finish(false), limitMs);
      const stop = this.listen((message) => { if (fits(message)) finish(true); });
      const finish = (answer: boolean): void => {
        clearTimeout(timer);
        stop();
        resolve(answer);
      };
    });
  }

  close(): void {
    this.#listeners.clear();
    this.#channel?.close();
  }
}

export class WriterLocks {
  readonly window = newId();
  readonly #prefix: string;
  readonly #channel: Channel;
  readonly #held = new Map<string, () => void>();
  #areLocksRefused = false;
  /** Called when another window has taken a lock from this one. */
  onLost: (id: string) => void = () => undefined;
  /** Called when another window asks politely; resolves when the last edits are written. */
  onAsked: (id: string) => Promise<void> = () => Promise.resolve();

  constructor(prefix: string, channel: Channel) {
    this.#prefix = prefix;
    this.#channel = channel;
    channel.listen((message) => void this.#hear(message));
  }

  holds(id: string): boolean {
    return this.#held.has(id);
  }

  /** Take the lock if nobody has it. */
  async tryTake(id: string): Promise<boolean> {
    if (this.#held.has(id)) return true;
    const locks = this.#lockManager();
    if (locks !== null) {
      const isTaken = await this.#request(locks, id, { ifAvailable: true });
      if (isTaken || !this.#areLocksRefused) return isTaken;
    }
    this.#channel.send({ type: "who-writes", id, from: this.window });
    if (await this.#channel.wait((m) => m.type === "i-write" && m.id === id, ASK_MS)) return false;
    this.#held.set(id, () => undefined);
    return true;
  }

  /** Take the lock from whoever has it: ask first, then take it by force. */
  async takeOver(id: string): Promise<void> {
    if (await this.tryTake(id)) return;
    const locks = this.#lockManager();
    const handedOver = this.#channel.wait((m) => m.type === "released" && m.id === id, HAND_OVER_MS);
    this.#channel.send({ type: "release", id, from: this.window });
    await handedOver;
    if (locks === null) {
      this.#held.set(id, () => undefined);
      return;
    }
    if (await this.#request(locks, id, { ifAvailable: true })) return;
    await this.#request(locks, id, { steal: true });
  }

  release(id: string): void {
    const letGo = this.#held.get(id);
    this.#held.delete(id);
    letGo?.();
  }

  releaseAll(): void {
    for (const id of [...this.#held.keys()]) this.release(id);
  }

  #lockManager(): LockManager | null {
    if (this.#areLocksRefused || typeof navigator === "undefined") return null;
    return (navigator as Partial<Navigator>).locks ?? null;
  }

  async #request(locks: LockManager, id: string, options: LockOptions): Promise<boolean> {
    return new Promise((resolve) => {
      locks
        .request(this.#prefix + id, options, (lock) => {
          if (lock === null) {
            resolve(false);
            return undefined;
          }
          return new Promise<void>((letGo) => {
            this.#held.set(id, letGo);
            resolve(true);
          });
        })
        .catch((error: unknown) => {
          // Stolen, or the browser refuses locks here. The token in the database still guards the data.
          const had = this.#held.delete(id);
          if (!had && nameOf(error) !== "AbortError") this.#areLocksRefused = true;
          resolve(false);
          if (had) this.onLost(id);
        });
    });
  }

  async #hear(message: Message): Promise<void> {
    if (message.type === "who-writes" && this.#held.has(message.id)) {
      this.#channel.send({ type: "i-write", id: message.id, from: this.window });
    }
    if (message.type === "release" && message.from !== this.window && this.#held.has(message.id)) {
      await this.onAsked(message.id).catch(() => undefined);
      this.release(message.id);
      this.onLost(message.id);
      this.#channel.send({ type: "released", id: message.id, from: this.window });
    }
  }
}
