// JSON Pointers into a job. Jobs are never changed in place: every edit makes a new whole.

export function join(base: string, ...parts: (string | number)[]): string {
  return base + parts.map((part) => "/" + String(part).replaceAll("~", "~0").replaceAll("/", "~1")).join("");
}

export function split(pointer: string): string[] {
  if (pointer === "") return [];
  return pointer
    .slice(1)
    .split("/")
    .map((part) => part.replaceAll("~1", "/").replaceAll("~0", "~"));
}

export function isRow(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

export function get(whole: unknown, pointer: string): unknown {
  let here = whole;
  for (const part of split(pointer)) {
    if (Array.isArray(here)) here = here[Number(part)];
    else if (isRow(here)) here = Object.hasOwn(here, part) ? here[part] : undefined;
    else return undefined;
  }
  return here;
}

export function getRow(whole: unknown, pointer: string): Record<string, unknown> {
  const found = get(whole, pointer);
  return isRow(found) ? found : {};
}

export function getRows(whole: unknown, pointer: string): Record<string, unknown>[] {
  const found = get(whole, pointer);
  return Array.isArray(found) ? found.map((row: unknown) => (isRow(row) ? row : {})) : [];
}

/** A copy of `whole` with `value` at `pointer`; undefined takes the entry out. */
export function set<T>(whole: T, pointer: string, value: unknown): T {
  return setParts(whole, split(pointer), value) as T;
}

function setParts(here: unknown, parts: string[], value: unknown): unknown {
  const [first, ...rest] = parts;
  if (first === undefined) return value;
  if (Array.isArray(here)) {
    const list = [...(here as unknown[])];
    list[Number(first)] = setParts(list[Number(first)], rest, value);
    return list;
  }
  const row = isRow(here) ? { ...here } : {};
  const inner = setParts(Object.hasOwn(row, first) ? row[first] : undefined, rest, value);
  if (inner === undefined) delete row[first];
  else row[first] = inner;
  return row;
}

/** What the page calls a row: its own name, or the kind of thing with its number. */
export function rowNameOf(row: Record<string, unknown>, word: string, index: number): string {
  const own = row["name"] ?? row["label"] ?? row["stage"];
  return (typeof own === "string" && own.trim()) || `${word} ${index + 1}`;
}
