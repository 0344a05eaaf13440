// One input as it always stands: label, help, control with unit, reading-back, message.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { Evaluation, FieldGroup, FieldSpec, Forms, Issue } from "../app/contract";
import { choicesOf, forSystem, hasUnit, systemOf, tellingReading, unitIn, unitsOf, valueAt } from "../app/fields";
import { get, join } from "../app/pointer";
import { lettered } from "./letters";
import { chipOf, isGrouped, widgetFor, type Place } from "./widgets";

/** Before every message a word, so that its weight does not hang on colour. */
const SEVERITY_WORDS = { error: "Fix", warning: "Check", note: "Note" } as const;

export function fieldId(pointer: string): string {
  return "field" + pointer.replaceAll("/", "-");
}

export function field(app: App, forms: Forms, group: FieldGroup, spec: FieldSpec, base: string, isGlove = false): TemplateResult {
  const widget = widgetFor(spec.kind);
  const pointer = join(base, spec.key);
  const id = fieldId(pointer);
  const issues = issuesAt(app, pointer);
  const reading = readingAt(app, pointer);
  const text = valueAt(app.job, pointer);
  const help = helpText(spec, app, text);
  const describedBy = [help && `${id}-help`, reading && `${id}-reads`, ...issues.map((_, at) => `${id}-message-${at}`)].filter(Boolean).join(" ");
  const place = { ...placeOf(app, forms, group, spec, base), id, isGlove, describedBy };
  const label = html`${spec.label}${spec.symbol ? html` <i class="symbol">${lettered(spec.symbol)}</i>` : nothing}${spec.required && text === ""
    ? html` <span class="needed">needed</span>`
    : nothing}`;
  return html`
    <div class="field kind-${spec.kind} ${place.isBad ? "is-bad" : ""} ${isGlove ? "is-glove" : ""}" data-testid="field-${spec.key}" data-pointer=${pointer}>
      ${isGrouped(place)
        ? html`<span class="field-label" id="${id}-label">${label}</span>`
        : html`<label class="field-label" id="${id}-label" for=${id}>${label}</label>`}
      ${help ? html`<p class="help" id="${id}-help">${help}</p>` : nothing}
      <div class="control">
        ${widget(app, place)}
        ${reading ? html`<output class="reads" id="${id}-reads" for=${id} data-testid="reads-${spec.key}">${reading}</output>` : nothing}
      </div>
      ${issues.map((issue, at) => message(`${id}-message-${at}`, issue))}
    </div>
  `;
}

/** All that a widget needs to know of a field, but for its neighbours on the page. */
export function placeOf(app: App, forms: Forms, group: FieldGroup, spec: FieldSpec, base: string): Place {
  const pointer = join(base, spec.key);
  const text = valueAt(app.job, pointer);
  const units = unitsOf(spec, systemOf(app.job));
  return {
    spec,
    pointer,
    id: fieldId(pointer),
    text,
    raw: get(app.job, pointer),
    units,
    unit: hasUnit(text) ? unitIn(text, units) : chipOf(app, pointer, units),
    choices: choicesOf(spec, forms, group, app.job, base),
    example: forSystem(spec.example, systemOf(app.job)) ?? "",
    fallback: forSystem(spec.default, systemOf(app.job)),
    isReadOnly: app.open.readOnly !== null,
    isBad: issuesAt(app, pointer).some((issue) => issue.severity === "error"),
    isGlove: false,
    describedBy: "",
  };
}

export function message(id: string, issue: Issue, where = ""): TemplateResult {
  return html`<p class="message is-${issue.severity}" id=${id} data-testid="message" data-code=${issue.code}>
    <b>${SEVERITY_WORDS[issue.severity]}${where && ` ${where}`}:</b> ${issue.message}
  </p>`;
}

export function severityWord(severity: Issue["severity"]): string {
  return SEVERITY_WORDS[severity];
}

const byPath = new WeakMap<Evaluation, Map<string, Issue[]>>();

/** The issues of one place; sorted once for each answer, since every field asks. */
export function issuesAt(app: App, pointer: string): Issue[] {
  const evaluation = app.state.result?.evaluation;
  if (evaluation === undefined) return [];
  let sorted = byPath.get(evaluation);
  if (sorted === undefined) {
    sorted = new Map();
    for (const issue of evaluation.issues) sorted.set(issue.path, [...(sorted.get(issue.path) ?? []), issue]);
    byPath.set(evaluation, sorted);
  }
  return sorted.get(pointer) ?? [];
}

function readingAt(app: App, pointer: string): string | null {
  const { result, isStale, pending } = app.state;
  // An old reading beside new text would contradict it.
  if (isStale && pending?.pointer === pointer) return null;
  return tellingReading(result?.evaluation.readings[pointer]?.reads, valueAt(app.job, pointer));
}

function helpText(spec: FieldSpec, app: App, text: string): string {
  const system = systemOf(app.job);
  const fallback = forSystem(spec.default, system);
  const example = forSystem(spec.example, system);
  const isTyped = spec.choices === null && spec.choices_from === null && spec.kind !== "flag";
  const parts = [spec.help];
  if (text === "" && isTyped && fallback !== null) parts.push(`Empty means ${fallback}.`);
  else if (text === "" && isTyped && example) parts.push(`Such as ${example}.`);
  return parts.filter(Boolean).join(" ");
}
