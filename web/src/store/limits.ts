// Limits for what comes from a file, and the keys that no file may bring. They bound memory and time; the core
// has its own, stricter ones for what a job may say.

export const MOST_BACKUP_BYTES = 4 * 1024 ** 3;
/** A file that is not laid out one record a line has to be read in one piece. */
export const MOST_UNLINED_BYTES = 64 * 1024 ** 2;
export const MOST_JOB_CHARS = 16 * 1024 ** 2;
export const MOST_LINE_CHARS = 96 * 1024 ** 2;
export const MOST_RECORDS = 20_000;
export const MOST_DEPTH = 64;
export const MOST_TEXT_CHARS = 1_000_000;
export const MOST_PHOTO_BYTES = 40 * 1024 ** 2;

const REFUSED_KEYS = new Set(["__proto__", "prototype", "constructor"]);

/** The first thing in a parsed JSON value that is refused, as a plain sentence, or null. Walks without recursion. */
export function findRefusal(value: unknown, mostTextChars: number = MOST_TEXT_CHARS): string | null {
  const waiting: { item: unknown; depth: number }[] = [{ item: value, depth: 1 }];
  for (let next = waiting.pop(); next !== undefined; next = waiting.pop()) {
    const { item, depth } = next;
    if (typeof item === "string" && item.length > mostTextChars) {
      return `a text is longer than ${mostTextChars} characters`;
    }
    if (typeof item !== "object" || item === null) continue;
    if (depth > MOST_DEPTH) return `it is nested more than ${MOST_DEPTH} levels deep`;
    if (Array.isArray(item)) {
      for (const part of item) waiting.push({ item: part, depth: depth + 1 });
      continue;
    }
    for (const key of Object.keys(item)) {
      if (REFUSED_KEYS.has(key)) return `it uses the name ${key}, which no file may use`;
      waiting.push({ item: (item as Record<string, unknown>)[key], depth: depth + 1 });
    }
  }
  return null;
}
