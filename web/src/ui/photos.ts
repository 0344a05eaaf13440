// Photos of the joint: taken by the camera, kept on the tablet, printed with the sheet.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { Row } from "../app/contract";
import { addPhotos, dropPhoto } from "../app/photo_edits";
import { photoIds } from "../app/photos";

const FULL_SIZE = "photos in full size";

export function photosPart(app: App, joint: Row, index: number): TemplateResult | typeof nothing {
  const ids = photoIds(joint);
  const mayAdd = app.open.readOnly === null;
  if (ids.length === 0 && !mayAdd) return nothing;
  const keepOriginal = app.state.opened.has(FULL_SIZE);
  return html`<section class="part" aria-labelledby="photos-title" data-testid="photos">
    <h2 id="photos-title">Photos</h2>
    ${photos(app, joint, mayAdd ? index : null)}
    ${mayAdd
      ? html`<div class="actions">
          <label class="button picker">
            <input type="file" accept="image/*" capture="environment" multiple data-testid="add-photo" @change=${(event: Event) => picked(app, index, event, keepOriginal)} /><span>Take or choose a photo</span>
          </label>
          <label class="radio">
            <input type="checkbox" .checked=${keepOriginal} @change=${() => toggleFullSize(app)} /><span>Keep full size too</span>
          </label>
        </div>`
      : nothing}
  </section>`;
}

/** The pictures alone, each with its number; with an index they can be taken off. */
export function photos(app: App, joint: Row, index: number | null): TemplateResult | typeof nothing {
  const ids = photoIds(joint);
  if (ids.length === 0) return nothing;
  return html`<ul class="photos">
    ${ids.map((id, at) => {
      const shown = app.state.photos[id];
      return html`<li data-testid="photo">
        ${shown === undefined
          ? html`<p class="waiting">Reading…</p>`
          : shown.url === null
            ? html`<p class="waiting is-bad">${shown.note}</p>`
            : html`<img src=${shown.url} alt="Photo ${at + 1} of ${ids.length}" />`}
        <p class="photo-line"><span>Photo ${at + 1}</span>${index === null ? nothing : html`<button type="button" class="plain" aria-label="Take off photo ${at + 1}" @click=${() => dropPhoto(app, index, id)}>Take off</button>`}</p>
      </li>`;
    })}
  </ul>`;
}

function picked(app: App, index: number, event: Event, keepOriginal: boolean): void {
  const input = event.target as HTMLInputElement;
  const files = [...(input.files ?? [])];
  input.value = "";
  if (files.length > 0) void addPhotos(app, index, files, keepOriginal);
}

function toggleFullSize(app: App): void {
  const opened = new Set(app.state.opened);
  if (!opened.delete(FULL_SIZE)) opened.add(FULL_SIZE);
  app.update({ opened });
}
