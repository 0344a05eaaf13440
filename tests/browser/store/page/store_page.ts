// What the store tests have at hand in the browser: the store itself, its inner parts, and a few ways to do harm.
import { openDB } from "idb";
import * as backup from "../../../../web/src/store/backup";
import * as envelope from "../../../../web/src/store/envelope";
import * as facts from "../../../../web/src/store/facts";
import * as history from "../../../../web/src/store/history";
import { Store } from "../../../../web/src/store/index";
import * as limits from "../../../../web/src/store/limits";
import * as migrations from "../../../../web/src/store/migrations";
import * as retention from "../../../../web/src/store/retention";
import * as sha from "../../../../web/src/store/sha256";
import * as texts from "../../../../web/src/store/texts";

type AnyRecord = Record<string, any>;

/** A made-up job; every part says which edit it is of, so that a mix of two would show. */
function job(id: string, n: number | string, extra: AnyRecord = {}): AnyRecord & { id: string } {
  return {
    format: "beadwright-job", version: 1, id, title: `Job ${id}`, edit: String(n),
    joints: Array.from({ length: 4 }, (_, i) => ({ id: `j${i}`, note: String(n) })),
    ...extra,
  };
}

async function open(options: AnyRecord = {}): Promise<Store> {
  const store = await Store.open({ app: "test", core: "0", tables: [], ...options });
  const log: AnyRecord[] = [];
  for (const type of ["save-state", "jobs", "writer", "facts", "notice"]) {
    store.addEventListener(type, (event) => log.push({ type, ...(event as CustomEvent).detail }));
  }
  Object.assign(store, { log });
  return store;
}

/** The database as it is, past the store. */
async function raw<T>(work: (db: any) => Promise<T>, name = "beadwright"): Promise<T> {
  const db = await openDB(name);
  try {
    return await work(db);
  } finally {
    db.close();
  }
}

async function dump(name = "beadwright"): Promise<AnyRecord> {
  return raw(async (db) => {
    const all: AnyRecord = {};
    for (const store of [...db.objectStoreNames]) all[store] = await db.getAll(store);
    return all;
  }, name);
}

async function load(stores: AnyRecord, version: number, name = "beadwright"): Promise<void> {
  const keys: AnyRecord = { jobs: "id", revisions: ["id", "rev"], drafts: ["id", "slot"], quarantine: "key", photos: ["id", "part"], meta: "key" };
  const db = await openDB(name, version, {
    upgrade(fresh) {
      for (const [store, keyPath] of Object.entries(keys)) {
        const made = fresh.createObjectStore(store, { keyPath: keyPath as string });
        if (store === "photos") made.createIndex("job", "job");
      }
    },
  });
  for (const [store, records] of Object.entries(stores)) for (const record of records as any[]) await db.put(store, unpack(record));
  db.close();
}

const BYTES = "bytes:base64:";

/** Bytes are written as text in fixtures. */
function unpack(record: AnyRecord): AnyRecord {
  if (typeof record["data"] !== "string" || !record["data"].startsWith(BYTES)) return record;
  return { ...record, data: Uint8Array.from(atob(record["data"].slice(BYTES.length)), (c) => c.charCodeAt(0)).buffer };
}

function pack(record: AnyRecord): AnyRecord {
  if (!(record["data"] instanceof ArrayBuffer)) return record;
  return { ...record, data: BYTES + btoa(String.fromCharCode(...new Uint8Array(record["data"]))) };
}

// The connection that the store has used last, so that a test can close it behind the store's back.
const transaction = IDBDatabase.prototype.transaction;
const counts: AnyRecord = { readwrite: 0, strict: 0, relaxed: 0 };
const hooks: AnyRecord = { handle: null, counts, onTransaction: null };
IDBDatabase.prototype.transaction = function (this: IDBDatabase, names: any, mode?: any, options?: any): IDBTransaction {
  hooks["handle"] = this;
  if (mode === "readwrite") {
    counts["readwrite"]++;
    if (options?.durability !== undefined) counts[options.durability]++;
  }
  hooks["onTransaction"]?.(names, mode, options);
  return transaction.call(this, names, mode, options);
};

async function picture(width: number, height: number, type = "image/png"): Promise<File> {
  const canvas = new OffscreenCanvas(width, height);
  const pen = canvas.getContext("2d")!;
  for (let i = 0; i < 400; i++) {
    pen.fillStyle = `rgb(${(i * 37) % 255} ${(i * 91) % 255} ${(i * 53) % 255})`;
    pen.fillRect((i * 131) % width, (i * 197) % height, width / 9, height / 9);
  }
  return new File([await canvas.convertToBlob({ type })], "wall.png", { type });
}

const sleep = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** What a call did: its value, or the code and message of its error. */
async function outcome(call: () => unknown): Promise<AnyRecord> {
  try {
    return { ok: true, value: (await call()) ?? null };
  } catch (error) {
    return { ok: false, code: (error as AnyRecord)["code"] ?? (error as AnyRecord)["name"], message: String((error as Error).message) };
  }
}

Object.assign(window, {
  bw: { Store, open, job, raw, dump, load, pack, unpack, hooks, picture, sleep, outcome, openDB, backup, envelope, facts, history, limits, migrations, retention, sha, texts },
});
