// What the core answered, set out as on a calculation pad: the question in the margin, the answer beside it.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { Answer, AnswerTable, Caution, Issue, JointAnswer, Step } from "../app/contract";
import { href } from "../app/routes";
import { disclosure } from "./form";
import { lettered } from "./letters";
import { mark, toneOf } from "./marks";

export interface VerdictParts {
  verdict: string;
  word: string;
  text: string;
}

export function verdict(parts: VerdictParts, isStale: boolean): TemplateResult {
  const tone = toneOf(parts.verdict);
  return html`<div class="verdict tone-${tone}" data-testid="verdict" data-verdict=${parts.verdict}>
    <p class="verdict-word"><span>${parts.word}</span>${mark(parts.verdict)}</p>
    ${parts.text ? html`<p class="verdict-text">${parts.text}</p>` : nothing} ${isStale ? staleNote() : nothing}
  </div>`;
}

export function verdictOf(joint: JointAnswer): VerdictParts {
  return { verdict: joint.verdict, word: joint.verdict_word, text: joint.verdict_text ?? "" };
}

/** A verdict in a row of the schedule. */
export function smallVerdict(name: string, word: string): TemplateResult {
  return html`<span class="small-verdict tone-${toneOf(name)}" data-verdict=${name}><span>${word}</span>${mark(name)}</span>`;
}

export function staleNote(): TemplateResult {
  return html`<p class="stale" data-testid="stale">From before your last change</p>`;
}

export function bands(answers: Answer[]): TemplateResult {
  return html`<div class="bands">
    ${answers.map(
      (item) => html`<div class="band tone-${item.tone ?? "plain"}" data-testid="answer-${item.key}">
        <h3 class="band-question">${item.question}</h3>
        <div class="band-answer">
          <p class="figure"><span>${item.answer}</span>${item.tone && item.tone !== "plain" ? mark(item.tone) : nothing}</p>
          ${item.detail ? html`<p class="detail">${item.detail}</p>` : nothing}
        </div>
      </div>`,
    )}
  </div>`;
}

/** What the weight of a row says; the row of totals says it in its own first cell. */
const ROW_WORDS: Record<string, string> = { chosen: "in force", bad: "not enough", total: "" };
/** Longer cells may break; a figure with its unit may not. */
const WHOLE_LETTERS = 12;
/** So long that a narrow column would break it into a ladder. */
const LONG_LETTERS = 24;

export function table(data: AnswerTable, withTitle = true): TemplateResult {
  return html`<div class="table-wrap" role="region" tabindex="0" aria-label=${data.title} data-testid="table-${data.key}">
    <table>
      <caption class=${withTitle ? "" : "hidden-word"}>${data.title}</caption>
      <thead>
        <tr>${data.columns.map((column) => (column.label === "" ? html`<td></td>` : html`<th scope="col" class=${column.align === "right" ? "right" : ""}>${column.label}</th>`))}</tr>
      </thead>
      <tbody>
        ${data.rows.map(
          (row) => html`<tr class=${row.mark ? `is-${row.mark}` : ""}>
            ${row.cells.map((cell, at) => cellOf(cell, at, data.columns[at]?.align, row.mark))}
          </tr>`,
        )}
      </tbody>
    </table>
    ${data.note ? html`<p class="detail">${data.note}</p>` : nothing}
  </div>`;
}

function cellOf(cell: string, at: number, align: string | undefined, rowMark: string | null | undefined): TemplateResult {
  const look = `${align === "right" ? "right" : ""} ${cell.length <= WHOLE_LETTERS ? "whole" : cell.length > LONG_LETTERS ? "long" : ""}`;
  if (at > 0) return html`<td class=${look}>${cell}</td>`;
  // The weight of the row says it to the eye; to others a word does.
  const word = rowMark ? (ROW_WORDS[rowMark] ?? rowMark) : "";
  return html`<th scope="row" class=${look}>${cell}${word ? html`<span class="hidden-word">, ${word}</span>` : nothing}</th>`;
}

/** Tables that stand ready behind their titles, and are printed whole. */
export function tableDrawers(app: App, tables: AnswerTable[], owner: string): TemplateResult[] {
  return tables.map((item) => html`<section class="drawer">${disclosure(app, `table ${owner} ${item.key}`, item.title, () => table(item, false), false, true)}</section>`);
}

/** How sure the source is, where its own words do not say it already. */
function statusOf({ source, status }: Step): TemplateResult | typeof nothing {
  const isSaid = !status || status === "read" || (source ?? "").toLowerCase().includes(status.toLowerCase());
  return isSaid ? nothing : html` <span class="status">${status}</span>`;
}

/** The working, as three columns of a calculation sheet: reference, calculation, result. */
export function working(steps: Step[]): TemplateResult {
  return html`<ol class="working">
    ${steps.map(
      (step) => html`<li class="step" data-testid="step-${step.key}">
        <p class="step-source">${step.source ?? ""}${statusOf(step)}</p>
        <div class="step-lines">
          <p class="step-title">${step.title}</p>
          ${step.formula ? html`<p class="step-formula">${lettered(step.formula)}</p>` : nothing}
          ${step.numbers ? html`<p class="step-numbers">${step.numbers}</p>` : nothing}
        </div>
        <p class="step-result">${step.symbol ? html`<i class="symbol">${lettered(step.symbol)}</i> = ` : nothing}<b>${step.result}</b></p>
      </li>`,
    )}
  </ol>`;
}

/** `about` tells one working from another where a page has several. */
export function workingPart(app: App, steps: Step[], name: string, about = ""): TemplateResult | typeof nothing {
  if (steps.length === 0) return nothing;
  return html`<section class="drawer" aria-label=${about === "" ? "Working" : `Working: ${about}`}>
    ${disclosure(app, name, html`Working, ${steps.length} steps`, () => working(steps), false, true)}
  </section>`;
}

const NOTE_WORDS: Record<string, string> = { error: "Fix", warning: "Check", note: "Note", stop: "Stop" };

export function notes(items: { severity: string; text: string }[]): TemplateResult | typeof nothing {
  if (items.length === 0) return nothing;
  return html`<ul class="notes" data-testid="notes">
    ${items.map((item) => html`<li class="note is-${item.severity}"><b>${NOTE_WORDS[item.severity] ?? "Note"}:</b> ${item.text}</li>`)}
  </ul>`;
}

/** So few notes are quicker to read than to open. */
const FEW_NOTES = 2;
const CAUTION_WORDS = { stop: "Stop", warning: "Take care", note: "Note" } as const;

export function cautions(app: App, items: Caution[], withJoints: boolean): TemplateResult | typeof nothing {
  if (items.length === 0) return nothing;
  return html`<ul class="cautions" data-testid="cautions">
    ${items.map(
      (item) => html`<li class="caution is-${item.severity}">
        <p class="caution-word">${CAUTION_WORDS[item.severity] ?? "Note"}</p>
        <div>
          <h3 class="caution-title">${item.title}</h3>
          <p>${item.text}</p>
          ${item.source ? html`<p class="source">${item.source}</p>` : nothing} ${withJoints ? jointsOf(app, item) : nothing}
        </div>
      </li>`,
    )}
  </ul>`;
}

/** What stops or warns stands open; plain notes wait behind their number, and are printed all the same. */
export function cautionsPart(app: App, items: Caution[], name: string, withJoints: boolean): TemplateResult {
  const notes = items.filter((item) => item.severity === "note");
  const pressing = items.filter((item) => item.severity !== "note");
  if (notes.length <= FEW_NOTES) return html`${cautions(app, items, withJoints)}`;
  return html`${cautions(app, pressing, withJoints)}
  ${disclosure(app, `notes ${name}`, `${notes.length}${pressing.length > 0 ? " more" : ""} notes`, () => cautions(app, notes, withJoints), false, true)}`;
}

function jointsOf(app: App, item: Caution): TemplateResult | typeof nothing {
  const joints = app.state.result?.evaluation.joints ?? {};
  const named = (item.joints ?? []).filter((id) => joints[id] !== undefined);
  if (named.length === 0) return nothing;
  if (named.length === Object.keys(joints).length && named.length > 1) return html`<p class="source">All joints</p>`;
  return html`<p class="source">
    Joints:
    ${named.map((id, at) => html`${at > 0 ? ", " : ""}<a href=${href({ page: "joint", job: app.open.id, joint: id })}>${joints[id]!.name}</a>`)}
  </p>`;
}

/** How far the core is, in place of answers that are not there yet. */
export function waiting(app: App): TemplateResult {
  const { core, coreFault } = app.state;
  if (coreFault !== null && core.phase === "ready") return html`<p class="waiting is-bad" data-testid="core-fault"><b>Stopped:</b> ${coreFault}</p>`;
  if (core.phase === "failed") {
    return html`<div class="waiting is-bad" data-testid="core-failed">
      <p><b>Stopped:</b> ${core.text}. What you type is kept all the same.</p>
      <div class="actions"><button type="button" data-testid="core-again" @click=${() => app.core.start()}>Start it again</button></div>
    </div>`;
  }
  if (core.phase === "ready") return html`<p class="waiting">Working…</p>`;
  return html`<p class="waiting">Working starts when ready. ${core.text}</p>`;
}

export function severityCount(issues: Issue[], severity: Issue["severity"]): number {
  return issues.filter((issue) => issue.severity === severity).length;
}
