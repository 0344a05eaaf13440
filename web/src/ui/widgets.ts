// The controls. One map from field kind to builder; a kind that is not in it is a fault and throws.

import { html, nothing, type TemplateResult } from "lit";
import { live } from "lit/directives/live.js";
import type { App } from "../app/app";
import type { Choice, FieldSpec } from "../app/contract";
import { choose, commitPending, typeInto } from "../app/editing";
import { unitIn, withUnit } from "../app/fields";
import { today } from "../app/jobs";

/** All that a widget needs to know about one field in one place. */
export interface Place {
  spec: FieldSpec;
  pointer: string;
  id: string;
  /** What stands there, as typed. */
  text: string;
  raw: unknown;
  units: string[];
  unit: string | null;
  choices: Choice[];
  example: string;
  fallback: string | null;
  isReadOnly: boolean;
  isBad: boolean;
  isGlove: boolean;
  describedBy: string;
  /** Said in place of a label, where none stands beside the control. */
  name?: string;
}

export type Widget = (app: App, place: Place) => TemplateResult;

const WIDGETS: Readonly<Record<string, Widget>> = {
  text: textWidget,
  note: noteWidget,
  date: dateWidget,
  choice: choiceWidget,
  reference: choiceWidget,
  flag: flagWidget,
  number: textWidget,
  count: textWidget,
  length: quantityWidget,
  temperature: quantityWidget,
  temperature_difference: quantityWidget,
  expansion: quantityWidget,
  percent: quantityWidget,
  duration: quantityWidget,
  irradiance: quantityWidget,
  film: quantityWidget,
  volume: quantityWidget,
  pace: quantityWidget,
  coverage: quantityWidget,
};

/** The bare control of a place, for a cell of a list: the label is the column's, the unit may be typed. */
export function cellWidget(app: App, place: Place): TemplateResult {
  if (place.spec.kind === "choice" || place.spec.kind === "reference") return list(app, place);
  return place.spec.kind === "flag" ? flagWidget(app, place) : input(app, place);
}

export function widgetFor(kind: string): Widget {
  const widget = Object.hasOwn(WIDGETS, kind) ? WIDGETS[kind] : undefined;
  if (widget === undefined) throw new Error(`No widget for a field of kind “${kind}”`);
  return widget;
}

/** So few and short that buttons side by side are quicker than a list. */
const FEW_CHOICES = 4;
const FEW_LETTERS = 40;
const FEW_UNITS = 2;

function isRadio({ spec, choices, isGlove }: Place): boolean {
  if (spec.kind !== "choice") return false;
  const letters = choices.reduce((sum, choice) => sum + choice.label.length, 0);
  return choices.length > 0 && choices.length <= FEW_CHOICES && (isGlove || letters <= FEW_LETTERS);
}

/** Made of several controls, so that the label names a group. */
export function isGrouped(place: Place): boolean {
  return isRadio(place);
}

function keyboardFor(place: Place): "text" | "decimal" | "numeric" {
  if (place.spec.kind === "count") return "numeric";
  // A telephone's digit pad has no minus.
  if (place.spec.kind === "text" || place.spec.kind === "temperature") return "text";
  // Digits alone will do where the example has nothing else before its unit; fractions and feet need more keys.
  return /^[\d.,]+(\s|$)/.test(place.example) && !/[/'"−-]/.test(place.example) ? "decimal" : "text";
}

function onEnter(app: App, place: Place): (event: KeyboardEvent) => void {
  return (event) => {
    if (event.key === "Enter" && !event.isComposing) commitPending(app, place.spec.label);
  };
}

/** The unit that a bare number takes in this place. */
export function chipOf(app: App, pointer: string, units: string[]): string | null {
  return app.state.chips[pointer] ?? units[0] ?? null;
}

/** Typing; the unit that stood there last is the one that a bare number takes next. */
function type(app: App, place: Place, text: string): void {
  const { pointer, units } = place;
  const standing = unitIn(text, units) ?? unitIn(place.text, units);
  if (standing !== null && standing !== app.state.chips[pointer]) app.update({ chips: { ...app.state.chips, [pointer]: standing } });
  typeInto(app, pointer, text, chipOf(app, pointer, units));
}

function input(app: App, place: Place): TemplateResult {
  return html`<input
    id=${place.id}
    type="text"
    class="line"
    inputmode=${keyboardFor(place)}
    enterkeyhint="done"
    autocomplete="off"
    autocapitalize=${place.spec.kind === "text" ? "sentences" : "none"}
    spellcheck=${place.spec.kind === "text" ? "true" : "false"}
    .value=${live(place.text)}
    ?readonly=${place.isReadOnly}
    aria-label=${place.name ?? nothing}
    aria-invalid=${place.isBad ? "true" : nothing}
    aria-required=${place.spec.required ? "true" : nothing}
    aria-describedby=${place.describedBy || nothing}
    @input=${(event: InputEvent) => type(app, place, (event.target as HTMLInputElement).value)}
    @blur=${() => commitPending(app, place.spec.label)}
    @keydown=${onEnter(app, place)}
  />`;
}

function textWidget(app: App, place: Place): TemplateResult {
  return input(app, place);
}

function noteWidget(app: App, place: Place): TemplateResult {
  return html`<textarea
    id=${place.id}
    class="line"
    rows="3"
    .value=${live(place.text)}
    ?readonly=${place.isReadOnly}
    aria-invalid=${place.isBad ? "true" : nothing}
    aria-describedby=${place.describedBy || nothing}
    @input=${(event: InputEvent) => typeInto(app, place.pointer, (event.target as HTMLTextAreaElement).value, null)}
    @blur=${() => commitPending(app, place.spec.label)}
  ></textarea>`;
}

function dateWidget(app: App, place: Place): TemplateResult {
  return html`${input(app, place)}
  ${place.isReadOnly
    ? nothing
    : html`<button type="button" class="chip" @click=${() => choose(app, place.pointer, today(), place.spec.label)}>Today</button>`}`;
}

function quantityWidget(app: App, place: Place): TemplateResult {
  return html`${input(app, place)}${unitChips(app, place)}`;
}

function unitChips(app: App, place: Place): TemplateResult | typeof nothing {
  const { units, unit, pointer, spec } = place;
  if (units.length === 0) return nothing;
  if (units.length === 1) return html`<span class="unit">${units[0]}</span>`;
  if (units.length > FEW_UNITS) {
    return html`<select
      class="unit-list"
      aria-label="Unit of ${spec.label}"
      ?disabled=${place.isReadOnly}
      .value=${live(unit ?? "")}
      @change=${(event: Event) => takeUnit(app, place, (event.target as HTMLSelectElement).value)}
    >
      ${units.map((name) => html`<option value=${name} ?selected=${name === unit}>${name}</option>`)}
    </select>`;
  }
  return html`<span class="chips" role="group" aria-label="Unit of ${spec.label}">
    ${units.map(
      (name) => html`<button
        type="button"
        class="chip"
        data-testid="unit-${spec.key}-${name}"
        data-for=${pointer}
        aria-pressed=${name === unit ? "true" : "false"}
        ?disabled=${place.isReadOnly}
        @pointerdown=${(event: Event) => event.preventDefault()}
        @click=${() => takeUnit(app, place, name)}
      >
        ${name}
      </button>`,
    )}
  </span>`;
}

/** The chip says which unit a bare number has, and puts itself in place of the unit that stands there. */
function takeUnit(app: App, place: Place, name: string): void {
  const { pointer, text, units, spec } = place;
  app.update({ chips: { ...app.state.chips, [pointer]: name } });
  const standing = unitIn(text, units);
  const bare = standing === null ? text : text.trim().slice(0, -standing.length).trimEnd();
  if (bare.trim() === "" || standing === name) return;
  if (app.state.pending?.pointer === pointer) typeInto(app, pointer, bare, name);
  else choose(app, pointer, withUnit(bare, name), spec.label);
}

function choiceWidget(app: App, place: Place): TemplateResult {
  return isRadio(place) ? radios(app, place) : list(app, place);
}

function chosenOf(place: Place): string {
  return place.text !== "" ? place.text : (place.fallback ?? "");
}

function list(app: App, place: Place): TemplateResult {
  const chosen = chosenOf(place);
  const isKnown = place.choices.some((choice) => choice.value === chosen);
  const groups = new Map<string, Choice[]>();
  for (const choice of place.choices) groups.set(choice.group ?? "", [...(groups.get(choice.group ?? "") ?? []), choice]);
  const option = (choice: Choice): TemplateResult =>
    html`<option value=${choice.value} ?selected=${choice.value === chosen}>${choice.label}</option>`;
  return html`<select
    id=${place.id}
    class="line"
    ?disabled=${place.isReadOnly}
    aria-label=${place.name ?? nothing}
    aria-invalid=${place.isBad ? "true" : nothing}
    aria-required=${place.spec.required ? "true" : nothing}
    aria-describedby=${place.describedBy || nothing}
    .value=${live(chosen)}
    @change=${(event: Event) => choose(app, place.pointer, (event.target as HTMLSelectElement).value, place.spec.label)}
  >
    ${chosen === "" || (!place.spec.required && place.fallback === null) ? html`<option value="" ?selected=${chosen === ""}>${place.spec.required ? "Choose…" : "Not said"}</option>` : nothing}
    ${chosen !== "" && !isKnown ? html`<option value=${chosen} selected>${chosen}</option>` : nothing}
    ${[...groups].map(([name, choices]) =>
      name === "" ? choices.map(option) : html`<optgroup label=${name}>${choices.map(option)}</optgroup>`,
    )}
  </select>`;
}

function radios(app: App, place: Place): TemplateResult {
  const chosen = chosenOf(place);
  return html`<span class="radios" role="radiogroup" id=${place.id} tabindex="-1" aria-labelledby="${place.id}-label" aria-describedby=${place.describedBy || nothing}>
    ${place.choices.map(
      (choice) => html`<label class="radio">
        <input
          type="radio"
          name=${place.id}
          value=${choice.value}
          .checked=${live(choice.value === chosen)}
          ?disabled=${place.isReadOnly}
          @change=${() => choose(app, place.pointer, choice.value, place.spec.label)}
        />
        <span>${choice.label}</span>
      </label>`,
    )}
  </span>`;
}

function flagWidget(app: App, place: Place): TemplateResult {
  return html`<span class="tick">
    <input
      id=${place.id}
      type="checkbox"
      .checked=${live(place.raw === true)}
      ?disabled=${place.isReadOnly}
      aria-label=${place.name ?? nothing}
      aria-describedby=${place.describedBy || nothing}
      @change=${(event: Event) => choose(app, place.pointer, (event.target as HTMLInputElement).checked, place.spec.label)}
    />
    <span class="tick-word" aria-hidden="true">${place.raw === true ? "Yes" : "No"}</span>
  </span>`;
}
