// The job: its joints as a schedule, what to beware of, and beside them the job's own fields.

import { html, nothing, type TemplateResult } from "lit";
import { repeat } from "lit/directives/repeat.js";
import type { App } from "../app/app";
import type { Forms, JointAnswer, Row } from "../app/contract";
import { addRow, changeJob, duplicateRow, moveRow, newId, removeRow } from "../app/editing";
import { blankRow, groupOf, systemOf } from "../app/fields";
import { backUp, exportFile } from "../app/files";
import { go } from "../app/jobs";
import { getRows, rowNameOf, split } from "../app/pointer";
import { href } from "../app/routes";
import { cautionsPart, smallVerdict, staleNote, waiting } from "./answers";
import { fieldId } from "./field";
import { focusSoon, jumpTo } from "./focus";
import { disclosure, form, openParts } from "./form";
import { issueList } from "./issues";
import { titleBlock } from "./title_block";

/** Name of the drawer with the job's own fields; a new job opens with it (see app/jobs.ts). */
const JOB_BLOCK = "job block";

export function wallPage(app: App, forms: Forms): TemplateResult {
  const joints = getRows(app.job, "/joints");
  const { result } = app.state;
  return html`<div class="page two">
    <div class="sheet">
      ${titleBlock(app, 1, "Job", facts(app))}
      ${issueList(app, (issue) => split(issue.path)[0] !== "joints")}
      <section aria-labelledby="joints-title" class="part first">
        <div class="part-head">
          <h2 id="joints-title">Joints</h2>
          ${joints.length > 0 && app.open.readOnly === null
            ? html`<button type="button" class="plain" aria-pressed=${app.state.isArranging ? "true" : "false"} data-testid="arrange" @click=${() => app.update({ isArranging: !app.state.isArranging })}>
                ${app.state.isArranging ? "Done arranging" : "Arrange"}
              </button>`
            : nothing}
        </div>
        ${joints.length === 0 ? nothingYet(app) : schedule(app, joints)} ${app.state.isStale ? staleNote() : nothing}
        ${result === null ? waiting(app) : app.state.coreFault !== null ? waiting(app) : nothing}
        <div class="actions">
          ${app.open.readOnly === null ? html`<button type="button" class="main" data-testid="add-joint" @click=${() => addJoint(app, forms)}>Add a joint</button>` : nothing}
          <a class="button" data-testid="to-takeoff" href=${href({ page: "takeoff", job: app.open.id })}>Take-off</a>
          <a class="button" data-testid="to-cure" href=${href({ page: "cure", job: app.open.id })}>Cure</a>
          <a class="button" href=${href({ page: "sheet", job: app.open.id, joint: null })}>Sheet to print</a>
          <button type="button" data-testid="export-job" @click=${() => void exportFile(app, "job", "save")}>Save job file</button>
          ${app.open.isLoose ? nothing : html`<button type="button" data-testid="export-with-photos" @click=${() => void backUp(app, "save", app.open.id)}>Save with photos</button>`}
          <a class="button" href=${href({ page: "history", job: app.open.id })}>Earlier copies</a>
        </div>
      </section>
      ${result && result.evaluation.cautions.length > 0
        ? html`<section class="part" aria-labelledby="cautions-title">
            <h2 id="cautions-title">Take care</h2>
            ${cautionsPart(app, result.evaluation.cautions, "of the job", true)}
          </section>`
        : nothing}
    </div>
    <div class="inputs" role="region" aria-label="Job, sealants and site" tabindex="-1">
      <section aria-label=${groupOf(forms, "job").label} class="job-block">${titleDrawer(app, forms)}</section>
      <section aria-labelledby="sealants-title">
        <h2 id="sealants-title" tabindex="-1" class="inputs-title">Sealants</h2>
        ${sealants(app, forms)}
      </section>
      <section aria-labelledby="site-title">
        <h2 id="site-title" tabindex="-1" class="inputs-title">${groupOf(forms, "site").label}</h2>
        ${form(app, forms, groupOf(forms, "site"), "/site")}
      </section>
    </div>
  </div>`;
}

/** Seldom touched once it is filled in, so it stands shut above the rest. */
function titleDrawer(app: App, forms: Forms): TemplateResult {
  const group = groupOf(forms, "job");
  return html`${disclosure(app, JOB_BLOCK, group.fields[0]?.section ?? group.label, () => form(app, forms, group, "", { level: 4 }))}`;
}

/** Settings that change how every verdict is to be read, shown where the job is named. */
function facts(app: App): TemplateResult | typeof nothing {
  const items = app.state.result?.evaluation.facts ?? [];
  if (items.length === 0) return nothing;
  return html`<p class="title-facts">${items.map((item, at) => html`${at > 0 ? " · " : ""}${item.label}: <b>${item.value}</b>`)}</p>`;
}

function nothingYet(app: App): TemplateResult {
  const hasSealant = getRows(app.job, "/sealants").length > 0;
  return html`<ol class="first-steps" data-testid="no-joints">
    <li><button type="button" class="plain" @click=${() => jumpTo("sealants-title")}>${hasSealant ? "Sealant named; add another if the job has two" : "Name the sealant and its movement class"}</button></li>
    <li><button type="button" class="plain" @click=${() => jumpTo("site-title")}>Give the site its warm and cold design air</button></li>
    <li>Add a joint, and say what stands on either side</li>
  </ol>`;
}

function schedule(app: App, joints: Row[]): TemplateResult {
  const answers = app.state.result?.evaluation.joints ?? {};
  return html`<table class="schedule joints ${app.state.isArranging ? "is-arranging" : ""}">
    <caption class="hidden-word">Joints of this job</caption>
    <thead>
      <tr>
        <th scope="col"><span class="hidden-word">Number</span></th>
        <th scope="col">Joint</th>
        <th scope="col">Verdict</th>
        ${app.state.isArranging
          ? html`<th scope="col">Arrange</th>`
          : html`<th scope="col" class="right">Width</th><th scope="col" class="right">Depth</th><th scope="col" class="right">Rod</th>`}
      </tr>
    </thead>
    <tbody>
      ${repeat(
        joints,
        (joint, index) => String(joint["id"] ?? index),
        (joint, index) => row(app, joint, index, answers[String(joint["id"])], joints.length),
      )}
    </tbody>
  </table>`;
}

function row(app: App, joint: Row, index: number, answer: JointAnswer | undefined, total: number): TemplateResult {
  const id = String(joint["id"] ?? "");
  const name = rowNameOf(joint, "Joint", index);
  const place = typeof joint["place"] === "string" ? joint["place"] : "";
  return html`<tr data-testid="joint-row-${id}">
    <td class="num mark-no">${index + 1}</td>
    <th scope="row">
      <a class="row-link" href=${href({ page: "joint", job: app.open.id, joint: id })}>
        <span class="row-name">${name}</span> <span class="row-sub">${[kindWord(app, joint), place].filter(Boolean).join(" · ")}</span>
      </a>
    </th>
    <td>${answer ? smallVerdict(answer.verdict, answer.verdict_word) : html`<span class="row-sub">not worked yet</span>`}</td>
    ${app.state.isArranging ? html`<td class="row-actions">${arrange(app, index, name, total)}</td>` : headline(answer)}
  </tr>`;
}

function kindWord(app: App, joint: Row): string {
  const spec = app.state.forms === null ? undefined : groupOf(app.state.forms, "joint").fields.find((field) => field.key === "kind");
  return spec?.choices?.find((choice) => choice.value === (joint["kind"] ?? spec.default))?.label ?? "";
}

function headline(answer: JointAnswer | undefined): TemplateResult {
  const line = answer?.headline;
  return html`<td class="num" data-label="Width">${line?.width ?? "—"}</td>
    <td class="num" data-label="Depth">${line?.depth ?? "—"}</td>
    <td class="num" data-label="Rod">${line?.rod ?? "—"}</td>`;
}

function arrange(app: App, index: number, name: string, total: number): TemplateResult {
  const button = (word: string, about: string, isOff: boolean, act: () => void): TemplateResult =>
    html`<button type="button" ?disabled=${isOff} aria-label="${about} ${name}" @click=${act}>${word}</button>`;
  return html`${button("Up", "Move up", index === 0, () => moveRow(app, "/joints", index, -1, `Moved ${name}`))}
  ${button("Down", "Move down", index === total - 1, () => moveRow(app, "/joints", index, 1, `Moved ${name}`))}
  ${button("Copy", "Make a copy of", false, () => void duplicateRow(app, "/joints", index, `Copied ${name}`))}
  ${button("Remove", "Remove", false, () => removeRow(app, "/joints", index, `Removed ${name}`))}`;
}

function addJoint(app: App, forms: Forms): void {
  const system = systemOf(app.job);
  const id = newId();
  const side = (): Row => blankRow(forms, "side", system);
  const sealantRows = getRows(app.job, "/sealants");
  const only = sealantRows.length === 1 ? { sealant: sealantRows[0]!["id"] } : {};
  const name = `Joint ${getRows(app.job, "/joints").length + 1}`;
  addRow(app, "/joints", { id, ...blankRow(forms, "joint", system), name, ...only, side_a: side(), side_b: side(), causes: [], face: {} }, "Added a joint");
  go({ page: "joint", job: app.open.id, joint: id });
}

function sealants(app: App, forms: Forms): TemplateResult {
  const rows = getRows(app.job, "/sealants");
  const group = groupOf(forms, "sealant");
  return html`${rows.length === 0 ? html`<p class="help">No sealant yet.</p>` : nothing}
  ${repeat(
    rows,
    (sealant, index) => String(sealant["id"] ?? index),
    (sealant, index) => {
      const name = rowNameOf(sealant, "Sealant", index);
      const base = `/sealants/${index}`;
      const isFaulty = app.state.result?.evaluation.issues.some((issue) => issue.severity === "error" && issue.path.startsWith(`${base}/`)) ?? false;
      return html`<div data-testid="sealant-${index}">
        ${disclosure(
          app,
          `sealant ${index}`,
          html`${name}${isFaulty ? html` <span class="count">to fix</span>` : nothing}`,
          () => html`${form(app, forms, group, base, { level: 4 })}
            ${app.open.readOnly === null
              ? html`<div class="actions"><button type="button" @click=${() => removeSealant(app, index, name)}>Remove this sealant</button></div>`
              : nothing}`,
        )}
      </div>`;
    },
  )}
  ${app.open.readOnly === null
    ? html`<div class="actions"><button type="button" data-testid="add-sealant" @click=${() => addSealant(app, forms)}>Add a sealant</button></div>`
    : nothing}`;
}

function addSealant(app: App, forms: Forms): void {
  const index = getRows(app.job, "/sealants").length;
  const row = { id: newId(), ...blankRow(forms, "sealant", systemOf(app.job)), name: `Sealant ${index + 1}` };
  changeJob(app, "Added a sealant", (job) => ({ ...job, sealants: [...getRows(job, "/sealants"), row] }));
  openParts(app, [`sealant ${index}`]);
  focusSoon(fieldId(`/sealants/${index}/name`));
}

function removeSealant(app: App, index: number, name: string): void {
  removeRow(app, "/sealants", index, `Removed ${name}`);
}
