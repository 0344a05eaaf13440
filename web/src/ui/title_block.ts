// The title block at the head of every sheet: what job, which copy, whose.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { forSystem, groupOf, systemOf, valueAt } from "../app/fields";

/** Keys of the block, in order; their labels come from the core. */
const CELLS = ["reference", "revision", "date", "prepared_by"];

export function titleBlock(app: App, level: 1 | 2, sheet: string, sub: unknown = nothing): TemplateResult {
  const title = valueAt(app.job, "/title") || "Untitled job";
  return html`<header class="title-block">
    <div class="title-cell is-title">
      <p class="title-label">${sheet}</p>
      ${level === 1 ? html`<h1 tabindex="-1" class="title-value">${title}</h1>` : html`<p class="title-value">${title}</p>`} ${sub}
    </div>
    <dl>
      ${CELLS.map(
        (key) => html`<div class="title-cell"><dt class="title-label">${cellLabel(app, key)}</dt><dd class="title-value">${cellValue(app, key)}</dd></div>`,
      )}
    </dl>
  </header>`;
}

/** The block in one line, at the head of each further sheet on paper; the screen has it already. */
export function titleStrip(app: App): TemplateResult {
  const title = valueAt(app.job, "/title") || "Untitled job";
  return html`<p class="title-strip" aria-hidden="true">
    <b>${title}</b>${CELLS.slice(0, 3).map((key) => html`<span>${cellLabel(app, key)} <b>${cellValue(app, key)}</b></span>`)}
  </p>`;
}

function cellLabel(app: App, key: string): string {
  return app.state.forms === null ? key : (groupOf(app.state.forms, "job").fields.find((field) => field.key === key)?.label ?? key);
}

function cellValue(app: App, key: string): string {
  const spec = app.state.forms === null ? undefined : groupOf(app.state.forms, "job").fields.find((field) => field.key === key);
  return valueAt(app.job, `/${key}`) || (spec ? forSystem(spec.default, systemOf(app.job)) : null) || "—";
}
