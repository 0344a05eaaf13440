// The page's side of the core: one worker, one call in it at a time, the newest wins.
//
// A call that runs past its limit, or a worker that dies, costs one restart and one repeat; after
// that the caller gets a CoreFault and the input on the page is untouched.

import { type Answer, type FromWorker, type StartWay, type ToWorker, packParams, unpackResult } from "./protocol.ts";

declare const __WORKER_URL__: string | undefined;
declare const __DEVELOPER__: boolean | undefined;

export type CorePhase = "waiting" | "loading" | "ready" | "failed";

export interface CoreStatus {
  phase: CorePhase;
  way: StartWay | null;
  fraction: number;
  text: string;
  coreVersion?: string;
  pythonVersion?: string;
  /** milliseconds from the worker's birth to Python ready */
  startMs?: number;
  numpy: "absent" | "loading" | "ready" | "failed";
  restarts: number;
  /** why the fast start was not used, where it was tried */
  refused?: string;
}

export interface CoreOptions {
  workerUrl?: string;
  timeLimitMs?: number;
  /** how to start; without it the address may say so (?core=precompiled), else the worker chooses */
  way?: StartWay | null;
  startSilenceMs?: number;
}

export interface CallOptions {
  key?: string;
  timeLimitMs?: number;
}

/** A newer call under the same key took this one's place. */
export class Superseded extends Error {
  override name = "Superseded";
}

/** The core could not answer. `code` is a short reference that can be read out in a report. */
export class CoreFault extends Error {
  override name = "CoreFault";
  readonly code: string;
  readonly trace: string | undefined;
  constructor(code: string, message: string, trace?: string) {
    super(message);
    this.code = code;
    this.trace = trace;
  }
}

const CALL_LIMIT_MS = 15_000;
const START_SILENCE_MS = 60_000; // longest time that a starting worker may say nothing
const MOST_TRIES = 2;

interface Call {
  id: number;
  method: string;
  paramsText: string;
  key: string | undefined;
  limitMs: number;
  tries: number;
  settled: boolean;
  resolve: (value: unknown) => void;
  reject: (reason: Error) => void;
}

const WAYS: readonly StartWay[] = ["snapshot", "precompiled", "developer"];

function wayOfAddress(): StartWay | null {
  const asked = new URLSearchParams(location.search).get("core") as StartWay | null;
  if (asked === null || !WAYS.includes(asked)) return null;
  const isDeveloper = typeof __DEVELOPER__ !== "undefined" && __DEVELOPER__;
  return asked === "developer" && !isDeveloper ? null : asked;
}

export class CoreClient extends EventTarget {
  readonly #workerUrl: string;
  readonly #limitMs: number;
  readonly #silenceMs: number;
  #way: StartWay | null;
  #status: CoreStatus = { phase: "waiting", way: null, fraction: 0, text: "The calculator has not started yet", numpy: "absent", restarts: 0 };
  #worker: Worker | null = null;
  #queue: Call[] = [];
  #running: Call | null = null;
  #timer: ReturnType<typeof setTimeout> | undefined;
  #nextId = 1;
  #failedStarts = 0;

  constructor(options: CoreOptions = {}) {
    super();
    this.#workerUrl = options.workerUrl ?? (typeof __WORKER_URL__ === "undefined" ? "core.js" : __WORKER_URL__);
    this.#limitMs = options.timeLimitMs ?? CALL_LIMIT_MS;
    this.#silenceMs = options.startSilenceMs ?? START_SILENCE_MS;
    this.#way = options.way ?? wayOfAddress();
  }

  get status(): CoreStatus {
    return this.#status;
  }

  /** Begin, or begin again after a failure. Calls made earlier wait for it. */
  start(): void {
    if (this.#worker) return;
    this.#failedStarts = 0;
    this.#launch();
  }

  call<T>(method: string, params: unknown[], options: CallOptions = {}): Promise<T> {
    if (this.#status.phase === "failed") return Promise.reject(new CoreFault("CORE-DOWN", this.#status.text));
    const { key } = options;
    return new Promise<T>((resolve, reject) => {
      if (key !== undefined) this.#supersede(key);
      this.#queue.push({
        id: this.#nextId++,
        method,
        paramsText: packParams(params),
        key,
        limitMs: options.timeLimitMs ?? this.#limitMs,
        tries: 0,
        settled: false,
        resolve: resolve as (value: unknown) => void,
        reject,
      });
      this.#pump();
    });
  }

  /** Stop the worker for good, as when the page goes away. */
  stop(): void {
    this.#drop();
    this.#rejectAll(new CoreFault("CORE-STOPPED", "The calculator was stopped"));
    this.#set({ phase: "waiting", way: null, fraction: 0, text: "The calculator is stopped", numpy: "absent" });
  }

  // ---- life of the worker ----------------------------------------------------------------

  #launch(): void {
    this.#set({ phase: "loading", fraction: 0, text: this.#status.restarts > 0 ? "Restarting the calculator" : "Starting the calculator", numpy: "absent" });
    let worker: Worker;
    try {
      worker = new Worker(new URL(this.#workerUrl, document.baseURI), { type: "module", name: "beadwright-core" });
    } catch (error) {
      this.#startFailed("CORE-WORKER", `This browser cannot start the calculator: ${String(error)}`);
      return;
    }
    this.#worker = worker;
    worker.onmessage = (event: MessageEvent<FromWorker>) => {
      if (this.#worker === worker) this.#heard(event.data);
    };
    worker.onerror = (event) => {
      event.preventDefault();
      if (this.#worker === worker) this.#died(event.message || "its program file did not load");
    };
    worker.onmessageerror = () => {
      if (this.#worker === worker) this.#died("a message could not be read");
    };
    this.#send({
      type: "start",
      way: this.#way,
      baseUrl: document.baseURI,
      zone: Intl.DateTimeFormat().resolvedOptions().timeZone ?? "UTC",
      language: document.documentElement.lang || navigator.language || "en",
    });
    this.#watch(this.#silenceMs, () => this.#died("it said nothing for too long"));
  }

  #heard(message: FromWorker): void {
    switch (message.type) {
      case "progress":
        this.#watch(this.#silenceMs, () => this.#died("it said nothing for too long"));
        this.#set({ way: message.way, fraction: message.fraction, text: message.text });
        return;
      case "ready":
        this.#watch(0);
        this.#failedStarts = 0;
        this.#set({ phase: "ready", way: message.way, fraction: 1, text: "The calculator is ready", coreVersion: message.core, pythonVersion: message.python, startMs: message.startMs });
        this.#pump();
        return;
      case "refused":
        // A fresh worker, since a half-restored memory must not be built upon.
        this.#drop();
        this.#way = "precompiled";
        this.#status = { ...this.#status, refused: message.reason };
        this.#launch();
        return;
      case "failed":
        this.#drop();
        this.#startFailed(message.code, message.reason);
        return;
      case "numpy":
        this.#set({ numpy: message.state });
        return;
      case "answer":
        this.#answered(message.id, message.text);
        return;
      case "fatal":
        this.#died(message.reason);
        return;
    }
  }

  #died(reason: string): void {
    const wasReady = this.#status.phase === "ready";
    const call = this.#running;
    this.#drop();
    if (!wasReady && ++this.#failedStarts >= MOST_TRIES) {
      this.#startFailed("CORE-START", `The calculator does not start: ${reason}`);
      return;
    }
    if (call && !call.settled) {
      if (call.tries < MOST_TRIES) this.#queue.unshift(call);
      else this.#settle(call, new CoreFault("CORE-LOST", `The calculator stopped twice at this question: ${reason}`));
    }
    // Whatever went wrong, the second start takes the way with the fewest tricks.
    if (this.#way !== "developer") this.#way = "precompiled";
    this.#set({ restarts: this.#status.restarts + 1 });
    this.#launch();
  }

  #startFailed(code: string, reason: string): void {
    this.#set({ phase: "failed", fraction: 0, text: reason, numpy: "absent" });
    this.#rejectAll(new CoreFault(code, reason));
  }

  #drop(): void {
    this.#watch(0);
    this.#worker?.terminate();
    this.#worker = null;
    this.#running = null;
  }

  #send(message: ToWorker): void {
    this.#worker?.postMessage(message);
  }

  #watch(limitMs: number, late: () => void = () => undefined): void {
    clearTimeout(this.#timer);
    this.#timer = limitMs > 0 ? setTimeout(late, limitMs) : undefined;
  }

  // ---- calls -----------------------------------------------------------------------------

  #supersede(key: string): void {
    const older = this.#queue.filter((call) => call.key === key);
    this.#queue = this.#queue.filter((call) => call.key !== key);
    if (this.#running?.key === key) older.push(this.#running); // its answer will be thrown away
    for (const call of older) this.#settle(call, new Superseded(`a newer '${key}' was asked`));
  }

  #pump(): void {
    if (this.#status.phase !== "ready" || this.#running || !this.#worker) return;
    const call = this.#queue.shift();
    if (!call) return;
    this.#running = call;
    call.tries += 1;
    this.#send({ type: "call", id: call.id, method: call.method, paramsText: call.paramsText });
    this.#watch(call.limitMs, () => this.#died("the answer took too long"));
  }

  #answered(id: number, text: string): void {
    const call = this.#running;
    if (!call || call.id !== id) return;
    let answer: Answer;
    try {
      answer = JSON.parse(text) as Answer;
    } catch {
      this.#died("an answer could not be read");
      return;
    }
    if (!answer.ok && answer.error.fatal) {
      this.#died(answer.error.message || answer.error.kind);
      return;
    }
    this.#watch(0);
    this.#running = null;
    if (!call.settled) {
      if (answer.ok) this.#settle(call, null, unpackResult(answer.result));
      else this.#settle(call, new CoreFault(answer.error.code, `${answer.error.kind}: ${answer.error.message}`, answer.error.trace));
    }
    this.#pump();
  }

  #settle(call: Call, error: Error | null, value?: unknown): void {
    if (call.settled) return;
    call.settled = true;
    if (error) call.reject(error);
    else call.resolve(value);
  }

  #rejectAll(error: Error): void {
    const calls = this.#running ? [this.#running, ...this.#queue] : this.#queue;
    this.#queue = [];
    this.#running = null;
    for (const call of calls) this.#settle(call, error);
  }

  #set(change: Partial<CoreStatus>): void {
    this.#status = { ...this.#status, ...change };
    this.dispatchEvent(new Event("status"));
  }
}
