// A file from outside: what it is, and what taking it would change, before it changes anything.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { acceptIncoming, count, dropIncoming, lookAtIncoming, mergeIncoming, saveIncomingAsItCame } from "../app/files";
import { getRows } from "../app/pointer";
import type { Incoming } from "../app/state";
import { notes } from "./answers";

const KIND_WORDS = { changed: "Changed", added: "Added", removed: "Removed" } as const;

export function importPage(app: App): TemplateResult {
  const incoming = app.state.incoming;
  if (incoming === null) return html`<p class="waiting">No file is open.</p>`;
  return html`<section class="page" data-testid="import">
    <p class="title-label">${incoming.fileName}</p>
    <h1 tabindex="-1">${titleOf(incoming)}</h1>
    ${notes(incoming.issues.map((issue) => ({ severity: issue.severity, text: issue.message })))} ${incoming.job === null ? nothing : body(app, incoming)}
    <div class="actions"><button type="button" data-testid="import-cancel" @click=${() => dropIncoming(app)}>${incoming.job === null ? "Back to the jobs" : "Leave it"}</button></div>
  </section>`;
}

function titleOf(incoming: Incoming): string {
  if (incoming.job === null) return "This file was not taken in";
  return String(incoming.job["title"] ?? "") || "Untitled job";
}

function body(app: App, incoming: Incoming): TemplateResult {
  const joints = count(getRows(incoming.job, "/joints").length, "joint");
  if (incoming.readOnly) {
    return html`<p>${joints}. It can be looked at and passed on, but not changed here.</p>
      <div class="actions">
        <button type="button" class="main" @click=${() => lookAtIncoming(app)}>Look at it</button>
        <button type="button" @click=${() => saveIncomingAsItCame(app)}>Save the file as it came</button>
      </div>`;
  }
  if (incoming.mine === null) {
    return html`<p>${joints}. This job is not on this tablet yet.</p>
      <div class="actions"><button type="button" class="main" data-testid="import-new" @click=${() => void acceptIncoming(app, "new")}>Add to the jobs</button></div>`;
  }
  return known(app, incoming);
}

function known(app: App, incoming: Incoming): TemplateResult {
  if (incoming.changes.length === 0) {
    return html`<p data-testid="import-same">This job is on this tablet already, and the file is the same.</p>`;
  }
  return html`<p>This job is on this tablet already. The file differs in ${count(incoming.changes.length, "place")}:</p>
    <div class="table-wrap" role="region" tabindex="0" aria-label="What differs">
      <table data-testid="import-changes">
        <thead><tr><th scope="col">Place</th><th scope="col">Change</th><th scope="col">On this tablet</th><th scope="col">In the file</th></tr></thead>
        <tbody>
          ${incoming.changes.map(
            (change) => html`<tr><th scope="row">${change.label}</th><td>${KIND_WORDS[change.kind]}</td><td>${shown(change.mine)}</td><td>${shown(change.theirs)}</td></tr>`,
          )}
        </tbody>
      </table>
    </div>
    ${incoming.merged === null ? nothing : merging(app, incoming)}
    <div class="actions">
      ${incoming.merged === null
        ? html`<button type="button" class="main" data-testid="import-merge" @click=${() => void mergeIncoming(app, {})}>Put both together</button>
            <button type="button" data-testid="import-replace" @click=${() => void acceptIncoming(app, "replace")}>Take the file's</button>
            <button type="button" data-testid="import-copy" @click=${() => void acceptIncoming(app, "copy")}>Keep both as two jobs</button>`
        : html`<button type="button" class="main" data-testid="import-merged" @click=${() => void acceptIncoming(app, "merged")}>Keep the merged job</button>`}
    </div>
    <p class="help">What is on this tablet now stays among the earlier copies, and Undo brings it back.</p>`;
}

function merging(app: App, incoming: Incoming): TemplateResult {
  const { conflicts, choices } = incoming.merged!;
  if (conflicts.length === 0) return html`<p data-testid="no-conflicts">The two go together without a conflict.</p>`;
  return html`<h2>${count(conflicts.length, "place")} where both differ</h2>
    <p class="help">Yours stands until you choose the other.</p>
    ${conflicts.map((item, at) => {
      const chosen = choices[item.path] ?? "mine";
      const option = (side: "mine" | "theirs", word: string, value: unknown): TemplateResult => html`<label class="radio">
        <input type="radio" name="conflict-${at}" .checked=${chosen === side} @change=${() => void mergeIncoming(app, { ...choices, [item.path]: side })} />
        <span>${word}: <b>${shown(value)}</b></span>
      </label>`;
      return html`<fieldset class="conflict" data-testid="conflict">
        <legend>${item.label}</legend>
        <span class="radios">${option("mine", "On this tablet", item.mine)}${option("theirs", "In the file", item.theirs)}</span>
      </fieldset>`;
    })}`;
}

const MOST_LETTERS = 80;

function shown(value: unknown): string {
  if (value === null || value === undefined) return "—";
  if (value === true) return "Yes";
  if (value === false) return "No";
  if (Array.isArray(value)) return count(value.length, "entry").replace("entrys", "entries");
  const row = typeof value === "object" ? (value as Record<string, unknown>) : null;
  const text = row === null ? String(value) : String(row["name"] ?? row["label"] ?? row["title"] ?? "A set of fields");
  return text.length > MOST_LETTERS ? text.slice(0, MOST_LETTERS - 1) + "…" : text;
}
