// The title block at the head of every sheet: what job, which copy, whose.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { forSystem, groupOf, systemOf, valueAt } from "../app/fields";

/** Keys of the block, in order; their labels come from the core. */
const CELLS = ["reference", "revision", "date", "prepared_by"];

export function titleBlock(app: App, level: 1 | 2, sheet: string, sub: unknown = nothing): TemplateResult {
  const { forms } = app.state;
  const title = valueAt(app.job, "/title") || "Untitled job";
  const group = forms === null ? null : groupOf(forms, "job");
  return html`<header class="title-block">
    <div class="title-cell is-title">
      <p class="title-label">${sheet}</p>
      ${level === 1 ? html`<h1 tabindex="-1" class="title-value">${title}</h1>` : html`<p class="title-value">${title}</p>`} ${sub}
    </div>
    <dl>
      ${CELLS.map((key) => {
        const spec = group?.fields.find((field) => field.key === key);
        const value = valueAt(app.job, `/${key}`) || (spec ? forSystem(spec.default, systemOf(app.job)) : null) || "—";
        return html`<div class="title-cell"><dt class="title-label">${spec?.label ?? key}</dt><dd class="title-value">${value}</dd></div>`;
      })}
    </dl>
  </header>`;
}
