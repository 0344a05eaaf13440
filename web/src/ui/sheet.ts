// The sheet: all that the job says, set out for paper. Printing prints this page.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { FieldGroup, Forms, JointAnswer, Row } from "../app/contract";
import { choicesOf, groupOf, shows, systemOf, tellingReading, unitsOf } from "../app/fields";
import { canShareFiles, exportFile, type ExportKind } from "../app/files";
import { photoIds } from "../app/photos";
import { getRow, getRows, join, rowNameOf } from "../app/pointer";
import { href } from "../app/routes";
import { bands, cautions, notes, smallVerdict, table, verdict, verdictOf, waiting, working } from "./answers";
import { drawingOf } from "./drawing";
import { lettered } from "./letters";
import { photos } from "./photos";
import { titleBlock, titleStrip } from "./title_block";
import { checks } from "./face";

const EXPORTS: readonly { kind: ExportKind; word: string }[] = [
  { kind: "job", word: "Job file" },
  { kind: "sheet", word: "Sheet as a web page" },
  { kind: "text", word: "Sheet as text" },
  { kind: "schedule", word: "Schedule as CSV" },
];

export function sheetPage(app: App, forms: Forms, only: string | null): TemplateResult {
  const joints = getRows(app.job, "/joints");
  const answers = app.state.result?.evaluation.joints ?? {};
  const shown = joints.map((row, index) => ({ row, index, id: String(row["id"] ?? "") })).filter(({ id }) => only === null || id === only);
  const all = app.state.result?.evaluation.cautions ?? [];
  const own = only === null ? all : all.filter((item) => answers[only]?.cautions?.includes(item.id));
  return html`<div class="page is-sheet">
    ${tools(app, only)}
    <article class="paper" data-testid="sheet">
      ${titleBlock(app, 1, only === null ? "Joint sheet" : "Sheet of one joint")}
      <section class="part first">
        <h2>${groupOf(forms, "site").label}</h2>
        ${values(app, forms, groupOf(forms, "site"), "/site")}
      </section>
      ${getRows(app.job, "/sealants").map(
        (row, index) => html`<section class="part"><h2>${rowNameOf(row, "Sealant", index)}</h2>${values(app, forms, groupOf(forms, "sealant"), `/sealants/${index}`)}</section>`,
      )}
      ${app.state.result === null ? waiting(app) : only === null && joints.length > 0 ? overview(joints, answers) : nothing}
      ${shown.map(({ row, index, id }) => jointSheet(app, forms, row, index, answers[id]))}
      ${own.length > 0 ? html`<section class="part"><h2>Take care</h2>${cautions(app, own, true)}</section>` : nothing} ${signature(app)}
    </article>
  </div>`;
}

function tools(app: App, only: string | null): TemplateResult {
  const canShare = canShareFiles();
  return html`<div class="sheet-tools">
    <div class="actions">
      <button type="button" class="main" data-testid="print" @click=${() => window.print()}>Print</button>
      ${only !== null ? html`<a class="button" href=${href({ page: "sheet", job: app.open.id, joint: null })}>Whole job</a>` : nothing}
      ${EXPORTS.map(
        ({ kind, word }) => html`<button type="button" data-testid="export-${kind}" @click=${() => void exportFile(app, kind, "save")}>${word}</button>`,
      )}
      ${canShare ? html`<button type="button" data-testid="share" @click=${() => void exportFile(app, "job", "share")}>Share job file</button>` : nothing}
    </div>
  </div>`;
}

/** What was typed, as typed, with how it reads in the other system. */
function values(app: App, forms: Forms, group: FieldGroup, base: string): TemplateResult {
  const row = getRow(app.job, base);
  const system = systemOf(app.job);
  const items = group.fields.filter((spec) => {
    const value = row[spec.key];
    return value !== undefined && value !== "" && value !== false && value !== null && spec.key !== "name" && shows(forms, group, spec, app.job, base);
  });
  if (items.length === 0) return html`<p class="detail">Nothing entered.</p>`;
  return html`<dl class="values">
    ${items.map((spec) => {
      const raw = row[spec.key];
      const choices = choicesOf(spec, forms, group, app.job, base);
      const text = raw === true ? "Yes" : (choices.find((choice) => choice.value === raw)?.label ?? String(raw));
      const reading = unitsOf(spec, system).length > 0 ? tellingReading(app.state.result?.evaluation.readings[join(base, spec.key)]?.reads, text) : null;
      return html`<div><dt>${spec.label}${spec.symbol ? html` <i class="symbol">${lettered(spec.symbol)}</i>` : nothing}</dt><dd>${text}${reading ? html` <span class="reads">${reading}</span>` : nothing}</dd></div>`;
    })}
  </dl>`;
}

function overview(joints: Row[], answers: Record<string, JointAnswer>): TemplateResult {
  return html`<section class="part">
    <h2>Joint schedule</h2>
    <table class="schedule joints">
      <thead>
        <tr>
          <th scope="col"><span class="hidden-word">Number</span></th>
          <th scope="col">Joint</th>
          <th scope="col">Verdict</th>
          <th scope="col" class="right">Width</th>
          <th scope="col" class="right">Depth</th>
          <th scope="col" class="right">Rod</th>
        </tr>
      </thead>
      <tbody>
        ${joints.map((row, index) => {
          const answer = answers[String(row["id"])];
          const line = answer?.headline;
          return html`<tr>
            <td class="num mark-no">${index + 1}</td>
            <th scope="row">${rowNameOf(row, "Joint", index)}</th>
            <td>${answer ? smallVerdict(answer.verdict, answer.verdict_word) : "—"}</td>
            <td class="num" data-label="Width">${line?.width ?? "—"}</td>
            <td class="num" data-label="Depth">${line?.depth ?? "—"}</td>
            <td class="num" data-label="Rod">${line?.rod ?? "—"}</td>
          </tr>`;
        })}
      </tbody>
    </table>
  </section>`;
}

function jointSheet(app: App, forms: Forms, row: Row, index: number, answer: JointAnswer | undefined): TemplateResult {
  const base = `/joints/${index}`;
  const side = groupOf(forms, "side");
  const causes = getRows(row, "/causes");
  const drawing = drawingOf(answer?.drawing ?? "");
  return html`<section class="joint-sheet" data-testid="joint-sheet-${String(row["id"])}">
    ${titleStrip(app)}
    <h2 class="joint-sheet-title"><span class="num">${index + 1}</span> ${rowNameOf(row, "Joint", index)}</h2>
    ${answer === undefined ? nothing : verdict(verdictOf(answer), app.state.isStale)} ${drawing === null ? nothing : html`<div class="drawing" role="img" aria-label="Section of ${answer?.name ?? "the joint"}">${drawing}</div>`}
    <div class="given">
      <div><h3>${groupOf(forms, "joint").label}</h3>${values(app, forms, groupOf(forms, "joint"), base)}</div>
      <div><h3>${side.label} A</h3>${values(app, forms, side, `${base}/side_a`)}</div>
      <div><h3>${side.label} B</h3>${values(app, forms, side, `${base}/side_b`)}</div>
      ${causes.map((cause, at) => html`<div><h3>${rowNameOf(cause, "Cause", at)}</h3>${values(app, forms, groupOf(forms, "cause"), `${base}/causes/${at}`)}</div>`)}
    </div>
    ${answer === undefined ? nothing : bands(answer.answers ?? [])} ${notes(answer?.notes ?? [])} ${(answer?.tables ?? []).map((item) => table(item))}
    ${answer?.steps && answer.steps.length > 0 ? html`<h3>Working</h3>${working(answer.steps)}` : nothing}
    ${photoIds(row).length > 0 ? html`<h3>Photos</h3>${photos(app, row, null)}` : nothing}
    ${answer?.face ? html`<h3>${groupOf(forms, "face").label}</h3>${values(app, forms, groupOf(forms, "face"), `${base}/face`)}${verdict({ verdict: answer.face.verdict, word: answer.face.verdict_word, text: answer.face.verdict_text }, false)}${checks(answer.face)}${bands(answer.face.answers)}` : nothing}
  </section>`;
}

function signature(app: App): TemplateResult {
  const core = app.state.result?.evaluation.core ?? app.state.forms?.core;
  const boundary = app.state.forms?.words["boundary"];
  return html`<footer class="signatures">
    <div class="sign"><span>Prepared</span><span>Date</span></div>
    <div class="sign"><span>Checked</span><span>Date</span></div>
    ${typeof boundary === "string" ? html`<p class="source">${boundary}</p>` : nothing}
    ${core ? html`<p class="source">Core ${core.version}. Tables: ${core.tables.join(", ")}.</p>` : nothing}
  </footer>`;
}
