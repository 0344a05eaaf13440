// One joint: its section at true proportion, which moves with the temperature; the answers; the fields beside them.

import { html, nothing, type TemplateResult } from "lit";
import { repeat } from "lit/directives/repeat.js";
import { live } from "lit/directives/live.js";
import type { App } from "../app/app";
import type { Forms, Frame, JointAnswer, Row } from "../app/contract";
import { addRow, changeJob, newId, removeRow } from "../app/editing";
import { blankRow, groupOf, systemOf } from "../app/fields";
import { getRow, getRows, rowNameOf } from "../app/pointer";
import { href } from "../app/routes";
import { bands, cautionsPart, notes, tableDrawers, verdict, verdictOf, waiting, workingPart } from "./answers";
import { drawingOf } from "./drawing";
import { fieldId } from "./field";
import { focusSoon, jumpTo } from "./focus";
import { form } from "./form";
import { issueList } from "./issues";
import { photosPart } from "./photos";
import { titleStrip } from "./title_block";

export function jointPage(app: App, forms: Forms, id: string): TemplateResult {
  const rows = getRows(app.job, "/joints");
  const index = rows.findIndex((row) => row["id"] === id);
  if (index < 0) return gone(app);
  const base = `/joints/${index}`;
  const row = rows[index]!;
  const answer = app.state.result?.evaluation.joints[id] ?? null;
  return html`<div class="page two is-joint">
    <div class="sheet">
      ${titleStrip(app)} ${jointHead(app, row, index, rows.length, answer)}
      ${issueList(app, (issue) => issue.path.startsWith(`${base}/`) && !issue.path.startsWith(`${base}/face`))}
      ${section(app, id, answer)} ${answer === null ? nothing : answersOf(app, answer, id)}
      ${photosPart(app, row, index)}
      ${app.state.coreFault !== null && answer !== null ? waiting(app) : nothing}
    </div>
    ${inputs(app, forms, base, row)}
  </div>`;
}

export function gone(app: App): TemplateResult {
  return html`<section class="page">
    <h1 tabindex="-1">No such joint</h1>
    <p>It is no longer part of this job. Undo brings it back if you have just removed it.</p>
    <p><a class="button" href=${href({ page: "wall", job: app.open.id })}>Back to the wall</a></p>
  </section>`;
}

function jointHead(app: App, row: Row, index: number, total: number, answer: JointAnswer | null): TemplateResult {
  const place = typeof row["place"] === "string" && row["place"] !== "" ? row["place"] : null;
  const rows = getRows(app.job, "/joints");
  const beside = (by: -1 | 1, word: string): TemplateResult | typeof nothing => {
    const other = rows[index + by];
    return other === undefined ? nothing : html`<a class="button" href=${href({ page: "joint", job: app.open.id, joint: String(other["id"]) })}>${word}</a>`;
  };
  return html`<header class="joint-head">
    <div>
      <p class="title-label">Joint ${index + 1} of ${total}${place ? html` · ${place}` : nothing}</p>
      <h1 tabindex="-1">${rowNameOf(row, "Joint", index)}</h1>
    </div>
    <div class="actions">
      <button type="button" class="only-narrow" @click=${() => jumpTo("joint-title")}>To the fields</button>
      ${beside(-1, "Previous")} ${beside(1, "Next")}
      <a class="button main" data-testid="to-face" href=${href({ page: "face", job: app.open.id, joint: String(row["id"]) })}>At the face</a>
    </div>
    ${answer === null ? waiting(app) : verdict(verdictOf(answer), app.state.isStale)}
  </header>`;
}

/** The drawing and its scrubber. With frames from the core the joint opens and closes; without, it stands still. */
function section(app: App, id: string, answer: JointAnswer | null): TemplateResult | typeof nothing {
  const frames = app.state.frames?.jointId === id ? app.state.frames.data : null;
  const hasFrames = frames !== null && frames.frames.length > 0;
  const at = hasFrames ? Math.min(app.state.frameIndex ?? frames.start, frames.frames.length - 1) : 0;
  const frame = hasFrames ? frames.frames[at]! : null;
  const drawing = drawingOf(frame?.drawing ?? answer?.drawing ?? "");
  if (drawing === null) return nothing;
  return html`<figure class="section-drawing" data-testid="section">
    <div class="drawing" data-testid="drawing" role="img" aria-label=${drawingWords(answer, frame)}>${drawing}</div>
    ${frame !== null && frames !== null ? scrubber(app, frames.frames, at, frames.start) : nothing}
    ${frames?.caption ? html`<figcaption>${frames.caption}</figcaption>` : nothing}
  </figure>`;
}

function drawingWords(answer: JointAnswer | null, frame: Frame | null): string {
  const parts = [`Section of ${answer?.name ?? "the joint"}`];
  if (frame !== null) parts.push(frame.title, ...frame.lines.map((line) => `${line.label} ${line.value}`));
  return parts.join(", ");
}

function scrubber(app: App, frames: Frame[], at: number, start: number): TemplateResult {
  const frame = frames[at]!;
  const move = (to: number): void => app.update({ frameIndex: Math.max(0, Math.min(frames.length - 1, to)) });
  const words = [frame.title, ...frame.lines.map((line) => `${line.label} ${line.value}`)].join(", ");
  return html`<div class="scrubber">
    <div class="scrub-line">
      <button type="button" ?disabled=${at === 0} @click=${() => move(at - 1)}>Colder</button>
      <input
        type="range"
        data-testid="scrubber"
        aria-label="Temperature, coldest to hottest"
        aria-valuetext=${words}
        min="0"
        max=${frames.length - 1}
        step="1"
        .value=${live(String(at))}
        @input=${(event: Event) => move(Number((event.target as HTMLInputElement).value))}
      />
      <button type="button" ?disabled=${at === frames.length - 1} @click=${() => move(at + 1)}>Hotter</button>
    </div>
    <div class="scrub-reads" data-testid="frame">
      <p class="frame-title" data-testid="frame-title">${frame.title}</p>
      <dl>
        ${frame.lines.map((line) => html`<div><dt>${line.label}</dt><dd>${line.value}</dd></div>`)}
      </dl>
      ${at === start ? nothing : html`<button type="button" class="plain" @click=${() => app.update({ frameIndex: null })}>Back to the start</button>`}
    </div>
  </div>`;
}

function answersOf(app: App, answer: JointAnswer, id: string): TemplateResult {
  const own = (app.state.result?.evaluation.cautions ?? []).filter((item) => answer.cautions?.includes(item.id));
  return html`
    ${answer.answers && answer.answers.length > 0 ? html`<section aria-labelledby="answers-title" class=${app.state.isStale ? "is-stale" : ""}>
          <h2 id="answers-title" class="hidden-word">Answers</h2>
          ${bands(answer.answers)}
        </section>` : nothing}
    ${notes(answer.notes ?? [])}
    ${own.length > 0 ? html`<section class="part" aria-labelledby="own-cautions"><h2 id="own-cautions">Take care</h2>${cautionsPart(app, own, id, false)}</section>` : nothing}
    ${(answer.tables ?? []).length + (answer.steps ?? []).length > 0
      ? html`<div class="drawers">${tableDrawers(app, answer.tables ?? [], id)} ${workingPart(app, answer.steps ?? [], `working ${id}`)}</div>`
      : nothing}
    <div class="actions">
      <a class="button" href=${href({ page: "sheet", job: app.open.id, joint: id })}>Sheet of this joint</a>
    </div>
  `;
}

function inputs(app: App, forms: Forms, base: string, row: Row): TemplateResult {
  const joint = groupOf(forms, "joint");
  const side = groupOf(forms, "side");
  return html`<div class="inputs" role="region" aria-label="What is known of the joint" tabindex="-1">
    <section aria-labelledby="joint-title" data-group="joint">
      <h2 id="joint-title" tabindex="-1" class="inputs-title">${joint.label}</h2>
      ${form(app, forms, joint, base, { only: (_, at) => at === 0 })}
    </section>
    <div class="sides">
      <section aria-labelledby="side-a-title" data-group="side_a">
        <h2 id="side-a-title" class="inputs-title">${side.label} A</h2>
        ${form(app, forms, side, `${base}/side_a`)}
      </section>
      <section aria-labelledby="side-b-title" data-group="side_b">
        <div class="inputs-head">
          <h2 id="side-b-title" class="inputs-title">${side.label} B</h2>
          ${app.open.readOnly === null ? html`<button type="button" class="plain" data-testid="same-sides" @click=${() => sameSides(app, base)}>Same as A</button>` : nothing}
        </div>
        ${form(app, forms, side, `${base}/side_b`)}
      </section>
    </div>
    ${causes(app, forms, base, row)}
    <section aria-label="Further fields of the joint" data-group="joint">${form(app, forms, joint, base, { only: (_, at) => at > 0 })}</section>
  </div>`;
}

function sameSides(app: App, base: string): void {
  changeJob(app, "Side B as side A", (job) => {
    const joints = getRows(job, "/joints");
    const index = Number(base.split("/")[2]);
    const joint = joints[index] ?? {};
    const changed = { ...joint, side_b: structuredClone(getRow(joint, "/side_a")) };
    return { ...job, joints: joints.map((item, at) => (at === index ? changed : item)) };
  });
}

function causes(app: App, forms: Forms, base: string, row: Row): TemplateResult {
  const group = groupOf(forms, "cause");
  const list = `${base}/causes`;
  const rows = getRows(row, "/causes");
  return html`<section aria-labelledby="causes-title" data-group="causes">
    <h2 id="causes-title" class="inputs-title">${group.label}</h2>
    ${repeat(
      rows,
      (cause, index) => String(cause["id"] ?? index),
      (cause, index) => {
        const name = rowNameOf(cause, "Cause", index);
        return html`<fieldset class="cause" data-testid="cause-${index}">
          <legend>${name}</legend>
          ${form(app, forms, group, `${list}/${index}`, { level: 4 })}
          ${app.open.readOnly === null
            ? html`<div class="actions"><button type="button" @click=${() => removeRow(app, list, index, `Removed ${name}`)}>Remove this cause</button></div>`
            : nothing}
        </fieldset>`;
      },
    )}
    ${app.open.readOnly === null
      ? html`<div class="actions">
          <button type="button" data-testid="add-cause" @click=${() => addCause(app, forms, list, rows.length)}>Add a cause</button>
        </div>`
      : nothing}
  </section>`;
}


function addCause(app: App, forms: Forms, list: string, index: number): void {
  addRow(app, list, { id: newId(), ...blankRow(forms, "cause", systemOf(app.job)) }, "Added a cause");
  focusSoon(fieldId(`${list}/${index}/label`));
}
