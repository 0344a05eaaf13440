// The take-off: what to bring and what it costs on the left, the runs and the prices behind it on the right.

import { html, nothing, type TemplateResult } from "lit";
import { live } from "lit/directives/live.js";
import type { App } from "../app/app";
import type { Choice, Forms, Pasted, TakeoffAnswer } from "../app/contract";
import { groupOf, systemOf, unitsOf, valueAt } from "../app/fields";
import { exportFile } from "../app/files";
import { getRows, rowNameOf } from "../app/pointer";
import { addRows, compare, dropComparison, dropPaste, openPaste, paste, pasteFile, RUNS, setChange, setColumn, startersOf, takePasted } from "../app/takeoff";
import { bands, notes, staleNote, table, tableDrawers, waiting, workingPart } from "./answers";
import { drawingOf } from "./drawing";
import { focusSoon, jumpTo } from "./focus";
import { disclosure, form, openParts } from "./form";
import { issueList } from "./issues";
import { filePicker } from "./jobs";
import { addTo, cellTools, rowList, SETTINGS_BLOCK, type RowList } from "./rows";
import { titleStrip } from "./title_block";

const RUN_ROWS: RowList = { group: "run", list: RUNS, word: "Run", columns: [["name"], ["length"], ["count"], ["lines"], ["colour"], ["width", "leg_a"]] };
const OTHER_ROWS: readonly (RowList & { title: string; add: string })[] = [
  { group: "pack", list: "/takeoff/packs", word: "Package", title: "Packages", add: "Add a package", columns: [["name"], ["volume"], ["per_box"], ["price"]] },
  { group: "extra", list: "/takeoff/extras", word: "Item", title: "Prices of everything else", add: "Add an item", columns: [["item"], ["diameter"], ["length", "volume", "count"], ["price"]] },
  { group: "rate", list: "/takeoff/rates", word: "Rate", title: "Rates of work", add: "Add a rate", columns: [["stage"], ["access"], ["pace"], ["hour_price"]] },
];
/** The table that belongs to the picture. */
const PICTURE_TABLE = "orders";

export function takeoffPage(app: App, forms: Forms): TemplateResult {
  const answer = app.state.result?.evaluation.takeoff ?? null;
  const hasRuns = getRows(app.job, RUNS).length > 0;
  return html`<div class="page two is-takeoff">
    <div class="sheet">
      ${titleStrip(app)}
      <header class="takeoff-head">
        <p class="title-label">${valueAt(app.job, "/title") || "Untitled job"}</p>
        <h1 tabindex="-1">${groupOf(forms, "takeoff").label}</h1>
        <div class="actions">
          <button type="button" class="only-narrow" @click=${() => jumpTo("runs-title")}>To the runs</button>
          <button type="button" data-testid="export-takeoff-csv" @click=${() => void exportFile(app, "takeoff-csv", "save")}>CSV</button>
          <button type="button" data-testid="export-takeoff-xlsx" @click=${() => void exportFile(app, "takeoff-xlsx", "save")}>Workbook</button>
          <button type="button" data-testid="print" @click=${() => window.print()}>Print</button>
        </div>
      </header>
      ${issueList(app, (issue) => issue.path.startsWith("/takeoff"))} ${hasRuns ? answersOf(app, forms, answer) : nothingYet()}
    </div>
    <div class="inputs" role="region" aria-label="Runs, packages, prices and rates" tabindex="-1">
      ${runs(app, forms, answer)} ${OTHER_ROWS.map((data) => others(app, forms, data))}
      <section aria-label="Settings">${disclosure(app, SETTINGS_BLOCK, "Settings: waste, widths, faces, money", () => form(app, forms, groupOf(forms, "takeoff"), "/takeoff"))}</section>
    </div>
  </div>`;
}

function nothingYet(): TemplateResult {
  return html`<p class="empty" data-testid="no-runs">No run yet. A run is a length of bead: add one, or paste rows from a spreadsheet.</p>`;
}

function answersOf(app: App, forms: Forms, answer: TakeoffAnswer | null): TemplateResult {
  if (answer === null || answer.short !== false) return waiting(app);
  const tables = answer.tables ?? [];
  const first = tables.filter((item) => item.key === PICTURE_TABLE);
  return html`
    ${app.state.isStale ? staleNote() : nothing} ${app.state.coreFault !== null ? waiting(app) : nothing}
    <section aria-labelledby="answers-title" class=${app.state.isStale ? "is-stale" : ""}>
      <h2 id="answers-title" class="hidden-word">Answers</h2>
      ${bands(answer.answers ?? [])}
    </section>
    ${notes(answer.notes ?? [])} ${picture(answer)} ${first.map((item) => html`<div class="picture-table">${table(item)}</div>`)}
    <div class="drawers">
      ${tableDrawers(app, tables.filter((item) => item.key !== PICTURE_TABLE), "takeoff")}
      ${workingPart(app, answer.steps ?? [], "working takeoff")}
      <section class="drawer is-compare">${disclosure(app, "takeoff compare", "Lay a change beside it", () => comparison(app, forms))}</section>
    </div>
  `;
}

/** The same figures stand in the table under it. */
function picture(answer: TakeoffAnswer): TemplateResult | typeof nothing {
  const drawing = drawingOf(answer.drawing ?? "");
  if (drawing === null) return nothing;
  const title = drawing.querySelector("title")?.textContent ?? "";
  return html`<figure class="bars" data-testid="bars"><div class="drawing" role="img" aria-label=${title}>${drawing}</div>${title ? html`<figcaption>${title}</figcaption>` : nothing}</figure>`;
}

// ---- a change beside the job as it is -----------------------------------------------------------

function comparison(app: App, forms: Forms): TemplateResult {
  const { change, compared } = app.state.takeoff;
  const sealants: Choice[] = getRows(app.job, "/sealants").map((row, index) => ({ value: String(row["id"] ?? ""), label: rowNameOf(row, "Sealant", index) }));
  const classes = groupOf(forms, "sealant").fields.find((spec) => spec.key === "class");
  const width = groupOf(forms, "run").fields.find((spec) => spec.key === "width");
  const unit = width === undefined ? "" : (unitsOf(width, systemOf(app.job))[0] ?? "");
  const isOld = compared !== null && compared.version !== app.open.version;
  return html`<form class="compare" data-testid="compare" @submit=${(event: Event) => (event.preventDefault(), void compare(app, forms))}>
      <p class="help">Nothing in the job changes.</p>
      <div class="field">
        <label class="field-label" for="change-width">All widths entered, wider by</label>
        <p class="help" id="change-width-help">With a minus: narrower.</p>
        <div class="control">
          <input id="change-width" class="line" type="text" autocomplete="off" aria-describedby="change-width-help" .value=${live(change["width"] ?? "")} @input=${(event: InputEvent) => setChange(app, "width", (event.target as HTMLInputElement).value)} />
          <span class="unit">${unit}</span>
        </div>
      </div>
      ${select(app, "sealant", "Sealant to change", "None", sealants)}
      ${change["sealant"] ? html`${select(app, "instead", "Another in its place", "As it is", sealants.filter((item) => item.value !== change["sealant"]))} ${select(app, "grade", classes?.label ?? "Class", "As it is", classes?.choices ?? [])}` : nothing}
      ${select(app, "phases", "Phases", "Each ordered by itself", [{ value: "one", label: "All ordered together" }])}
      <div class="actions">
        <button type="submit" class="main" data-testid="compare-now">${isOld ? "Compare again" : "Compare"}</button>
        ${compared !== null ? html`<button type="button" @click=${() => dropComparison(app)}>Clear</button>` : nothing}
      </div>
    </form>
    ${compared === null ? nothing : html`${isOld ? staleNote() : nothing} ${compared.data.error ? html`<p class="message is-error" role="alert"><b>Fix:</b> ${compared.data.error}</p>` : nothing} ${compared.data.table ? table(compared.data.table) : nothing}`}`;
}

function select(app: App, key: string, label: string, none: string, choices: Choice[]): TemplateResult {
  const chosen = app.state.takeoff.change[key] ?? "";
  return html`<div class="field">
    <label class="field-label" for="change-${key}">${label}</label>
    <div class="control">
      <select id="change-${key}" class="line" .value=${live(chosen)} @change=${(event: Event) => setChange(app, key, (event.target as HTMLSelectElement).value)}>
        <option value="" ?selected=${chosen === ""}>${none}</option>
        ${choices.map((item) => html`<option value=${item.value} ?selected=${item.value === chosen}>${item.label}</option>`)}
      </select>
    </div>
  </div>`;
}

// ---- rows ---------------------------------------------------------------------------------------

function runs(app: App, forms: Forms, answer: TakeoffAnswer | null): TemplateResult {
  const texts = new Map((answer?.runs ?? []).map((run) => [run.path, run.text]));
  const data: RowList = { ...RUN_ROWS, textOf: (pointer) => (app.state.isStale ? null : (texts.get(pointer) ?? null)) };
  const isOpen = app.open.readOnly === null;
  return html`<section aria-labelledby="runs-title" data-group="runs">
    <h2 id="runs-title" tabindex="-1" class="inputs-title">Runs</h2>
    ${rowList(app, forms, data)}
    ${isOpen
      ? html`<div class="actions row-tools">
            <button type="button" class="main" data-testid="add-run" @click=${() => addTo(app, forms, data)}>Add a run</button>
            ${cellTools(app, forms, data)}
            ${app.state.takeoff.paste === null ? html`<button type="button" data-testid="open-paste" @click=${() => showPaste(app)}>Paste rows</button>` : nothing}
          </div>
          ${app.state.takeoff.paste === null ? nothing : pasting(app, forms)}`
      : nothing}
  </section>`;
}

function others(app: App, forms: Forms, data: RowList & { title: string; add: string }): TemplateResult {
  const rows = getRows(app.job, data.list);
  const starters = startersOf(forms, data.group, systemOf(app.job));
  const name = `list ${data.list}`;
  const offer = rows.length === 0 && starters.length > 0;
  return html`<section aria-label=${data.title} data-group=${data.group}>
    ${disclosure(app, name, html`${data.title} <span class="count">${rows.length === 0 ? "none yet" : rows.length}</span>`, () => html`${rowList(app, forms, data)}
      ${app.open.readOnly === null
        ? html`<div class="actions row-tools">
            <button type="button" data-testid="add-${data.group}" @click=${() => addTo(app, forms, data)}>${data.add}</button>
            ${rows.length > 0 ? cellTools(app, forms, data) : nothing}
            ${offer ? html`<button type="button" data-testid="start-${data.group}" @click=${() => begin(app, data, starters.length, forms)}>Start with ${starters.length} common rows, to edit</button>` : nothing}
          </div>`
        : nothing}`)}
  </section>`;
}

function begin(app: App, data: RowList, count: number, forms: Forms): void {
  addRows(app, data.list, startersOf(forms, data.group, systemOf(app.job)), `Added ${count} rows, all to edit`);
  openParts(app, [`list ${data.list}`]);
}

// ---- pasting ------------------------------------------------------------------------------------

const PASTE_ID = "paste-text";

function showPaste(app: App): void {
  openPaste(app);
  focusSoon(PASTE_ID);
}

function pasting(app: App, forms: Forms): TemplateResult {
  const { text, read } = app.state.takeoff.paste!;
  return html`<div class="pasting" role="group" aria-labelledby="paste-title" data-testid="pasting">
    <h3 id="paste-title">Rows from a spreadsheet</h3>
    <p class="help" id="paste-help">Copy the rows with their line of headings and paste them here. Nothing is added before you say so.</p>
    <textarea id=${PASTE_ID} class="line" rows="4" spellcheck="false" autocomplete="off" aria-labelledby="paste-title" aria-describedby="paste-help" .value=${live(text)} @input=${(event: InputEvent) => paste(app, (event.target as HTMLTextAreaElement).value)}></textarea>
    ${read === null ? nothing : preview(app, forms, read)}
    <div class="actions">
      ${read !== null && read.rows.length > 0 ? html`<button type="button" class="main" data-testid="take-pasted" @click=${() => takePasted(app)}>Add ${read.rows.length} ${read.rows.length === 1 ? "run" : "runs"}</button>` : nothing}
      ${filePicker("paste-file", "From a CSV file", ".csv,.tsv,.txt,text/csv,text/plain", (file) => void pasteFile(app, file))}
      <button type="button" data-testid="drop-paste" @click=${() => dropPaste(app)}>Leave it</button>
    </div>
  </div>`;
}

const DECIMAL_WORDS: Record<string, string> = { comma: "Decimal comma", point: "Decimal point", mixed: "Commas and points both" };

/** How each column was understood; any of them can be set right. */
function preview(app: App, forms: Forms, read: Pasted): TemplateResult {
  const fields = groupOf(forms, "run").fields;
  return html`<div data-testid="paste-read">
    <p class="paste-facts" role="status"><b>${read.text}</b> Cells split by ${read.separator}. ${DECIMAL_WORDS[read.decimal] ?? read.decimal}. ${read.has_header ? "The first line is headings." : "No line of headings."}</p>
    ${notes(read.issues.map((issue) => ({ severity: issue.severity, text: issue.message })))}
    <div class="table-wrap" role="region" tabindex="0" aria-label="How the columns were understood">
      <table>
        <thead><tr><th scope="col">Column</th><th scope="col">Taken as</th><th scope="col">First cells</th></tr></thead>
        <tbody>
          ${read.columns.map(
            (column) => html`<tr class=${column.field === null ? "is-aside" : ""}>
              <th scope="row">${column.header || `Column ${column.index + 1}`}</th>
              <td>
                <select class="line" aria-label="${column.header || `Column ${column.index + 1}`} taken as" data-testid="column-${column.index}" .value=${live(column.field ?? "")} @change=${(event: Event) => setColumn(app, column.index, (event.target as HTMLSelectElement).value || null)}>
                  <option value="" ?selected=${column.field === null}>Left aside</option>
                  ${fields.map((spec) => html`<option value=${spec.key} ?selected=${spec.key === column.field}>${spec.label}</option>`)}
                </select>
                ${column.text !== column.label && column.field !== null ? html`<span class="detail">${column.text}</span>` : nothing}
              </td>
              <td>${column.samples.join(" · ")}</td>
            </tr>`,
          )}
        </tbody>
      </table>
    </div>
  </div>`;
}
