// The cure clock: when each run sealed is through, on one line with the weather; the runs and the weather beside it.

import { html, nothing, type TemplateResult } from "lit";
import { repeat } from "lit/directives/repeat.js";
import type { App } from "../app/app";
import type { Answer, CureAnswer, CureDrawing, CureRun, Forms, Row } from "../app/contract";
import { addRow, appendCopy, choose, duplicateRow, newId, removeRow } from "../app/editing";
import { blankRow, groupOf, systemOf, valueAt, type Section } from "../app/fields";
import { exportFile, type ExportKind } from "../app/files";
import { today } from "../app/jobs";
import { get, getRow, getRows, rowNameOf } from "../app/pointer";
import { reveal } from "../app/takeoff";
import { bands, cautions, notes, staleNote, tableDrawers, waiting, workingPart } from "./answers";
import { drawingOf } from "./drawing";
import { fieldId } from "./field";
import { focusSoon, jumpTo } from "./focus";
import { disclosure, form, openParts } from "./form";
import { issueList } from "./issues";
import { rowList, type RowList } from "./rows";
import { titleStrip } from "./title_block";

/** The core's note that the section is not solved yet. */
const ESTIMATE = "no-numpy";

const ADD_WORDS: Readonly<Record<string, string>> = { sealed: "Add a run", cut: "Add a cut test", two_part: "Add two-part figures" };

const ZONE = "/cure/zone";

const EXPORTS: readonly { kind: ExportKind; word: string }[] = [
  { kind: "calendar", word: "Calendar file" },
  { kind: "cure-sheet", word: "Cure sheet" },
];

export function curePage(app: App, forms: Forms): TemplateResult {
  const answer = app.state.result?.evaluation.cure ?? {};
  return html`<div class="page two is-cure">
    <div class="sheet">
      ${titleStrip(app)} ${head(app, forms, answer)} ${issueList(app, (issue) => issue.path.startsWith("/cure/"))}
      ${getRows(app.job, "/cure/sealed").length === 0 ? nothingYet(forms) : nothing} ${isFull(answer) ? answersOf(app, forms, answer) : nothing}
    </div>
    ${inputs(app, forms, answer)}
  </div>`;
}

/** Another page asks for no cure, and its answer may still be here. */
function isFull(answer: CureAnswer): boolean {
  return answer.short === false;
}

function head(app: App, forms: Forms, answer: CureAnswer): TemplateResult {
  const hasRuns = isFull(answer) && Object.keys(answer.runs ?? {}).length > 0;
  const isMissing = (app.state.result === null || answer.short === true) && app.state.coreFault === null;
  return html`<header class="joint-head">
    <h1 tabindex="-1">${groupOf(forms, "cure").label}</h1>
    <div class="actions">
      <button type="button" class="only-narrow" @click=${() => jumpTo("sealed-title")}>To the fields</button>
      ${hasRuns
        ? html`${EXPORTS.map(({ kind, word }) => html`<button type="button" data-testid="export-${kind}" @click=${() => void exportFile(app, kind, "save")}>${word}</button>`)}
            <button type="button" data-testid="print" @click=${() => window.print()}>Print</button>`
        : nothing}
    </div>
    ${isMissing || app.state.coreFault !== null ? waiting(app) : nothing} ${estimate(app, answer)} ${app.state.isStale && isFull(answer) ? staleNote() : nothing}
  </header>`;
}

/** Until numpy is there the answers are of the throat alone: said once at the top, in the core's words. */
function estimate(app: App, answer: CureAnswer): TemplateResult | typeof nothing {
  const said = Object.values(answer.runs ?? {})
    .flatMap((run) => run.notes ?? [])
    .find((note) => note.key === ESTIMATE);
  if (said === undefined) return nothing;
  const isBusy = app.state.core.numpy !== "failed";
  return html`<p class="stale" data-testid="estimate" aria-busy=${isBusy ? "true" : "false"}>${said.text}</p>`;
}

function nothingYet(forms: Forms): TemplateResult {
  const word = (key: string): string => groupOf(forms, key).label;
  return html`<ol class="first-steps" data-testid="no-runs">
    <li><button type="button" class="plain" @click=${() => jumpTo("sealed-title")}>${word("sealed")}: say which joint, and when</button></li>
    <li><button type="button" class="plain" @click=${() => jumpTo("weather-title")}>${word("weather")}: a row for each day, or paste them</button></li>
    <li><button type="button" class="plain" @click=${() => jumpTo("room-title")}>${word("room")}: for what comes off indoors</button></li>
  </ol>`;
}

function answersOf(app: App, forms: Forms, answer: CureAnswer): TemplateResult {
  const runs = Object.values(answer.runs ?? {});
  const room = answer.room ?? null;
  return html`
    ${answered(answer, true)} ${notes(answer.notes ?? [])} ${drawings(answer.drawings ?? [])}
    ${drawers(tableDrawers(app, answer.tables ?? [], "cure"))}
    ${runs.map((run) => runPart(app, run))}
    ${room === null
      ? nothing
      : html`<section class="part" aria-labelledby="room-answer-title" data-testid="cure-room">
          <h2 id="room-answer-title">${valueOr(getRow(app.job, "/cure/room")["name"], groupOf(forms, "room").label)}</h2>
          ${room.trouble ? html`<p class="waiting">${textOf(room.trouble)}</p>` : nothing} ${answered(room)}
          ${notes(room.notes ?? [])} ${drawings(room.drawings ?? [])}
          ${drawers([...tableDrawers(app, room.tables ?? [], "room"), workingPart(app, room.steps ?? [], "working room", groupOf(forms, "room").label)])}
        </section>`}
    ${care(app, runs)}
  `;
}

function runPart(app: App, run: CureRun): TemplateResult {
  const title = `run-${run.id}`;
  return html`<section class="part" aria-labelledby=${title} data-testid="cure-run-${run.id}" data-method=${run.section?.method ?? nothing}>
    <h2 id=${title}>${run.name}</h2>
    ${run.start_text ? html`<p class="detail">${run.start_text}</p>` : nothing}
    ${run.trouble ? html`<p class="waiting" data-testid="trouble">${textOf(run.trouble)}</p>` : nothing} ${answered(run)}
    ${notes(run.notes ?? [])} ${drawings(run.drawings ?? [])}
    ${drawers([...tableDrawers(app, run.tables ?? [], run.id), record(app, run), workingPart(app, run.steps ?? [], `working ${run.id}`, run.name)])}
  </section>`;
}

/** What was written down when it was sealed; a run that nothing is known of has no record to show. */
function record(app: App, run: CureRun): TemplateResult | typeof nothing {
  const filled = (run.record ?? []).filter((line) => line.value !== "");
  if (run.trouble || filled.length === 0) return nothing;
  const lines = (): TemplateResult => html`<dl class="values">${filled.map((line) => html`<div><dt>${line.label}</dt><dd>${line.value}</dd></div>`)}</dl>`;
  return html`<section class="drawer">${disclosure(app, `record ${run.id}`, "Sealing record", lines, false, true)}</section>`;
}

function answered(part: { answers?: Answer[] }, isTop = false): TemplateResult | typeof nothing {
  const items = part.answers ?? [];
  if (items.length === 0) return nothing;
  return html`${isTop ? html`<h2 class="hidden-word">Answers</h2>` : nothing}${bands(items)}`;
}

function drawers(items: (TemplateResult | typeof nothing)[]): TemplateResult | typeof nothing {
  return items.some((item) => item !== nothing) ? html`<div class="drawers">${items}</div>` : nothing;
}

/** A drawing wider than this keeps its size on a small page, and moves by itself. */
const WIDE = 700;

/** Each drawing has its caption; the tables beside it say the same in words. */
function drawings(items: CureDrawing[]): TemplateResult[] {
  return items.map((item) => {
    const drawing = drawingOf(item.svg);
    const isWide = (drawing?.viewBox.baseVal.width ?? 0) > WIDE;
    return html`<figure class="cure-drawing is-${item.key} ${isWide ? "is-wide" : ""}" data-testid="drawing-${item.key}">
      <figcaption class=${isTitled(drawing, item.title) ? "hidden-word" : ""}>${item.title}</figcaption>
      ${drawing === null ? nothing : html`<div class="drawing" role=${isWide ? "region" : nothing} tabindex=${isWide ? "0" : nothing} aria-label=${isWide ? item.title : nothing}>${drawing}</div>`}
    </figure>`;
  });
}

/** Whether the drawing bears its caption in itself. */
function isTitled(drawing: SVGSVGElement | null, title: string): boolean {
  return drawing?.querySelector("title")?.textContent === title;
}

/** What stops or warns about the joints sealed; their plain notes stand on the pages of the joints. */
function care(app: App, runs: CureRun[]): TemplateResult | typeof nothing {
  const sealed = new Set(runs.map((run) => run.joint));
  const own = (app.state.result?.evaluation.cautions ?? []).filter((item) => item.severity !== "note" && item.joints?.some((id) => sealed.has(id)));
  if (own.length === 0) return nothing;
  return html`<section class="part" aria-labelledby="cautions-title">
    <h2 id="cautions-title">Take care</h2>
    ${cautions(app, own, true)}
  </section>`;
}

function textOf(trouble: string | { text: string }): string {
  return typeof trouble === "string" ? trouble : trouble.text;
}

function valueOr(value: unknown, other: string): string {
  return typeof value === "string" && value.trim() !== "" ? value : other;
}

// ---- the fields ----------------------------------------------------------------------------------

/** The days may also be typed as text; that field stands with the rows that it adds to. */
const isWeather = (section: Section): boolean => section.title === "Weather";

function inputs(app: App, forms: Forms, answer: CureAnswer): TemplateResult {
  const cure = groupOf(forms, "cure");
  const label = (key: string): string => groupOf(forms, key).label;
  return html`<div class="inputs" role="region" aria-label="What is known of the cure" tabindex="-1">
    <section aria-labelledby="sealed-title" data-group="sealed">
      <h2 id="sealed-title" tabindex="-1" class="inputs-title">${label("sealed")}</h2>
      ${rowsOf(app, forms, "sealed", { name: (row, index) => runName(row, index, label("sealed"), answer), add: () => addRun(app, forms), copy: (index, name) => void duplicateRow(app, "/cure/sealed", index, `Copied ${name}`) })}
    </section>
    <section aria-labelledby="weather-title" data-group="weather">
      <h2 id="weather-title" tabindex="-1" class="inputs-title">${label("weather")}</h2>
      ${days(app, forms)}
      ${form(app, forms, { ...cure, label: "Weather" }, "/cure", { only: isWeather })}
    </section>
    <section aria-labelledby="room-title" data-group="room">
      <h2 id="room-title" tabindex="-1" class="inputs-title">${label("room")}</h2>
      ${form(app, forms, groupOf(forms, "room"), "/cure/room")}
    </section>
    <section aria-labelledby="settings-title" data-group="cure">
      <h2 id="settings-title" tabindex="-1" class="inputs-title">Settings</h2>
      ${form(app, forms, cure, "/cure", { only: (section) => !isWeather(section) })} ${zoneOffer(app, forms)}
    </section>
    ${(["cut", "two_part"] as const).map(
      (key) => html`<section aria-labelledby="${key}-title" data-group=${key}>
        <h2 id="${key}-title" tabindex="-1" class="inputs-title">${label(key)}</h2>
        ${rowsOf(app, forms, key, { name: (row, index) => sealantName(app, row) ?? `${label(key)} ${index + 1}`, add: () => addPlain(app, forms, key), copy: (index, name) => void duplicateRow(app, listOf(forms, key), index, `Copied ${name}`) })}
      </section>`,
    )}
  </div>`;
}

/** The zone that this tablet keeps, for a job that names none: with it the hours stay right when the clocks change. */
function zoneOffer(app: App, forms: Forms): TemplateResult | typeof nothing {
  const zone = Intl.DateTimeFormat().resolvedOptions().timeZone;
  if (!zone || app.open.readOnly !== null || valueAt(app.job, ZONE) !== "") return nothing;
  const label = groupOf(forms, "cure").fields.find((spec) => spec.key === "zone")?.label ?? "";
  return html`<div class="actions"><button type="button" data-testid="take-zone" @click=${() => choose(app, ZONE, zone, label)}>${label} of this tablet: ${zone}</button></div>`;
}

interface RowWays {
  name: (row: Row, index: number) => string | TemplateResult;
  add: () => void;
  copy: (index: number, name: string) => void;
}

/** The list that a group of rows stands in: `cure.sealed[]` -> `/cure/sealed`. */
function listOf(forms: Forms, key: string): string {
  return `/${groupOf(forms, key).path.replace("[]", "").replaceAll(".", "/")}`;
}

/** Rows behind their names, each with its fields when it is opened. */
function rowsOf(app: App, forms: Forms, key: string, ways: RowWays): TemplateResult {
  const group = groupOf(forms, key);
  const list = listOf(forms, key);
  const mayEdit = app.open.readOnly === null;
  const issues = app.state.result?.evaluation.issues ?? [];
  return html`<div class="row-drawers is-${key}">
      ${repeat(
        getRows(app.job, list),
        (row, index) => String(row["id"] ?? index),
        (row, index) => {
          const base = `${list}/${index}`;
          const isFaulty = issues.some((issue) => issue.severity === "error" && issue.path.startsWith(`${base}/`));
          const spoken = rowNameOf(row, group.label, index);
          return html`<div data-testid="${key}-${index}">
            ${disclosure(
              app,
              partOf(list, row, index),
              html`${ways.name(row, index)}${isFaulty ? html` <span class="count">to fix</span>` : nothing}`,
              () => html`${form(app, forms, group, base)}
                ${mayEdit
                  ? html`<div class="actions">
                      <button type="button" data-testid="copy-${key}-${index}" @click=${() => ways.copy(index, spoken)}>Copy</button>
                      <button type="button" data-testid="remove-${key}-${index}" @click=${() => removeRow(app, list, index, `Removed ${spoken}`)}>Remove</button>
                    </div>`
                  : nothing}`,
            )}
          </div>`;
        },
      )}
    </div>
    ${mayEdit ? html`<div class="actions"><button type="button" data-testid="add-${key}" @click=${ways.add}>${ADD_WORDS[key] ?? "Add"}</button></div>` : nothing}`;
}

/** Name of the drawer of a row, as a fault that is jumped to opens it (see ui/rows.ts). */
function partOf(list: string, row: Row, index: number): string {
  return `row ${list} ${String(row["id"] ?? index)}`;
}

function runName(row: Row, index: number, word: string, answer: CureAnswer): TemplateResult {
  const through = answer.runs?.[String(row["id"])]?.headline?.through;
  return html`<span class="row-name">${rowNameOf(row, word, index)}</span>${through ? html`<span class="row-sub">${through}</span>` : nothing}`;
}

const DAYS: RowList = { group: "weather", list: "/cure/weather", word: "Day", columns: [["day"], ["least"], ["most"], ["humidity"]] };

/** The days stand one to a line, since a forecast is typed row by row. */
function days(app: App, forms: Forms): TemplateResult {
  const rows = getRows(app.job, DAYS.list);
  return html`${rowList(app, forms, DAYS)}
  ${app.open.readOnly === null
    ? html`<div class="actions">
        <button type="button" data-testid="add-weather" @click=${() => addDay(app, forms)}>Add a day</button>
        ${rows.length > 0 ? html`<button type="button" data-testid="copy-weather" @click=${() => copyDay(app, rows.length - 1)}>Copy the last day</button>` : nothing}
      </div>`
    : nothing}`;
}

function sealantName(app: App, row: Row): string | null {
  const rows = getRows(app.job, "/sealants");
  const index = rows.findIndex((sealant) => sealant["id"] === row["sealant"]);
  return index < 0 ? null : rowNameOf(rows[index]!, "Sealant", index);
}

function addRun(app: App, forms: Forms): void {
  const joints = getRows(app.job, "/joints");
  const only = joints.length === 1 ? { joint: joints[0]!["id"] } : {};
  const name = `${groupOf(forms, "sealed").label} ${getRows(app.job, "/cure/sealed").length + 1}`;
  addTo(app, forms, "sealed", { name, ...only }, "name");
}

function addDay(app: App, forms: Forms): void {
  addRow(app, DAYS.list, { id: newId(), ...blankRow(forms, "weather", systemOf(app.job)), day: nextDay(app) }, "Added a day");
  goToLastDay(app);
}

/** A like day after the last one, as a forecast is typed. */
function copyDay(app: App, index: number): void {
  appendCopy(app, DAYS.list, index, { day: nextDay(app) }, "Copied a day");
  goToLastDay(app);
}

function goToLastDay(app: App): void {
  const at = getRows(app.job, DAYS.list).length - 1;
  reveal(app, DAYS.list, at);
  focusSoon(`cell-cure-weather-${at}-least`);
}

function addPlain(app: App, forms: Forms, key: string): void {
  addTo(app, forms, key, {}, "sealant");
}

function addTo(app: App, forms: Forms, key: string, more: Row, first: string): void {
  const list = listOf(forms, key);
  addRow(app, list, { id: newId(), ...blankRow(forms, key, systemOf(app.job)), ...more }, `Added: ${groupOf(forms, key).label.toLowerCase()}`);
  openLast(app, list, first);
}

function openLast(app: App, list: string, first: string): void {
  const at = getRows(app.job, list).length - 1;
  openParts(app, [partOf(list, getRow(app.job, `${list}/${at}`), at)]);
  focusSoon(fieldId(`${list}/${at}/${first}`));
}

function nextDay(app: App): string {
  const last = getRows(app.job, "/cure/weather").at(-1);
  const typed = String(get(last, "/day") ?? "");
  const day = new Date(`${typed}T00:00:00Z`);
  if (Number.isNaN(day.getTime())) return today();
  day.setUTCDate(day.getUTCDate() + 1);
  return day.toISOString().slice(0, 10);
}
