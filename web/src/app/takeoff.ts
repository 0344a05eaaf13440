// Actions of the take-off page: rows filled down, rows pasted, a change laid beside the job as it is.

import { App, messageOf } from "./app";
import type { Comparison, Forms, Pasted, Row, UnitSystem } from "./contract";
import { changeJob, commitPending, newId } from "./editing";
import { groupOf, systemOf, withUnit } from "./fields";
import { getRows, isRow, set } from "./pointer";
import { NO_TAKEOFF, type TakeoffDesk } from "./state";
import { Superseded } from "../core/client";

export const RUNS = "/takeoff/runs";
/** So many rows stand on the page at first; more come on asking, so that a thousand stay quick. */
export const ROWS_AT_ONCE = 50;
const MOST_TEXT_BYTES = 8 * 1024 ** 2;

export function updateDesk(app: App, change: Partial<TakeoffDesk>): void {
  app.update({ takeoff: { ...app.state.takeoff, ...change } });
}

/** Make sure that a row of a list is on the page. */
export function reveal(app: App, list: string, index: number): void {
  const shown = app.state.takeoff.shown[list] ?? ROWS_AT_ONCE;
  if (index >= shown) updateDesk(app, { shown: { ...app.state.takeoff.shown, [list]: index + 1 } });
}

/** What one field of a row says, put into every row below it. */
export function fillDown(app: App, list: string, index: number, key: string, label: string): void {
  commitPending(app, label);
  const rows = getRows(app.job, list);
  const value = rows[index]?.[key];
  const below = rows.length - index - 1;
  if (below < 1) return;
  const filled = rows.map((row, at) => (at <= index ? row : set(row, `/${key}`, value)));
  changeJob(app, `Filled down: ${label}`, (job) => set(job, list, filled));
  app.say(`${label}: “${value === undefined || value === "" ? "nothing" : String(value)}” put into ${below} ${below === 1 ? "row" : "rows"} below.`, "plain", true);
}

/** Rows that the core offers to begin with; all of them to edit. */
export function startersOf(forms: Forms, group: string, system: UnitSystem): Row[] {
  return forms.starters?.[group]?.[system] ?? [];
}

export function addRows(app: App, list: string, rows: Row[], label: string): void {
  const before = getRows(app.job, list);
  changeJob(app, label, (job) => set(job, list, [...before, ...rows.map((row) => ({ id: newId(), ...row }))]));
  app.say(`${label}.`, "plain", true);
}

// ---- pasting ------------------------------------------------------------------------------------

export function openPaste(app: App): void {
  updateDesk(app, { paste: { text: "", columns: null, read: null } });
}

export function dropPaste(app: App): void {
  updateDesk(app, { paste: null });
}

/** Another text is read from the start; other columns read the same text anew. */
export function paste(app: App, text: string, columns: (string | null)[] | null = null): void {
  updateDesk(app, { paste: { text, columns, read: columns === null ? null : (app.state.takeoff.paste?.read ?? null) } });
  if (text.trim() === "") return;
  app.core
    .call<Pasted>("paste_runs", [text, systemOf(app.job), app.job, columns], { key: "paste" })
    .then((read) => {
      if (app.state.takeoff.paste?.text === text) updateDesk(app, { paste: { text, columns, read } });
    })
    .catch((error: unknown) => {
      if (!(error instanceof Superseded)) app.say(`The rows could not be read: ${messageOf(error)}`, "bad");
    });
}

export function setColumn(app: App, index: number, field: string | null): void {
  const now = app.state.takeoff.paste;
  if (now?.read === null || now === null) return;
  const columns = now.read.columns.map((column) => (column.index === index ? field : column.field === field ? null : column.field));
  paste(app, now.text, columns);
}

export async function pasteFile(app: App, file: File): Promise<void> {
  if (file.size > MOST_TEXT_BYTES) {
    app.say(`“${file.name}” is too large for a list of runs.`, "bad");
    return;
  }
  paste(app, textOf(new Uint8Array(await file.arrayBuffer())));
}

/** Spreadsheets write UTF-8, UTF-16 with its mark, or the old code page of the office. */
function textOf(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder("utf-16le").decode(bytes);
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder("windows-1252").decode(bytes);
  }
}

export function takePasted(app: App): void {
  const read = app.state.takeoff.paste?.read ?? null;
  if (read === null || read.rows.length === 0) return;
  const first = getRows(app.job, RUNS).length;
  updateDesk(app, { paste: null });
  addRows(app, RUNS, read.rows.filter(isRow), `Added ${read.rows.length} ${read.rows.length === 1 ? "run" : "runs"}`);
  reveal(app, RUNS, Math.min(first + read.rows.length, first + ROWS_AT_ONCE) - 1);
}

// ---- comparing ----------------------------------------------------------------------------------

export function setChange(app: App, key: string, value: string): void {
  updateDesk(app, { change: { ...app.state.takeoff.change, [key]: value } });
}

export function dropComparison(app: App): void {
  updateDesk(app, { change: NO_TAKEOFF.change, compared: null });
}

export async function compare(app: App, forms: Forms): Promise<void> {
  commitPending(app, "Edit");
  const { version } = app.open;
  try {
    const data = await app.core.call<Comparison>("compare_takeoff", [app.job, changeOf(app, forms)], { key: "compare-takeoff" });
    updateDesk(app, { compared: { version, data } });
  } catch (error) {
    if (!(error instanceof Superseded)) app.say(`The two could not be compared: ${messageOf(error)}`, "bad");
  }
}

/** What was entered, in the words of the core. */
function changeOf(app: App, forms: Forms): Row {
  const { width, sealant, instead, grade, phases } = app.state.takeoff.change;
  const unit = groupOf(forms, "run").fields.find((spec) => spec.key === "width")?.units[systemOf(app.job)]?.[0] ?? null;
  return {
    ...(width ? { width: withUnit(width, unit) } : {}),
    ...(sealant && instead ? { sealant: { from: sealant, to: instead } } : {}),
    ...(sealant && grade ? { sealants: { [sealant]: { class: grade } } } : {}),
    ...(phases ? { one_phase: true } : {}),
  };
}
