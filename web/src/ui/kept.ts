// What this tablet keeps besides the jobs in the list: the bin, what could not be read, and the plain facts.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { backUp, count, saveText } from "../app/files";
import { emptyBin, putBack } from "../app/jobs";
import { href } from "../app/routes";
import { clockText } from "../store/texts";

export function keptPage(app: App): TemplateResult {
  const { facts, bin, quarantine } = app.state;
  return html`<section class="page">
    <h1 tabindex="-1">Bin and storage</h1>
    <section class="part first" aria-labelledby="facts-title">
      <h2 id="facts-title">Facts</h2>
      ${facts === null
        ? html`<p class="waiting">Reading…</p>`
        : html`<ul class="lines" data-testid="store-facts">
            ${facts.text.map((line) => html`<li>${line}</li>`)}
            <li>${app.state.offline.text}</li>
            <li>${app.state.core.text}</li>
          </ul>`}
      <div class="actions">
        <button type="button" class="main" @click=${() => void backUp(app, "save")}>Back up to a file</button>
        <button type="button" @click=${() => void app.store.requestPersistence()}>Ask the browser to keep the jobs</button>
      </div>
    </section>
    <section class="part" aria-labelledby="bin-title">
      <h2 id="bin-title">Bin</h2>
      ${bin === null || bin.length === 0
        ? html`<p class="empty">The bin is empty.</p>`
        : html`<table class="schedule">
              <thead><tr><th scope="col">Job</th><th scope="col">Joints</th><th scope="col">Saved</th><th scope="col"><span class="hidden-word">Put back</span></th></tr></thead>
              <tbody>
                ${bin.map(
                  (job) => html`<tr data-testid="bin-row-${job.id}">
                    <th scope="row">${job.title || "Untitled job"}</th>
                    <td>${count(job.joints, "joint")}</td>
                    <td>${clockText(job.savedAt)}</td>
                    <td class="row-actions"><button type="button" class="plain" @click=${() => void putBack(app, job.id)}>Put back</button></td>
                  </tr>`,
                )}
              </tbody>
            </table>
            <div class="actions">
              ${app.state.asking === "bin"
                ? html`<button type="button" class="danger" @click=${() => void emptyBin(app)}>Yes, delete ${count(bin.length, "job")} for good</button>
                    <button type="button" @click=${() => app.update({ asking: null })}>Keep</button>`
                : html`<button type="button" @click=${() => app.update({ asking: "bin" })}>Empty the bin</button>`}
            </div>`}
    </section>
    ${quarantine !== null && quarantine.length > 0
      ? html`<section class="part" aria-labelledby="aside-title">
          <h2 id="aside-title">Set aside</h2>
          <p class="help">Records that could not be read. They are kept as they were found.</p>
          <table class="schedule">
            <thead><tr><th scope="col">Job</th><th scope="col">Why</th><th scope="col">When</th><th scope="col"><span class="hidden-word">Save</span></th></tr></thead>
            <tbody>
              ${quarantine.map(
                (item) => html`<tr>
                  <th scope="row">${item.id}</th>
                  <td>${item.reason}</td>
                  <td>${clockText(item.at)}</td>
                  <td class="row-actions"><button type="button" class="plain" @click=${() => saveText(`set-aside-${item.id}.json`, item.raw)}>Save as it is</button></td>
                </tr>`,
              )}
            </tbody>
          </table>
        </section>`
      : nothing}
    <div class="actions"><a class="button" href=${href({ page: "jobs" })}>Back to the jobs</a></div>
  </section>`;
}
