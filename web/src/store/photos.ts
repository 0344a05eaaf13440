// Photos as attachments. The picture is made smaller before it is kept; the original only when it is asked for.
// Bytes are kept as ArrayBuffer beside their record, so that both are in one transaction and can be hashed.

import { together, type Database } from "./db";
import { findFault, newId, seal } from "./envelope";
import { MOST_PHOTO_BYTES } from "./limits";
import { sha256 } from "./sha256";
import type { Stamp } from "./session";
import { bytesText } from "./texts";
import { StoreError, type Envelope, type PhotoMeta, type PhotoOptions, type PhotoRecord, type PhotoRef } from "./types";

const LONGEST_EDGE_PX = 1600;
const QUALITY = 0.82;
const KEPT_TYPE = "image/jpeg";

interface Smaller {
  blob: Blob;
  width: number;
  height: number;
}

export async function attach(db: Database, stamp: Stamp, job: string, file: Blob, options: PhotoOptions = {}): Promise<PhotoRef> {
  if (file.size > MOST_PHOTO_BYTES) {
    throw new StoreError("too-large", `The picture has ${bytesText(file.size)}; the most is ${bytesText(MOST_PHOTO_BYTES)}.`);
  }
  let smaller: Smaller | null = null;
  let problem: string | null = null;
  try {
    smaller = await shrink(file, options.longestEdgePx ?? LONGEST_EDGE_PX, options.quality ?? QUALITY);
  } catch {
    problem = "This browser cannot show the picture. The file is kept as it came.";
  }
  const shown = smaller?.blob ?? file;
  const data = await shown.arrayBuffer();
  // A picture that had no need to shrink is its own original.
  const isOriginalKept = options.keepOriginal === true && shown !== file;
  const originalData = isOriginalKept ? await file.arrayBuffer() : null;
  const payload: PhotoMeta = {
    job,
    name: (options.name ?? (file instanceof File ? file.name : "photo")).slice(0, 200),
    type: shown.type || "application/octet-stream",
    width: smaller?.width ?? null,
    height: smaller?.height ?? null,
    bytes: data.byteLength,
    data_sha256: await sha256(new Uint8Array(data)),
    taken_at: new Date().toISOString(),
    original:
      originalData === null
        ? null
        : { type: file.type, bytes: originalData.byteLength, data_sha256: await sha256(new Uint8Array(originalData)) },
    problem,
  };
  const id = newId();
  const envelope = seal<PhotoMeta>({ kind: "photo", ...stamp, id, rev: 1, parent: null, saved_at: payload.taken_at, payload });
  await put(db, envelope, data, originalData);
  return { id, ...payload };
}

export async function put(db: Database, envelope: Envelope<PhotoMeta>, shown: ArrayBuffer, original: ArrayBuffer | null): Promise<void> {
  const { id, payload } = envelope;
  await db.write(["photos"], "strict", async (tx) => {
    const store = tx.objectStore("photos");
    await together([
      () => store.put({ id, part: "meta", job: payload.job, envelope }),
      () => store.put({ id, part: "shown", data: shown }),
      () => (original === null ? undefined : store.put({ id, part: "original", data: original })),
    ]);
  });
}

/** Smaller, upright, and without the camera's position data, which a re-encoded picture no longer has. */
async function shrink(file: Blob, longestEdgePx: number, quality: number): Promise<Smaller> {
  const picture = await createImageBitmap(file, { imageOrientation: "from-image" });
  try {
    const scale = Math.min(1, longestEdgePx / Math.max(picture.width, picture.height));
    const width = Math.max(1, Math.round(picture.width * scale));
    const height = Math.max(1, Math.round(picture.height * scale));
    const blob = await draw(picture, width, height, quality);
    if (blob.size >= file.size && scale === 1) return { blob: file, width, height };
    return { blob, width, height };
  } finally {
    picture.close();
  }
}

async function draw(picture: ImageBitmap, width: number, height: number, quality: number): Promise<Blob> {
  if (typeof OffscreenCanvas !== "undefined") {
    const canvas = new OffscreenCanvas(width, height);
    const pen = canvas.getContext("2d");
    if (pen !== null) {
      pen.drawImage(picture, 0, 0, width, height);
      return canvas.convertToBlob({ type: KEPT_TYPE, quality });
    }
  }
  const canvas = document.createElement("canvas");
  canvas.width = width;
  canvas.height = height;
  const pen = canvas.getContext("2d");
  if (pen === null) throw new Error("no canvas");
  pen.drawImage(picture, 0, 0, width, height);
  return new Promise((resolve, reject) => {
    canvas.toBlob((blob) => (blob === null ? reject(new Error("no picture")) : resolve(blob)), KEPT_TYPE, quality);
  });
}

export async function list(db: Database, job?: string): Promise<PhotoRef[]> {
  const records = await db.read(["photos"], async (tx) => {
    const index = tx.objectStore("photos").index("job");
    return job === undefined ? index.getAll() : index.getAll(job);
  });
  return records
    .filter((record): record is Extract<PhotoRecord, { part: "meta" }> => record.part === "meta")
    .map(({ envelope }) => ({ id: envelope.id, ...envelope.payload }))
    .sort((a, b) => a.taken_at.localeCompare(b.taken_at));
}

export async function read(db: Database, id: string, part: "shown" | "original"): Promise<{ blob: Blob; envelope: Envelope<PhotoMeta> }> {
  const { meta, bytes } = await db.read(["photos"], async (tx) => {
    const store = tx.objectStore("photos");
    const [meta, bytes] = await Promise.all([store.get([id, "meta"]), store.get([id, part])]);
    return { meta, bytes };
  });
  if (meta?.part !== "meta") throw new StoreError("not-found", "The photo is not on this tablet.");
  const { envelope } = meta;
  const told = part === "shown" ? envelope.payload : envelope.payload.original;
  if (told === null || bytes === undefined || bytes.part === "meta") {
    throw new StoreError("not-found", "The original of this photo was not kept.");
  }
  if (findFault(envelope) !== null || (await sha256(new Uint8Array(bytes.data))) !== told.data_sha256) {
    throw new StoreError("damaged", "The photo is damaged: its checksum does not agree.");
  }
  return { blob: new Blob([bytes.data], { type: told.type }), envelope };
}

export async function remove(db: Database, ids: string[]): Promise<void> {
  await db.write(["photos"], "strict", async (tx) => {
    const store = tx.objectStore("photos");
    await together(ids.flatMap((id) => ["meta", "shown", "original"].map((part) => () => store.delete([id, part]))));
  });
}
