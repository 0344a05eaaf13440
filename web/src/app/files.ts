// Files in and out: import with a look first, export, share, backup and restore.

import type { Clash, ClashChoice, Job } from "../store/types";
import { App, messageOf } from "./app";
import type { Change, Conflict, ExportFile, Row } from "./contract";
import { commitPending, newId } from "./editing";
import { go, keepNew, readFile, refreshJobs, refreshKept, showLoose } from "./jobs";

export type ExportKind = "job" | "sheet" | "text" | "schedule" | "takeoff-csv" | "takeoff-xlsx" | "calendar" | "cure-sheet";

/** Larger files are not read at all; the core has the finer limits. */
const MOST_FILE_BYTES = 64 * 1024 ** 2;

export async function takeFile(app: App, file: File): Promise<void> {
  if (file.size > MOST_FILE_BYTES) {
    app.say(`“${file.name}” is too large to be a job file.`, "bad");
    return;
  }
  if (app.state.core.phase !== "ready") app.say(`“${file.name}” is read as soon as the core is ready.`);
  try {
    const raw = new Uint8Array(await file.arrayBuffer());
    const opened = await readFile(app, raw);
    const mine = opened.job === null ? null : await mineFor(app, opened.job);
    const changes = mine === null || opened.job === null ? [] : (await app.core.call<{ changes: Change[] }>("compare", [mine, opened.job])).changes;
    app.update({
      notice: null,
      incoming: { fileName: file.name, raw, job: opened.job, issues: opened.issues, readOnly: opened.read_only, mine, changes, merged: null },
    });
    go({ page: "import" });
  } catch (error) {
    app.say(`“${file.name}” could not be read: ${messageOf(error)}`, "bad");
  }
}

/** The copy of the same job on this tablet, if there is one. */
async function mineFor(app: App, theirs: Row): Promise<Row | null> {
  const id = String(theirs["id"] ?? "");
  if (id === "" || !(await app.store.list()).some((summary) => summary.id === id)) return null;
  if (app.state.open?.id === id) return app.state.open.job;
  const { job } = await app.store.open(id);
  // Only looked at: another window may go on writing it.
  await app.store.close(id);
  return job;
}

export function dropIncoming(app: App): void {
  app.update({ incoming: null });
  go({ page: "jobs" });
}

/** Keep the file's job: as a new one, as a copy beside mine, or in place of mine (which stays in the history). */
export async function acceptIncoming(app: App, how: "new" | "copy" | "replace" | "merged"): Promise<void> {
  const incoming = app.state.incoming;
  if (incoming?.job === null || incoming === null) return;
  try {
    if (how === "new" || how === "copy") {
      const title = how === "copy" ? { title: `${String(incoming.job["title"] ?? "Job")} (copy)` } : {};
      const id = how === "copy" || !incoming.job["id"] ? newId() : incoming.job["id"];
      await keepNew(app, { ...incoming.job, ...title, id }, `Imported ${incoming.fileName}`);
    } else {
      const job = how === "merged" ? incoming.merged?.job : incoming.job;
      if (job === undefined) return;
      const id = String(incoming.mine?.["id"]);
      const opened = await app.store.open(id);
      if (opened.readOnly !== null) throw new Error(opened.readOnly.reason);
      await app.store.commit(id, { ...job, id } as Job, `Imported ${incoming.fileName}`);
      go({ page: "wall", job: id });
    }
    app.update({ incoming: null, open: null });
  } catch (error) {
    app.say(`The file could not be taken in: ${messageOf(error)}`, "bad");
  }
}

export function lookAtIncoming(app: App): void {
  const incoming = app.state.incoming;
  if (incoming?.job === null || incoming === null) return;
  showLoose(app, incoming.job, incoming.issues[0]?.message ?? "This file is only looked at here.");
}

export async function mergeIncoming(app: App, choices: Record<string, "mine" | "theirs">): Promise<void> {
  const incoming = app.state.incoming;
  if (incoming === null || incoming.job === null || incoming.mine === null) return;
  try {
    const merged = await app.core.call<{ job: Row; conflicts: Conflict[] }>("merge", [incoming.mine, incoming.job, null, choices]);
    // A conflict that has been decided stays on the list, so that the decision can be changed.
    const before = incoming.merged?.conflicts ?? merged.conflicts;
    app.update({ incoming: { ...incoming, merged: { job: merged.job, conflicts: before, choices } } });
  } catch (error) {
    app.say(`The two copies could not be put together: ${messageOf(error)}`, "bad");
  }
}

export async function exportFile(app: App, kind: ExportKind, way: "save" | "share"): Promise<void> {
  commitPending(app, "Edit");
  try {
    if (!app.open.isLoose) await app.store.flush().catch(() => undefined);
    const file = await app.core.call<ExportFile>("export", [app.job, kind]);
    await hand(new File([bytesOf(file.bytes)], file.name, { type: file.media }), way);
    if (kind === "job" && !app.open.isLoose) await app.store.noteBackup(app.open.id);
  } catch (error) {
    if (isAbort(error)) return;
    app.say(`The file could not be made: ${messageOf(error)}`, "bad");
  }
}

/** The job as it stands on screen, without the core: what is left when everything else fails. */
export function exportRaw(app: App): void {
  commitPending(app, "Edit");
  const text = JSON.stringify(app.job, null, 1);
  download(new File([text], `${fileStem(app.job)}.beadwright.json`, { type: "application/json" }));
}

export function saveIncomingAsItCame(app: App): void {
  const incoming = app.state.incoming;
  if (incoming !== null) download(new File([incoming.raw.slice()], incoming.fileName, { type: "application/json" }));
}

export function saveText(name: string, text: string): void {
  download(new File([text], name, { type: "application/json" }));
}

/** Everything on this tablet, or the one job that is open; either with its photos, to be restored as a backup. */
export async function backUp(app: App, way: "save" | "share", only?: string): Promise<void> {
  try {
    const blob = await app.store.backup(only === undefined ? undefined : [only]);
    const day = new Date().toISOString().slice(0, 10);
    const name = only === undefined ? `beadwright-backup-${day}.json` : `beadwright-job-with-photos-${day}.json`;
    await hand(new File([blob], name, { type: "application/json" }), way);
    app.update({ facts: await app.store.facts() });
  } catch (error) {
    if (isAbort(error)) return;
    app.say(`The backup could not be made: ${messageOf(error)}`, "bad");
  }
}

/** Jobs that are here already are asked about one by one; nothing is put over them unasked. */
export async function restoreBackup(app: App, file: File): Promise<void> {
  const ask = (clash: Clash): Promise<ClashChoice> =>
    new Promise((resolve) => {
      const choose = (choice: ClashChoice): void => {
        app.update({ clash: null });
        resolve(choice);
      };
      app.update({ clash: { clash, choose } });
      scrollTo(0, 0);
    });
  try {
    const result = await app.store.restore(file, ask);
    const trouble = result.issues.length > 0 ? ` ${result.issues.join(" ")}` : "";
    app.say(`Restored ${count(result.restored, "job")} from “${file.name}”.${trouble}`, result.issues.length > 0 ? "bad" : "plain");
  } catch (error) {
    app.say(`“${file.name}” could not be restored: ${messageOf(error)}`, "bad");
  }
  await refreshJobs(app);
  await refreshKept(app);
}

export function canShareFiles(): boolean {
  try {
    return typeof navigator.canShare === "function" && navigator.canShare({ files: [new File(["x"], "x.json", { type: "application/json" })] });
  } catch {
    return false;
  }
}

async function hand(file: File, way: "save" | "share"): Promise<void> {
  if (way === "share" && canShareFiles()) await navigator.share({ files: [file], title: file.name });
  else download(file);
}

function download(file: File): void {
  const address = URL.createObjectURL(file);
  const link = document.createElement("a");
  link.href = address;
  link.download = file.name;
  document.body.append(link);
  link.click();
  link.remove();
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}

function bytesOf(bytes: Uint8Array | string): Uint8Array<ArrayBuffer> {
  if (typeof bytes !== "string") return new Uint8Array(bytes);
  const text = atob(bytes);
  return Uint8Array.from(text, (letter) => letter.charCodeAt(0));
}

function fileStem(job: Row): string {
  const stem = String(job["title"] ?? "").trim().replace(/[^\p{L}\p{N}]+/gu, "-").replace(/^-+|-+$/g, "").slice(0, 60);
  return stem || "job";
}

function isAbort(error: unknown): boolean {
  return error instanceof DOMException && error.name === "AbortError";
}

export function count(number: number, word: string): string {
  return `${number} ${word}${number === 1 ? "" : "s"}`;
}

