// The first page: the jobs on this tablet, and ways to get one.

import { html, nothing, type TemplateResult } from "lit";
import { repeat } from "lit/directives/repeat.js";
import type { App } from "../app/app";
import { backUp, canShareFiles, count, restoreBackup, takeFile } from "../app/files";
import { makeJob, removeJob } from "../app/jobs";
import { href } from "../app/routes";
import type { JobSummary } from "../store/types";
import { clockText } from "../store/texts";

export function jobsPage(app: App): TemplateResult {
  const { jobs, demos } = app.state;
  return html`<div class="page" @dragover=${allowDrop} @drop=${(event: DragEvent) => dropped(app, event)}>
    <div class="page-head">
      <h1 tabindex="-1">Jobs</h1>
      <p class="lead">Size a sealant joint, check one on the wall, and leave with the working. All of it stays on this tablet.</p>
    </div>
    <div class="actions start">
      <button type="button" class="main" data-testid="new-metric" @click=${() => void makeJob(app, "metric")}>New job in mm and °C</button>
      <button type="button" class="main" data-testid="new-inch" @click=${() => void makeJob(app, "inch")}>New job in inches and °F</button>
      ${filePicker("open-file", "Open a job file", ".json,application/json", (file) => void takeFile(app, file))}
      ${demos.map((demo) => html`<a class="button" data-testid="open-demo" href=${href({ page: "demo", name: demo.id })}>Demo: ${demo.title}</a>`)}
    </div>
    ${jobs === null ? html`<p class="waiting">Reading the jobs…</p>` : jobs.length === 0 ? empty() : list(app, jobs)}
    <section class="part" aria-labelledby="all-jobs">
      <h2 id="all-jobs">All jobs together</h2>
      <p class="help">A backup file is the only copy outside this browser. Make one at the end of the day.</p>
      <div class="actions">
        <button type="button" data-testid="backup" @click=${() => void backUp(app, "save")}>Back up to a file</button>
        ${canShareFiles() ? html`<button type="button" @click=${() => void backUp(app, "share")}>Share a backup</button>` : nothing}
        ${filePicker("restore", "Restore a backup", ".json,application/json", (file) => void restoreBackup(app, file))}
        <a class="button" href=${href({ page: "kept" })}>Bin and storage</a>
        <a class="button" href=${href({ page: "help" })}>How to type, and cautions</a>
      </div>
    </section>
  </div>`;
}

function empty(): TemplateResult {
  return html`<p class="empty" data-testid="no-jobs">No job yet. Make one above, or drop a job file anywhere on this page.</p>`;
}

function list(app: App, jobs: JobSummary[]): TemplateResult {
  return html`<table class="schedule jobs">
    <caption class="hidden-word">Jobs on this tablet</caption>
    <thead>
      <tr><th scope="col">Job</th><th scope="col">Joints</th><th scope="col">Saved</th><th scope="col"><span class="hidden-word">Remove</span></th></tr>
    </thead>
    <tbody>
      ${repeat(
        jobs,
        (job) => job.id,
        (job) => html`<tr data-testid="job-row-${job.id}">
          <th scope="row"><a class="row-link" href=${href({ page: "wall", job: job.id })}>${job.title || "Untitled job"}</a></th>
          <td>${count(job.joints, "joint")}</td>
          <td>${clockText(job.savedAt)}</td>
          <td class="row-actions">${removal(app, job)}</td>
        </tr>`,
      )}
    </tbody>
  </table>`;
}

function removal(app: App, job: JobSummary): TemplateResult {
  const title = job.title || "Untitled job";
  if (app.state.asking !== job.id) {
    return html`<button type="button" class="plain" aria-label="To the bin: ${title}" @click=${() => app.update({ asking: job.id })}>To the bin</button>`;
  }
  return html`<button type="button" class="danger" @click=${() => void removeJob(app, job.id, title)}>Yes, to the bin</button>
    <button type="button" class="plain" @click=${() => app.update({ asking: null })}>Keep</button>`;
}

/** A button that opens the file chooser; the input itself is what the keyboard reaches. */
export function filePicker(name: string, word: string, accept: string, take: (file: File) => void): TemplateResult {
  const picked = (event: Event): void => {
    const input = event.target as HTMLInputElement;
    const file = input.files?.[0];
    input.value = "";
    if (file !== undefined) take(file);
  };
  return html`<label class="button picker"><input type="file" data-testid=${name} accept=${accept} @change=${picked} /><span>${word}</span></label>`;
}

function allowDrop(event: DragEvent): void {
  if (event.dataTransfer?.types.includes("Files")) event.preventDefault();
}

function dropped(app: App, event: DragEvent): void {
  event.preventDefault();
  const file = event.dataTransfer?.files[0];
  if (file !== undefined) void takeFile(app, file);
}
