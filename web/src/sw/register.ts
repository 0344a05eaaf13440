// The page's side of the offline copy: what is stored, what is missing, and when to change over.
//
// Events: "progress", "ready", "update-waiting", "broken"; each also leaves its facts in `state`.
// A new version never takes over by itself: `applyUpdate` saves first, then reloads once.

export type OfflinePhase = "unsupported" | "unknown" | "storing" | "ready" | "incomplete" | "broken";

export interface OfflineState {
  phase: OfflinePhase;
  /** share of the files that are stored, 0 to 1 */
  fraction: number;
  /** one sentence, ready to show */
  text: string;
  version: string | null;
  updateWaiting: boolean;
  missing: string[];
}

export interface CheckResult {
  version: string;
  total: number;
  present: number;
  bytes: number;
  missing: string[];
  damaged: string[];
}

type Progress = { type: "progress"; purpose: string; version: string; done: number; total: number };
type Broken = { type: "broken"; purpose: string; version: string; reason: string };
export type OfflineEvent = "progress" | "ready" | "update-waiting" | "broken";

const REPLY_LIMIT_MS = 60_000;
const SAVE_LIMIT_MS = 5_000; // another tab asked for the change: this one may hold it up so long
const UPDATE_EVERY_MS = 3_600_000;
const LONGEST_WAIT_MS = 20_000;

function ask<T>(worker: ServiceWorker, message: object): Promise<T> {
  return new Promise((resolve, reject) => {
    const { port1, port2 } = new MessageChannel();
    const timer = setTimeout(() => reject(new Error("the offline store does not answer")), REPLY_LIMIT_MS);
    port1.onmessage = (event: MessageEvent<T & { error?: string }>) => {
      clearTimeout(timer);
      port1.close();
      if (event.data?.error) reject(new Error(event.data.error));
      else resolve(event.data);
    };
    worker.postMessage(message, [port2]);
  });
}

const within = (limitMs: number, work: Promise<unknown>): Promise<unknown> => Promise.race([work, new Promise((resolve) => setTimeout(resolve, limitMs))]);

export class Offline extends EventTarget {
  #state: OfflineState = { phase: "unknown", fraction: 0, text: "Looking for the offline copy", version: null, updateWaiting: false, missing: [] };
  #registration: ServiceWorkerRegistration | null = null;
  #beforeReload: () => Promise<void> = () => Promise.resolve();
  #hadController = false;
  #isReloading = false;
  #lastUpdate = 0;

  get state(): OfflineState {
    return this.#state;
  }

  on(event: OfflineEvent, listener: (state: OfflineState) => void): () => void {
    const wrapped = (): void => listener(this.#state);
    this.addEventListener(event, wrapped);
    return () => this.removeEventListener(event, wrapped);
  }

  /**
   * Begin. `after` lets the first start of the calculator have the line to itself; `beforeReload`
   * saves what is unsaved when another tab takes a new version.
   */
  async register(options: { after?: Promise<unknown>; beforeReload?: () => Promise<void>; url?: string } = {}): Promise<void> {
    if (options.beforeReload) this.#beforeReload = options.beforeReload;
    const container = typeof navigator === "undefined" ? undefined : navigator.serviceWorker;
    if (!container || new URLSearchParams(location.search).get("core") === "developer") {
      this.#set({ phase: "unsupported", text: container ? "Developer way: no offline copy" : "This browser cannot keep an offline copy here (an https address is needed)" });
      return;
    }
    this.#hadController = container.controller !== null;
    container.addEventListener("message", (event) => this.#heard(event.data as Progress | Broken));
    container.addEventListener("controllerchange", () => void this.#controllerChanged());
    if (!this.#hadController && options.after) await within(LONGEST_WAIT_MS, options.after.catch(() => undefined));
    try {
      this.#registration = await container.register(options.url ?? "sw.js", { updateViaCache: "none" });
    } catch (error) {
      // With the server gone the registration of an earlier visit still works.
      this.#registration = (await container.getRegistration().catch(() => undefined)) ?? null;
      if (!this.#registration) {
        this.#fail(`No offline copy: ${error instanceof Error ? error.message : String(error)}`);
        return;
      }
    }
    this.#lastUpdate = Date.now();
    this.#follow(this.#registration);
    document.addEventListener("visibilitychange", () => this.#lookForUpdate());
    if (this.#registration.active) await this.check().catch(() => undefined);
  }

  /** Ask the worker in charge what is stored; `deep` hashes every file again. */
  async check(isDeep = false): Promise<CheckResult> {
    const worker = this.#registration?.active;
    if (!worker) throw new Error("there is no offline copy yet");
    const found = await ask<CheckResult>(worker, { type: "check", deep: isDeep });
    this.#judge(found);
    return found;
  }

  /** Fetch again what is missing or damaged. */
  async repair(): Promise<CheckResult> {
    const worker = this.#registration?.active;
    if (!worker) throw new Error("there is no offline copy yet");
    const found = await ask<CheckResult>(worker, { type: "repair" });
    this.#judge(found);
    return found;
  }

  /** The user's tap: save, let the waiting version take over, reload once. */
  async applyUpdate(beforeReload?: () => Promise<void>): Promise<void> {
    const waiting = this.#registration?.waiting;
    if (!waiting) return;
    await (beforeReload ?? this.#beforeReload)(); // a failed save ends the change here
    this.#beforeReload = () => Promise.resolve();
    waiting.postMessage({ type: "take-over" });
  }

  #follow(registration: ServiceWorkerRegistration): void {
    const watch = (worker: ServiceWorker | null): void => {
      if (!worker) return;
      if (worker.state === "installing" && !registration.active) this.#set({ phase: "storing", text: "Storing the app on this device" });
      worker.addEventListener("statechange", () => {
        if (worker.state === "installed" && registration.active) this.#updateWaits();
        if (worker.state === "activated") void this.check().catch(() => undefined);
        if (worker.state === "redundant" && !registration.active) this.#fail("The offline copy is not complete; it is tried again at the next visit");
      });
    };
    if (registration.waiting && registration.active) this.#updateWaits();
    watch(registration.installing);
    registration.addEventListener("updatefound", () => watch(registration.installing));
  }

  #lookForUpdate(): void {
    if (document.visibilityState !== "visible" || Date.now() - this.#lastUpdate < UPDATE_EVERY_MS) return;
    this.#lastUpdate = Date.now();
    this.#registration?.update().catch(() => undefined); // no network is no fault
  }

  #updateWaits(): void {
    this.#set({ updateWaiting: true });
    this.dispatchEvent(new Event("update-waiting"));
  }

  #heard(message: Progress | Broken): void {
    if (message.type === "progress") {
      const isFirst = !this.#registration?.active;
      if (isFirst || message.purpose === "repair") {
        const share = message.total > 0 ? message.done / message.total : 0;
        this.#set({ phase: "storing", fraction: share, text: `Storing the app on this device: ${Math.floor(share * 100)} %` });
      }
      this.dispatchEvent(new Event("progress"));
    } else if (message.type === "broken") {
      // A new version that fails to install leaves the present one whole.
      if (message.purpose === "install" && this.#registration?.active) return;
      this.#fail(`The offline copy is not complete: ${message.reason}`);
    }
  }

  #judge(found: CheckResult): void {
    const lost = [...found.missing, ...found.damaged];
    if (lost.length === 0) {
      this.#set({ phase: "ready", fraction: 1, text: "Ready offline", version: found.version, missing: [] });
      this.dispatchEvent(new Event("ready"));
      return;
    }
    const what = `${lost.length} of ${found.total} files missing on this device (${lost[0]}${lost.length > 1 ? ", …" : ""})`;
    this.#set({ phase: "incomplete", fraction: found.present / found.total, text: `Not ready offline: ${what}`, version: found.version, missing: lost });
    this.dispatchEvent(new Event("broken"));
  }

  #fail(text: string): void {
    this.#set({ phase: "broken", text });
    this.dispatchEvent(new Event("broken"));
  }

  async #controllerChanged(): Promise<void> {
    if (!this.#hadController) {
      // First install: the page now has its offline copy, nothing to reload.
      this.#hadController = true;
      return;
    }
    if (this.#isReloading) return;
    this.#isReloading = true;
    await within(SAVE_LIMIT_MS, this.#beforeReload().catch(() => undefined));
    location.reload();
  }

  #set(change: Partial<OfflineState>): void {
    this.#state = { ...this.#state, ...change };
    this.dispatchEvent(new Event("state"));
  }
}

export const offline = new Offline();
