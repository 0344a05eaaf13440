// Rows of a list as one ruled line each, for typing many of them quickly; each line opens to its whole form.

import { html, nothing, type TemplateResult } from "lit";
import { repeat } from "lit/directives/repeat.js";
import type { App } from "../app/app";
import type { FieldGroup, FieldSpec, Forms, Row } from "../app/contract";
import { addRow, duplicateRow, moveRow, newId, removeRow } from "../app/editing";
import { blankRow, groupOf, shows, systemOf, unitsOf } from "../app/fields";
import { getRows, join, rowNameOf, split } from "../app/pointer";
import { fillDown, reveal, ROWS_AT_ONCE, updateDesk } from "../app/takeoff";
import { issuesAt, message, placeOf } from "./field";
import { focusSoon } from "./focus";
import { form, openParts } from "./form";
import { cellWidget } from "./widgets";

/** Name of the drawer with the settings of the take-off. */
export const SETTINGS_BLOCK = "takeoff settings";

export interface RowList {
  group: string;
  /** Pointer of the list in the job. */
  list: string;
  word: string;
  /** Fields on the line; of several in one place the first that shows. */
  columns: readonly (readonly string[])[];
  /** What the core says of one row, under its line. */
  textOf?: (pointer: string) => string | null;
}

const partOf = (list: string, row: Row, index: number): string => `row ${list} ${String(row["id"] ?? index)}`;
const cellId = (pointer: string): string => "cell" + pointer.replaceAll("/", "-");

/** The drawer of the row in which a fault lies. */
export function rowParts(app: App, path: string): string[] {
  const [first, second, index] = split(path);
  const list = `/${first}/${second}`;
  const row = index === undefined ? undefined : getRows(app.job, list)[Number(index)];
  return row === undefined ? [] : [partOf(list, row, Number(index)), `list ${list}`];
}

export function showRow(app: App, path: string): void {
  const [first, second, index] = split(path);
  if (index !== undefined) reveal(app, `/${first}/${second}`, Number(index));
}

export function rowList(app: App, forms: Forms, data: RowList): TemplateResult {
  const group = groupOf(forms, data.group);
  const rows = getRows(app.job, data.list);
  const shown = Math.max(app.state.takeoff.shown[data.list] ?? 0, ROWS_AT_ONCE);
  const part = rows.slice(0, shown);
  return html`<div class="rows is-${data.group}" data-testid="rows-${data.group}" @keydown=${(event: KeyboardEvent) => stepDown(event)}>
    ${rows.length > 0 ? columnHeads(app, group, data) : nothing}
    <ol>
      ${repeat(
        part,
        (row, index) => String(row["id"] ?? index),
        (row, index) => rowLine(app, forms, group, data, row, index, rows.length),
      )}
    </ol>
    ${rows.length > shown
      ? html`<button type="button" class="plain" @click=${() => reveal(app, data.list, Math.min(rows.length, shown + ROWS_AT_ONCE) - 1)}>Show ${Math.min(ROWS_AT_ONCE, rows.length - shown)} more of ${rows.length}</button>`
      : nothing}
  </div>`;
}

function columnHeads(app: App, group: FieldGroup, data: RowList): TemplateResult {
  return html`<p class="row-heads" aria-hidden="true">
    <span></span>
    ${data.columns.map((keys) => {
      const specs = keys.map((key) => specOf(group, key));
      const unit = specs.length === 1 ? unitsOf(specs[0]!, systemOf(app.job))[0] : undefined;
      return html`<span>${specs[0]!.label}${unit ? html`, ${unit}` : nothing}</span>`;
    })}
    <span></span>
  </p>`;
}

function specOf(group: FieldGroup, key: string): FieldSpec {
  const spec = group.fields.find((field) => field.key === key);
  if (spec === undefined) throw new Error(`the core declares no field “${key}” of “${group.key}”`);
  return spec;
}

function rowLine(app: App, forms: Forms, group: FieldGroup, data: RowList, row: Row, index: number, total: number): TemplateResult {
  const base = `${data.list}/${index}`;
  const name = rowNameOf(row, data.word, index);
  const part = partOf(data.list, row, index);
  const isOpen = app.state.opened.has(part);
  const found = group.fields.flatMap((spec) => issuesAt(app, join(base, spec.key)).map((issue) => ({ spec, issue })));
  const isBad = found.some(({ issue }) => issue.severity === "error");
  const text = data.textOf?.(base) ?? null;
  const id = "part-" + part.replaceAll(/[^\w]+/g, "-");
  return html`<li class="row-item ${isBad ? "has-fault" : ""}" data-testid="row-${data.group}-${index}">
    <div class="row-line">
      <span class="row-number">${index + 1}</span>
      ${data.columns.map((keys, column) => cell(app, forms, group, data, base, index, keys, column, { name, isOpen }))}
      <button type="button" class="row-open" aria-expanded=${isOpen ? "true" : "false"} aria-controls=${id} aria-label="All of ${name}" data-testid="open-${data.group}-${index}" @click=${() => toggle(app, part, isOpen)}>
        <span class="disclose-sign" aria-hidden="true"></span>
      </button>
    </div>
    ${text && !isBad ? html`<p class="row-text">${text}</p>` : nothing}
    ${isOpen ? nothing : found.map(({ spec, issue }, at) => message(`${cellId(base)}-message-${at}`, issue, spec.label))}
    <div id=${id} class="row-form" ?hidden=${!isOpen}>${isOpen ? html`${form(app, forms, group, base)}${actions(app, forms, group, data, index, total, name)}` : nothing}</div>
  </li>`;
}

function cell(app: App, forms: Forms, group: FieldGroup, data: RowList, base: string, index: number, keys: readonly string[], column: number, row: { name: string; isOpen: boolean }): TemplateResult {
  const spec = keys.map((key) => specOf(group, key)).find((item) => shows(forms, group, item, app.job, base));
  if (spec === undefined) return html`<span class="cell is-none" aria-hidden="true">–</span>`;
  const pointer = join(base, spec.key);
  const place = placeOf(app, forms, group, spec, base);
  const touched = (): void => updateDesk(app, { cell: { list: data.list, index, key: spec.key } });
  return html`<span class="cell kind-${spec.kind} ${place.isBad ? "is-bad" : ""} is-${spec.key}" data-cell="${index} ${column}" data-pointer-cell=${pointer} @focusin=${touched}>
    <span class="cell-label" aria-hidden="true">${spec.label}</span>
    ${cellWidget(app, { ...place, id: cellId(pointer), name: `${spec.label}, ${row.name}`, describedBy: row.isOpen ? "" : describedBy(app, group, base, spec) })}
  </span>`;
}

/** The messages under the line that belong to this cell, by the order in which they stand there. */
function describedBy(app: App, group: FieldGroup, base: string, spec: FieldSpec): string {
  const before = group.fields.slice(0, group.fields.indexOf(spec)).reduce((sum, other) => sum + issuesAt(app, join(base, other.key)).length, 0);
  return issuesAt(app, join(base, spec.key)).map((_, at) => `${cellId(base)}-message-${before + at}`).join(" ");
}

/** Enter goes to the same cell of the next row, as in a list on paper. */
function stepDown(event: KeyboardEvent): void {
  if (event.key !== "Enter" || event.isComposing || !(event.target instanceof HTMLInputElement)) return;
  const place = event.target.closest<HTMLElement>("[data-cell]");
  const [index, column] = (place?.dataset["cell"] ?? "").split(" ");
  const next = place?.closest(".rows")?.querySelector<HTMLElement>(`[data-cell="${Number(index) + 1} ${column}"] .line`);
  next?.focus();
  if (next instanceof HTMLInputElement) next.select();
}

function toggle(app: App, part: string, isOpen: boolean): void {
  const opened = new Set(app.state.opened);
  if (isOpen) opened.delete(part);
  else opened.add(part);
  app.update({ opened });
}

function actions(app: App, forms: Forms, group: FieldGroup, data: RowList, index: number, total: number, name: string): TemplateResult | typeof nothing {
  if (app.open.readOnly !== null) return nothing;
  const { list } = data;
  const base = `${list}/${index}`;
  const button = (word: string, about: string, isOff: boolean, act: () => void): TemplateResult => html`<button type="button" ?disabled=${isOff} aria-label="${about} ${name}" @click=${act}>${word}</button>`;
  const fillable = group.fields.filter((spec) => shows(forms, group, spec, app.job, base));
  return html`<div class="actions">
      ${button("Duplicate", "Duplicate", false, () => duplicate(app, data, index))} ${button("Up", "Move up", index === 0, () => moveRow(app, list, index, -1, `Moved ${name}`))}
      ${button("Down", "Move down", index === total - 1, () => moveRow(app, list, index, 1, `Moved ${name}`))} ${button("Remove", "Remove", false, () => removeRow(app, list, index, `Removed ${name}`))}
    </div>
    ${index < total - 1
      ? html`<div class="field">
          <label class="field-label" for="${cellId(base)}-fill">Fill down a field to all rows below</label>
          <div class="control">
            <select class="line" id="${cellId(base)}-fill" data-testid="fill-field">${fillable.map((spec) => html`<option value=${spec.key}>${spec.label}</option>`)}</select>
            <button type="button" data-testid="fill-row" @click=${() => fillChosen(app, group, list, index, `${cellId(base)}-fill`)}>Fill down</button>
          </div>
        </div>`
      : nothing}`;
}

function fillChosen(app: App, group: FieldGroup, list: string, index: number, selectId: string): void {
  const key = (document.getElementById(selectId) as HTMLSelectElement | null)?.value ?? "";
  if (key !== "") fillDown(app, list, index, key, specOf(group, key).label);
}

export function duplicate(app: App, data: RowList, index: number): void {
  const name = rowNameOf(getRows(app.job, data.list)[index] ?? {}, data.word, index);
  duplicateRow(app, data.list, index, `Duplicated ${name}`);
  reveal(app, data.list, index + 1);
  // Until the page is drawn again, the row that was there before answers to the new row's name.
  setTimeout(() => focusSoon(cellId(`${data.list}/${index + 1}/${data.columns[0]![0]!}`)));
}

/** A new row at the end, with the cursor in its first cell. */
export function addTo(app: App, forms: Forms, data: RowList): void {
  const index = getRows(app.job, data.list).length;
  addRow(app, data.list, { id: newId(), ...blankRow(forms, data.group, systemOf(app.job)) }, `Added: ${groupOf(forms, data.group).label}`);
  reveal(app, data.list, index);
  openParts(app, [`list ${data.list}`]);
  focusSoon(cellId(`${data.list}/${index}/${data.columns[0]![0]!}`));
}

/** Buttons that work on the cell touched last. */
export function cellTools(app: App, forms: Forms, data: RowList): TemplateResult {
  const touched = app.state.takeoff.cell?.list === data.list ? app.state.takeoff.cell : null;
  const rows = getRows(app.job, data.list);
  const row = touched === null ? undefined : rows[touched.index];
  const label = touched === null ? "" : specOf(groupOf(forms, data.group), touched.key).label;
  const hold = (event: Event): void => event.preventDefault();
  const isLast = touched !== null && touched.index >= rows.length - 1;
  return html`<button type="button" data-testid="fill-down" ?disabled=${row === undefined || isLast} @pointerdown=${hold} @click=${() => touched !== null && fillDown(app, data.list, touched.index, touched.key, label)}>
      Fill down${row !== undefined && !isLast ? html`: ${label.toLowerCase()}` : nothing}
    </button>
    <button type="button" data-testid="duplicate" ?disabled=${row === undefined} @pointerdown=${hold} @click=${() => touched !== null && duplicate(app, data, touched.index)}>
      Duplicate${row !== undefined ? html` row ${touched!.index + 1}` : nothing}
    </button>`;
}

