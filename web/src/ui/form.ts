// A group of fields under its sub-headings; what is seldom needed waits under 'More'.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { FieldGroup, FieldSpec, Forms } from "../app/contract";
import { sectionsOf, shows, type Section } from "../app/fields";
import { getRow, join } from "../app/pointer";
import { field } from "./field";

export interface FormOptions {
  /** Which sections; all without it. */
  only?: (section: Section, index: number) => boolean;
  isGlove?: boolean;
  /** Level of the sub-headings. */
  level?: 3 | 4;
}

export function form(app: App, forms: Forms, group: FieldGroup, base: string, options: FormOptions = {}): TemplateResult {
  const sections = sectionsOf(group).filter((section, index) => options.only?.(section, index) ?? true);
  return html`${sections.map((section) => sectionOf(app, forms, group, base, section, options))}`;
}

function sectionOf(app: App, forms: Forms, group: FieldGroup, base: string, section: Section, options: FormOptions): TemplateResult | typeof nothing {
  const show = (specs: FieldSpec[]): FieldSpec[] => specs.filter((spec) => shows(forms, group, spec, app.job, base));
  const plain = show(section.plain);
  const advanced = show(section.advanced);
  if (plain.length + advanced.length === 0) return nothing;
  const one = (spec: FieldSpec): TemplateResult => field(app, forms, group, spec, base, options.isGlove);
  const isAlone = section.title.toLowerCase() === group.label.toLowerCase();
  const heading = isAlone
    ? nothing
    : options.level === 4
      ? html`<h4 class="section-title">${section.title}</h4>`
      : html`<h3 class="section-title">${section.title}</h3>`;
  return html`<div class="fields" data-section=${section.title}>
    ${plain.length > 0 ? heading : nothing} ${plain.map(one)}
    ${advanced.length > 0 ? more(app, base, section, plain.length === 0, advanced, one) : nothing}
  </div>`;
}

function more(app: App, base: string, section: Section, isWhole: boolean, specs: FieldSpec[], one: (spec: FieldSpec) => TemplateResult): TemplateResult {
  const row = getRow(app.job, base);
  const filled = specs.filter((spec) => row[spec.key] !== undefined && row[spec.key] !== "" && row[spec.key] !== false).length;
  const isFaulty = specs.some((spec) => app.state.result?.evaluation.issues.some((issue) => issue.path === join(base, spec.key) && issue.severity === "error"));
  const label = isWhole ? section.title : `More: ${section.title.toLowerCase()}`;
  return disclosure(app, `more ${base} ${section.title}`, html`${label}${filled > 0 ? html` <span class="count">${filled} filled in</span>` : nothing}`, () => html`${specs.map(one)}`, isFaulty);
}

/** A heading that opens; it says its state in words to those who cannot see it turn. */
export function disclosure(app: App, name: string, label: unknown, body: () => unknown, isForcedOpen = false, isPrinted = false): TemplateResult {
  const isOpen = isForcedOpen || app.state.opened.has(name);
  // Once a fault has opened it, it stays open: it must not shut under the hand that mends the fault.
  if (isForcedOpen && !app.state.opened.has(name)) queueMicrotask(() => openParts(app, [name]));
  const id = "part-" + name.replaceAll(/[^\w]+/g, "-");
  return html`<div class="disclosure ${isOpen ? "is-open" : ""}">
    <button type="button" class="disclose" aria-expanded=${isOpen ? "true" : "false"} aria-controls=${id} data-more=${name} @click=${() => toggle(app, name, isOpen)}>
      <span class="disclose-sign" aria-hidden="true"></span><span>${label}</span>
    </button>
    <div class="disclosed ${isPrinted ? "is-printed" : ""}" id=${id} ?hidden=${!isOpen && !isPrinted} data-shut=${isOpen ? "no" : "yes"}>${isOpen || isPrinted ? body() : nothing}</div>
  </div>`;
}

function toggle(app: App, name: string, isOpen: boolean): void {
  const opened = new Set(app.state.opened);
  if (isOpen) opened.delete(name);
  else opened.add(name);
  app.update({ opened });
}

export function openParts(app: App, names: string[]): void {
  app.update({ opened: new Set([...app.state.opened, ...names]) });
}
