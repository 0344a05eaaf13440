// Sealing and checking records. The hash covers the whole envelope but the hash itself, over JSON with sorted keys,
// so that it survives a file that another program has written out again in another order.

import { sha256Sync } from "./sha256";
import type { Envelope } from "./types";

const encoder = new TextEncoder();

/** JSON text with the keys of every object in order; what JSON cannot hold is left out or null, as JSON.stringify does. */
export function canonicalText(value: unknown): string {
  if (Array.isArray(value)) {
    let text = "[";
    for (let i = 0; i < value.length; i++) text += (i > 0 ? "," : "") + canonicalText(value[i]);
    return text + "]";
  }
  if (typeof value === "object" && value !== null) {
    const record = value as Record<string, unknown>;
    let text = "{";
    for (const key of Object.keys(record).sort()) {
      const item = record[key];
      if (item === undefined || typeof item === "function" || typeof item === "symbol") continue;
      text += (text.length > 1 ? "," : "") + JSON.stringify(key) + ":" + canonicalText(item);
    }
    return text + "}";
  }
  return JSON.stringify(value) ?? "null";
}

/** A copy that nobody else holds, and only of what JSON can carry. */
export function jsonCopy<T>(value: T): T {
  return JSON.parse(JSON.stringify(value)) as T;
}

export function hashOf(envelope: Omit<Envelope, "sha256">): string {
  const { kind, schema, id, rev, parent, saved_at, app, core, tables, payload } = envelope;
  return sha256Sync(encoder.encode(canonicalText({ kind, schema, id, rev, parent, saved_at, app, core, tables, payload })));
}

export function seal<P>(parts: Omit<Envelope<P>, "sha256">): Envelope<P> {
  return { ...parts, sha256: hashOf(parts) };
}

/** What is wrong with a record, or null. */
export function findFault(record: unknown): string | null {
  if (typeof record !== "object" || record === null || Array.isArray(record)) return "it is not a record";
  const envelope = record as Partial<Envelope>;
  if (typeof envelope.id !== "string" || envelope.id === "") return "it has no id";
  if (!Number.isInteger(envelope.schema) || (envelope.schema as number) < 1) return "its schema number is missing";
  if (!Number.isInteger(envelope.rev)) return "its revision number is missing";
  if (typeof envelope.saved_at !== "string") return "its date is missing";
  if (typeof envelope.payload !== "object" || envelope.payload === null) return "it is empty";
  if (typeof envelope.sha256 !== "string") return "its checksum is missing";
  if (hashOf(envelope as Envelope) !== envelope.sha256) return "its checksum does not agree";
  return null;
}

/** A random id; randomUUID is absent outside secure contexts. */
export function newId(): string {
  if (typeof crypto.randomUUID === "function") return crypto.randomUUID();
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  return Array.from(bytes, (byte) => byte.toString(16).padStart(2, "0")).join("");
}
