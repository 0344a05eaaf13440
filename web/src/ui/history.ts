// Earlier copies of a job, each as it was saved.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { bringBack, bringBackTyping, refreshRevisions } from "../app/jobs";
import { href } from "../app/routes";
import { bytesText, clockText } from "../store/texts";

export function historyPage(app: App): TemplateResult {
  const { revisions, setAside } = app.state;
  const { id, readOnly, isLoose } = app.open;
  return html`<section class="page">
    <h1 tabindex="-1">Earlier copies</h1>
    <p class="lead">Three of today and one of each day before, ten in all; besides these every copy that you pin or export, and every step that Undo can still reach.</p>
    ${isLoose || revisions === null || revisions.length === 0
      ? html`<p class="empty">No earlier copy is kept.</p>`
      : html`<table class="schedule">
          <thead>
            <tr><th scope="col">Copy</th><th scope="col">Saved</th><th scope="col">After</th><th scope="col" class="right">Size</th><th scope="col"><span class="hidden-word">Actions</span></th></tr>
          </thead>
          <tbody>
            ${revisions.map(
              (item, at) => html`<tr data-testid="revision-${item.rev}">
                <th scope="row">${item.rev}${item.pinned ? " pinned" : ""}${item.exported ? " exported" : ""}</th>
                <td>${clockText(item.savedAt)}</td>
                <td>${item.reason}</td>
                <td class="num">${bytesText(item.size)}</td>
                <td class="row-actions">
                  ${readOnly === null
                    ? html`<button type="button" class="plain" @click=${() => void pin(app, id, item.rev, !item.pinned)}>${item.pinned ? "Unpin" : "Pin"}</button> ${at === 0
                          ? html`<span class="row-sub">the job now</span>`
                          : html`<button type="button" class="plain" @click=${() => void bringBack(app, item.rev)}>Bring back</button>`}`
                    : nothing}
                </td>
              </tr>`,
            )}
          </tbody>
        </table>`}
    ${setAside.length === 0
      ? nothing
      : html`<h2>Typed but not saved</h2>
          <p class="help">Set aside when the job was opened again and worked on.</p>
          <ul class="plain-list">
            ${setAside.map(
              (item) => html`<li data-testid="set-aside">
                ${clockText(item.at)} ${readOnly === null ? html`<button type="button" class="plain" @click=${() => void bringBackTyping(app, item.at, item.job)}>Bring back</button>` : nothing}
              </li>`,
            )}
          </ul>`}
    <div class="actions"><a class="button" href=${href({ page: "wall", job: id })}>Back to the wall</a></div>
  </section>`;
}

async function pin(app: App, id: string, rev: number, isPinned: boolean): Promise<void> {
  await app.store.pin(id, rev, isPinned).catch((error: unknown) => app.say(String(error), "bad"));
  await refreshRevisions(app, id);
}
