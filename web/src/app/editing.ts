// Changes to the open job. Typing makes a draft; leaving a field, Enter and every choice make a saved step.

import type { Job } from "../store/types";
import { App, messageOf } from "./app";
import type { Row } from "./contract";
import { withUnit } from "./fields";
import { loadPhotos } from "./photos";
import { get, getRows, set } from "./pointer";
import { NO_HISTORY, NO_TAKEOFF } from "./state";
import { askForAnswer } from "./working";

/** An offer of unsaved typing that is passed over is put with the kept copies: new work neither loses it nor is lost to it. */
function passOverDraft(app: App): void {
  if (app.open.draft === null) return;
  app.updateOpen({ draft: null });
  app.store
    .discardDraft(app.open.id, true)
    .then(() => app.say("What was typed before and not saved is kept under Earlier copies."))
    .catch((error: unknown) => app.say(messageOf(error), "bad"));
}

/** While typing: the text stays exactly as it is typed. */
export function typeInto(app: App, pointer: string, text: string, unit: string | null): void {
  if (app.open.readOnly !== null) return;
  passOverDraft(app);
  const isOther = app.state.pending !== null && app.state.pending.pointer !== pointer;
  if (isOther) commitPending(app, "Edit");
  replaceJob(app, set(app.job, pointer, text));
  app.update({ pending: { pointer, unit } });
  if (!app.open.isLoose) app.store.change(app.open.id, app.job as Job);
  askForAnswer(app);
}

/** Leaving a field: a bare number takes the unit of its chip, and the whole is saved. */
export function commitPending(app: App, label: string): void {
  const pending = app.state.pending;
  if (pending === null || app.state.open === null) return;
  app.update({ pending: null });
  const typed = String(get(app.job, pending.pointer) ?? "");
  const value = withUnit(typed, pending.unit);
  replaceJob(app, set(app.job, pending.pointer, value.trim() === "" ? undefined : value));
  if (get(app.open.committed, pending.pointer) === get(app.job, pending.pointer)) {
    // Back to what was saved: the draft has nothing left to offer.
    if (!app.open.isLoose) app.store.change(app.open.id, app.job as Job);
    return;
  }
  save(app, label);
}

/** A choice, a tick, a unit: committed at once. */
export function choose(app: App, pointer: string, value: unknown, label: string): void {
  if (app.open.readOnly !== null) return;
  commitPending(app, label);
  if (get(app.job, pointer) === value) return;
  passOverDraft(app);
  replaceJob(app, set(app.job, pointer, value === "" ? undefined : value));
  save(app, label);
}

/** A change to the whole job, such as adding a row. */
export function changeJob(app: App, label: string, change: (job: Row) => Row): void {
  if (app.open.readOnly !== null) return;
  commitPending(app, label);
  passOverDraft(app);
  replaceJob(app, change(app.job));
  save(app, label);
}

export function addRow(app: App, listPointer: string, row: Row, label: string): void {
  changeJob(app, label, (job) => set(job, listPointer, [...getRows(job, listPointer), row]));
}

export function removeRow(app: App, listPointer: string, index: number, label: string): void {
  changeJob(app, label, (job) => set(job, listPointer, getRows(job, listPointer).filter((_, at) => at !== index)));
  app.say(`${label}.`, "plain", true);
}

export function moveRow(app: App, listPointer: string, index: number, by: -1 | 1, label: string): void {
  const rows = getRows(app.job, listPointer);
  const other = rows[index + by];
  const row = rows[index];
  if (other === undefined || row === undefined) return;
  const moved = [...rows];
  moved[index] = other;
  moved[index + by] = row;
  changeJob(app, label, (job) => set(job, listPointer, moved));
}

export function duplicateRow(app: App, listPointer: string, index: number, label: string): Row | null {
  const rows = getRows(app.job, listPointer);
  const row = rows[index];
  if (row === undefined) return null;
  const copy = withFreshIds(structuredClone(row));
  if (typeof copy["name"] === "string") copy["name"] = `${copy["name"]} (copy)`;
  changeJob(app, label, (job) => set(job, listPointer, [...rows.slice(0, index + 1), copy, ...rows.slice(index + 1)]));
  return copy;
}

/** A copy at the end of its list, with some of its fields changed. */
export function appendCopy(app: App, listPointer: string, index: number, change: Row, label: string): void {
  const row = getRows(app.job, listPointer)[index];
  if (row !== undefined) addRow(app, listPointer, { ...withFreshIds(structuredClone(row)), ...change }, label);
}

function withFreshIds(row: Row): Row {
  row["id"] = newId();
  for (const value of Object.values(row)) {
    if (!Array.isArray(value)) continue;
    for (const inner of value as unknown[]) {
      if (typeof inner === "object" && inner !== null && "id" in inner) (inner as Row)["id"] = newId();
    }
  }
  return row;
}

export async function stepHistory(app: App, direction: "undo" | "redo"): Promise<void> {
  const open = app.state.open;
  if (open === null || open.readOnly !== null || open.isLoose) return;
  commitPending(app, "Edit");
  try {
    const step = await app.store[direction](open.id);
    if (step === null) return;
    if (app.state.open?.id !== open.id) return;
    replaceJob(app, step.job);
    app.updateOpen({ committed: step.job });
    app.update({
      history: app.store.history(open.id),
      notice: null,
      spoken: `${direction === "undo" ? "Undone" : "Done again"}: ${step.label}`,
    });
    askForAnswer(app);
    const route = app.state.route;
    if (route.page === "joint") void loadPhotos(app, route.joint);
  } catch (error) {
    app.say(messageOf(error), "bad");
  }
}

/** A short random name for a new row; nothing is read from it. */
export function newId(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(9));
  return btoa(String.fromCharCode(...bytes)).replaceAll("+", "a").replaceAll("/", "b");
}

function replaceJob(app: App, job: Row): void {
  app.updateOpen({ job, version: app.open.version + 1 });
}

function save(app: App, label: string): void {
  const { id, job, isLoose } = app.open;
  app.updateOpen({ committed: job });
  app.update({ notice: null });
  askForAnswer(app);
  if (isLoose) return;
  // What went wrong is told by the save state at the foot; the work stays on screen either way.
  void app.store.commit(id, job as Job, label).catch(() => undefined);
  app.update({ history: app.store.history(id) });
}

export function forgetOpen(app: App): void {
  app.update({ open: null, openFault: null, pending: null, history: NO_HISTORY, result: null, frames: null, frameIndex: null, isStale: false, chips: {}, takeoff: NO_TAKEOFF });
}
