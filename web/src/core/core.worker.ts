// The worker that holds Python. It starts in one of three ways, answers calls one by one, and
// fetches numpy only after the first answer is out.

import type { PackageData, PyodideAPI as PyodideInterface } from "pyodide";
import type { CallMessage, FromWorker, RuntimeFacts, StartMessage, StartWay, ToWorker } from "./protocol.ts";

declare const self: DedicatedWorkerGlobalScope;
declare const __RUNTIME__: RuntimeFacts | null;
declare const __DEVELOPER__: boolean;

const SNAPSHOT_LIMIT_MS = 12_000;
const BOOT_LIMIT_MS = 50_000; // from the last byte of the download on
const STALL_LIMIT_MS = 30_000;
const NUMPY_IDLE_MS = 1_000;
const PROGRESS_EVERY_MS = 100;

type Bridge = { call(method: string, paramsText: string): string; wanted(method: string, paramsText: string): string; settle(zone: string, language: string): string };
type Loader = { loadPyodide(options: Record<string, unknown>): Promise<PyodideInterface> };

const birth = performance.now();
const say = (message: FromWorker): void => self.postMessage(message);
const megabytes = (count: number): string => (count / 1e6).toFixed(1);
const reasonOf = (error: unknown): string => (error instanceof Error ? error.message : String(error));

let pyodide: PyodideInterface | null = null;
let bridge: Bridge | null = null;
let startedBy: StartWay = "precompiled";
let baseUrl = "";
let developerNumpy = "";

/** A promise that never settles is Pyodide's answer to a damaged file: give each start a limit. */
function within<T>(limitMs: number, what: string, work: Promise<T>): Promise<T> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error(`${what} took longer than ${limitMs / 1000} s`)), limitMs);
    work.then(resolve, reject).finally(() => clearTimeout(timer));
  });
}

async function stored(url: string): Promise<Response | undefined> {
  if (typeof caches === "undefined") return undefined;
  return caches.match(new URL(url, baseUrl).href).catch(() => undefined);
}

async function areStored(urls: string[]): Promise<boolean> {
  const found = await Promise.all(urls.map(stored));
  return found.every(Boolean);
}

const hex = (bytes: ArrayBuffer): string => Array.from(new Uint8Array(bytes), (byte) => byte.toString(16).padStart(2, "0")).join("");

/** Fetches through this learn of a missing file at once, and report how far the download is. */
function watchFetches(way: StartWay, files: { url: string; bytes: number }[], isCounting: boolean): { failure: Promise<never>; restore: () => void } {
  const original = self.fetch.bind(self);
  const total = files.reduce((sum, file) => sum + file.bytes, 0);
  let got = 0;
  let lastSaid = 0;
  let stall: ReturnType<typeof setTimeout> | undefined;
  let fail: (error: Error) => void = () => undefined;
  const failure = new Promise<never>((_, reject) => (fail = reject));
  failure.catch(() => undefined);

  const tell = (): void => {
    const now = performance.now();
    if (now - lastSaid < PROGRESS_EVERY_MS && got < total) return;
    lastSaid = now;
    const done = got >= total;
    say({ type: "progress", way, fraction: Math.min(0.9, (0.9 * got) / total), text: done ? "Starting the calculator" : `Fetching the calculator: ${megabytes(got)} of ${megabytes(total)} MB` });
  };
  const rest = (): void => {
    clearTimeout(stall);
    if (isCounting && got < total) stall = setTimeout(() => fail(new Error("the download stopped")), STALL_LIMIT_MS);
  };

  self.fetch = async (input, init) => {
    const address = String(input instanceof Request ? input.url : input);
    let response: Response;
    try {
      response = await original(input, init);
    } catch (error) {
      fail(new Error(`${address.split("/").pop()} cannot be fetched`));
      throw error;
    }
    if (!response.ok) {
      fail(new Error(`${address.split("/").pop()} is missing (${response.status})`));
      throw new Error(`missing ${address}`);
    }
    if (!isCounting || !response.body) return response;
    rest();
    const counted = response.body.pipeThrough(
      new TransformStream<Uint8Array, Uint8Array>({
        transform(chunk, controller) {
          got += chunk.byteLength;
          rest();
          tell();
          controller.enqueue(chunk);
        },
      }),
    );
    return new Response(counted, { status: response.status, headers: response.headers });
  };
  if (isCounting) tell();
  return {
    failure,
    restore: () => {
      clearTimeout(stall);
      self.fetch = original;
    },
  };
}

const loader = async (facts: RuntimeFacts): Promise<Loader> => (await import(new URL(`${facts.base}pyodide.mjs`, baseUrl).href)) as Loader;

const optionsOf = (facts: RuntimeFacts): Record<string, unknown> => ({
  indexURL: new URL(facts.base, baseUrl).href,
  stdLibURL: new URL(`${facts.base}python_stdlib.zip`, baseUrl).href,
  lockFileContents: JSON.stringify(facts.lock),
  packageBaseUrl: new URL(facts.packages, baseUrl).href,
});

// ---- the three ways to start ------------------------------------------------------------------

/** The memory of a started Python, unpacked; refused unless it is the very file that was built. */
async function readSnapshot(facts: RuntimeFacts): Promise<ArrayBuffer> {
  const { snapshot } = facts;
  if (snapshot.runtimeHash !== facts.runtimeHash) throw new Error("it was made for another runtime");
  const response = (await stored(snapshot.url)) ?? (await fetch(new URL(snapshot.url, baseUrl)));
  if (!response.ok) throw new Error(`its file is missing (${response.status})`);
  const packed = await response.arrayBuffer();
  if (hex(await crypto.subtle.digest("SHA-256", packed)) !== snapshot.sha256) throw new Error("its file is damaged");
  const memory = await new Response(new Blob([packed]).stream().pipeThrough(new DecompressionStream("gzip"))).arrayBuffer();
  if (memory.byteLength !== snapshot.rawBytes) throw new Error("its file is too short");
  return memory;
}

type Module = { HEAP8: Int8Array; _malloc(bytes: number): number };
type CreateModule = (settings: unknown) => Promise<Module>;

/** A fresh module's memory is smaller than a snapshot that grew: make room before it is written over. */
async function roomyModule(facts: RuntimeFacts): Promise<CreateModule> {
  const { default: create } = (await import(new URL(`${facts.base}pyodide.asm.mjs`, baseUrl).href)) as { default: CreateModule };
  return async (settings) => {
    const made = await create(settings);
    while (made.HEAP8.length < facts.snapshot.heapBytes) if (made._malloc(1 << 20) === 0) throw new Error("no memory for the stored state");
    return made;
  };
}

async function startFromSnapshot(facts: RuntimeFacts): Promise<PyodideInterface> {
  say({ type: "progress", way: "snapshot", fraction: 0.2, text: "Starting the calculator from its stored state" });
  const memory = readSnapshot(facts);
  const watched = watchFetches("snapshot", [], false);
  const load = async (): Promise<PyodideInterface> => {
    const [{ loadPyodide }, createPyodideModule] = await Promise.all([loader(facts), roomyModule(facts)]);
    return loadPyodide({ ...optionsOf(facts), createPyodideModule, _loadSnapshot: memory });
  };
  try {
    // The memory is watched on its own: a refusal must not wait for a load that never settles.
    const refusal = memory.then(() => new Promise<never>(() => undefined));
    return await within(SNAPSHOT_LIMIT_MS, "the stored state", Promise.race([load(), watched.failure, refusal]));
  } finally {
    watched.restore();
  }
}

async function startPrecompiled(facts: RuntimeFacts): Promise<PyodideInterface> {
  const counted = facts.first.filter((file) => !file.url.endsWith(".mjs"));
  const isFirstVisit = !(await areStored(facts.first.map((file) => file.url)));
  say({ type: "progress", way: "precompiled", fraction: 0.1, text: isFirstVisit ? "Fetching the calculator" : "Starting the calculator" });
  const watched = watchFetches("precompiled", counted, isFirstVisit);
  const load = async (): Promise<PyodideInterface> => {
    const { loadPyodide } = await loader(facts);
    const loaded = await loadPyodide({ ...optionsOf(facts), packages: ["beadwright"], env: { HOME: "/home/pyodide" } });
    if (!("beadwright" in loaded.loadedPackages)) throw new Error("the core's package did not load");
    return loaded;
  };
  try {
    const race = Promise.race([load(), watched.failure]);
    // While bytes arrive only a stall ends the wait; without a download the limit is fixed.
    return isFirstVisit ? await race : await within(BOOT_LIMIT_MS, "the start", race);
  } finally {
    watched.restore();
  }
}

/** Pyodide as npm ships it and the working tree's own wheel by micropip: no build, slowest, always fresh. */
async function startForDevelopers(): Promise<PyodideInterface> {
  const at = (name: string): string => new URL(`__dev/${name}`, baseUrl).href;
  say({ type: "progress", way: "developer", fraction: 0.1, text: "Starting Python as shipped (developer way)" });
  const index = (await (await fetch(at("index.json"))).json()) as { loader: string[]; wheels: string[]; own: string; numpy: string };
  developerNumpy = at(`wheels/${index.numpy}`);
  const { loadPyodide } = (await import(at("pyodide/pyodide.mjs"))) as Loader;
  const loaded = await loadPyodide({ indexURL: at("pyodide/") });
  say({ type: "progress", way: "developer", fraction: 0.6, text: "Installing the working tree's wheel with micropip" });
  await loadOrThrow(loaded, index.loader.map((name) => at(`wheels/${name}`)));
  const micropip = loaded.pyimport("micropip");
  const options = { deps: false } as const;
  await micropip.install.callKwargs(loaded.toPy([...index.wheels, index.own].map((name) => at(`wheels/${name}`))), options);
  return loaded;
}

async function loadOrThrow(loaded: PyodideInterface, names: string[]): Promise<PackageData[]> {
  const errors: string[] = []; // loadPackage itself only logs them
  const done = await loaded.loadPackage(names, { errorCallback: (text) => errors.push(text), messageCallback: () => undefined });
  if (errors.length > 0) throw new Error(errors.join("; "));
  return done;
}

async function chosenWay(asked: StartWay | null): Promise<StartWay> {
  if (asked !== null) return asked;
  if (!__RUNTIME__) return __DEVELOPER__ ? "developer" : "precompiled";
  // The snapshot is used once it is on this device; a first visit starts with fewer bytes.
  return (await areStored([__RUNTIME__.snapshot.url])) ? "snapshot" : "precompiled";
}

async function start(message: StartMessage): Promise<void> {
  baseUrl = message.baseUrl;
  startedBy = await chosenWay(message.way);
  const facts = __RUNTIME__;
  try {
    if (startedBy === "developer") pyodide = await startForDevelopers();
    else if (!facts) throw new Error("this build holds no Python");
    else pyodide = startedBy === "snapshot" ? await startFromSnapshot(facts) : await startPrecompiled(facts);
    bridge = pyodide.pyimport("beadwright_bridge") as Bridge;
    const said = JSON.parse(bridge.settle(message.zone, message.language)) as { core: string; python: string };
    if (startedBy === "snapshot" && facts && said.core !== facts.coreVersion) throw new Error("it holds another version of the core");
    say({ type: "ready", way: startedBy, ...said, startMs: Math.round(performance.now() - birth) });
  } catch (error) {
    pyodide = null;
    bridge = null;
    if (startedBy === "snapshot") say({ type: "refused", reason: reasonOf(error) });
    else say({ type: "failed", code: "CORE-START", reason: `The calculator does not start: ${reasonOf(error)}` });
  }
}

// ---- calls ------------------------------------------------------------------------------------

async function answer({ id, method, paramsText }: CallMessage): Promise<void> {
  if (!bridge) {
    say({ type: "fatal", id, reason: "Python is not there" });
    return;
  }
  let text: string;
  try {
    const late = bridge.wanted(method, paramsText);
    // Without them the core says itself, in words for people, what it lacks.
    if (late !== "") await loadLate(late.split(" ")).catch(() => undefined);
    text = bridge.call(method, paramsText);
  } catch (error) {
    // The bridge catches all that Python raises: what comes here is the interpreter breaking down.
    say({ type: "fatal", id, reason: reasonOf(error).slice(0, 500) });
    return;
  }
  say({ type: "answer", id, text });
  scheduleNumpy();
}

/** Packages from the stored files, once Python runs. */
async function loadLate(names: string[]): Promise<void> {
  // After a restore the packages' files are missing from the file system: bring them too.
  if (pyodide) await loadOrThrow(pyodide, startedBy === "snapshot" ? ["beadwright", ...names] : names);
}

let numpyState: "absent" | "loading" | "done" = "absent";
let numpyTimer: ReturnType<typeof setTimeout> | undefined;

/** numpy comes in a quiet moment after the first answer; each further call puts it off. */
function scheduleNumpy(): void {
  if (numpyState !== "absent") return;
  clearTimeout(numpyTimer);
  numpyTimer = setTimeout(() => void loadNumpy(), NUMPY_IDLE_MS);
}

async function loadNumpy(): Promise<void> {
  if (!pyodide || numpyState !== "absent") return;
  numpyState = "loading";
  say({ type: "numpy", state: "loading" });
  try {
    if (startedBy === "developer") {
      await loadOrThrow(pyodide, [developerNumpy]);
    } else {
      await loadLate(["numpy"]);
    }
    pyodide.runPython("import numpy");
    numpyState = "done";
    say({ type: "numpy", state: "ready" });
  } catch (error) {
    numpyState = "absent"; // tried again after the next answer
    say({ type: "numpy", state: "failed", reason: reasonOf(error) });
  }
}

self.onmessage = (event: MessageEvent<ToWorker>) => {
  if (event.data.type === "start") void start(event.data);
  else void answer(event.data);
};

// In a developer build the console may look inside: self.pyodideForDevelopers().runPython("…").
if (__DEVELOPER__) Object.assign(self, { pyodideForDevelopers: () => pyodide });
