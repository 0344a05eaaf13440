// What crosses the border between the page and the worker that holds Python. JSON text only:
// no live object of either side is ever shared.

export type StartWay = "snapshot" | "precompiled" | "developer";

/** One file of the runtime with its size, so that the page can say how far the download is. */
export interface SizedFile {
  url: string;
  bytes: number;
}

/** Facts that the build knows and the worker needs; null in a build without Python. */
export interface RuntimeFacts {
  pyodide: string;
  coreVersion: string;
  base: string;
  runtimeHash: string;
  packages: string;
  lock: object;
  snapshot: SizedFile & { sha256: string; rawBytes: number; heapBytes: number; runtimeHash: string };
  first: SizedFile[];
}

export interface StartMessage {
  type: "start";
  /** null lets the worker choose: the snapshot when it is stored on this device, else precompiled */
  way: StartWay | null;
  baseUrl: string;
  zone: string;
  language: string;
}

export interface CallMessage {
  type: "call";
  id: number;
  method: string;
  paramsText: string;
}

export type ToWorker = StartMessage | CallMessage;

export type FromWorker =
  | { type: "progress"; way: StartWay; fraction: number; text: string }
  | { type: "ready"; way: StartWay; core: string; python: string; startMs: number }
  | { type: "refused"; reason: string }
  | { type: "failed"; code: string; reason: string }
  | { type: "numpy"; state: "loading" | "ready" | "failed"; reason?: string }
  | { type: "answer"; id: number; text: string }
  | { type: "fatal"; id: number | null; reason: string };

/** The text of an answer, once parsed. */
export type Answer = { ok: true; result: unknown } | { ok: false; error: Fault };

export interface Fault {
  code: string;
  kind: string;
  message: string;
  trace?: string;
  fatal?: boolean;
}

const BYTES_KEY = "$bytes";

const toBase64 = (bytes: Uint8Array): string => {
  let text = "";
  for (let at = 0; at < bytes.length; at += 0x8000) text += String.fromCharCode(...bytes.subarray(at, at + 0x8000));
  return btoa(text);
};

const fromBase64 = (text: string): Uint8Array => Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0));

/** Parameters as JSON text; bytes travel as base64 under a key of their own. */
export function packParams(params: unknown[]): string {
  return JSON.stringify(params.map((value) => (value instanceof Uint8Array ? { [BYTES_KEY]: toBase64(value) } : value)));
}

/** Undo of the bridge's packing: bytes at the top level or one level down become Uint8Array again. */
export function unpackResult(result: unknown): unknown {
  const opened = (value: unknown): unknown => {
    if (typeof value !== "object" || value === null) return value;
    const inner = (value as Record<string, unknown>)[BYTES_KEY];
    return typeof inner === "string" ? fromBase64(inner) : value;
  };
  const top = opened(result);
  if (top !== result || typeof top !== "object" || top === null || Array.isArray(top)) return top;
  const bytes = (top as Record<string, unknown>)["bytes"];
  return bytes === undefined ? top : { ...top, bytes: opened(bytes) };
}
