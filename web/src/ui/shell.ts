// What stands around every page: the head with undo, banners, the facts at the foot.

import { html, nothing, type TemplateResult } from "lit";
import { messageOf, type App } from "../app/app";
import { stepHistory } from "../app/editing";
import { exportRaw } from "../app/files";
import { discardDraft, restoreDraft, takeOver } from "../app/jobs";
import { getRows, rowNameOf } from "../app/pointer";
import { href, jobOf } from "../app/routes";
import { setTheme } from "../app/theme";
import type { Theme } from "../app/state";
import { backupText, clockText } from "../store/texts";
import { curePage } from "./cure";
import { facePage } from "./face";
import { helpPage } from "./help";
import { historyPage } from "./history";
import { importPage } from "./import";
import { jobsPage } from "./jobs";
import { jointPage } from "./joint";
import { keptPage } from "./kept";
import { sheetPage } from "./sheet";
import { takeoffPage } from "./takeoff";
import { wallPage } from "./wall";

export function shell(app: App): TemplateResult {
  return html`
    <a class="skip" href="#main" @click=${skip}>Skip to the page</a>
    ${head(app)}
    <main id="main" tabindex="-1" data-page=${app.state.route.page}>${banners(app)} ${page(app)}</main>
    ${foot(app)}
    <p class="hidden-word" role="status" aria-live="polite" data-testid="spoken">${app.state.spoken}</p>
  `;
}

function skip(event: Event): void {
  event.preventDefault();
  document.getElementById("main")?.focus();
}

function head(app: App): TemplateResult {
  const { route, open } = app.state;
  const job = jobOf(route);
  return html`<header class="head">
    <nav class="crumbs" aria-label="Where you are">
      <a class="brand" href=${href({ page: "jobs" })} aria-current=${route.page === "jobs" ? "page" : nothing}>
        ${job === null ? "Beadwright" : html`<span class="long">Beadwright</span><span class="short">Jobs</span>`}
      </a>
      ${job !== null ? html`<a href=${href({ page: "wall", job })} aria-current=${route.page === "wall" ? "page" : nothing}>Wall</a>` : nothing}
      ${"joint" in route && route.joint !== null && job !== null && open !== null
        ? html`<a class="in-joint" href=${href({ page: "joint", job, joint: route.joint })} aria-current=${route.page === "joint" ? "page" : nothing}>${jointName(app, route.joint)}</a>`
        : nothing}
    </nav>
    <div class="tools">
      ${job !== null ? html`<a class="not-narrow" href=${href({ page: "takeoff", job })} aria-current=${route.page === "takeoff" ? "page" : nothing}>Take-off</a>` : nothing}
      ${job !== null ? html`<a class="not-narrow" href=${href({ page: "cure", job })} aria-current=${route.page === "cure" ? "page" : nothing}>Cure</a>` : nothing}
      ${job !== null ? html`<a href=${href({ page: "sheet", job, joint: null })} aria-current=${route.page === "sheet" ? "page" : nothing}>Sheet</a>` : nothing}
      ${job !== null && open !== null && open.readOnly === null ? undoButtons(app) : nothing}
    </div>
  </header>`;
}

function jointName(app: App, id: string): string {
  const rows = getRows(app.job, "/joints");
  const index = rows.findIndex((row) => row["id"] === id);
  return index < 0 ? "Joint" : rowNameOf(rows[index]!, "Joint", index);
}

function undoButtons(app: App): TemplateResult {
  const { canUndo, canRedo, undoLabel, redoLabel } = app.state.history;
  return html`<div class="undo" role="group" aria-label="Undo and redo">
    <button type="button" data-testid="undo" ?disabled=${!canUndo} title=${undoLabel ? `Undo: ${undoLabel}` : "Nothing to undo"} @click=${() => void stepHistory(app, "undo")}>Undo</button>
    <button type="button" data-testid="redo" ?disabled=${!canRedo} title=${redoLabel ? `Redo: ${redoLabel}` : "Nothing to redo"} @click=${() => void stepHistory(app, "redo")}>Redo</button>
  </div>`;
}

function banners(app: App): TemplateResult {
  const { open, notice, offline, route, clash } = app.state;
  const isOfJob = open !== null && jobOf(route) === open.id;
  return html`
    ${offline.updateWaiting
      ? banner("update", html`A newer version of the app is on this tablet.`, html`<button type="button" @click=${() => void app.offline.takeUpdate().catch((error: unknown) => app.say(`Not changed, since what is on screen could not be saved: ${messageOf(error)}`, "bad"))}>Save and change to it</button>`)
      : nothing}
    ${clash !== null
      ? banner(
          "clash",
          html`<b>${clash.clash.title || "Untitled job"}</b> is on this tablet too, saved ${clockText(clash.clash.mine.savedAt)}. The backup has it as saved ${clockText(clash.clash.theirs.savedAt)}.`,
          html`<button type="button" data-testid="clash-keep" @click=${() => clash.choose("keep")}>Keep this tablet's</button>
            <button type="button" data-testid="clash-replace" @click=${() => clash.choose("replace")}>Take the backup's</button>
            <button type="button" data-testid="clash-both" @click=${() => clash.choose("both")}>Keep both</button>`,
        )
      : nothing}
    ${isOfJob && open.readOnly !== null
      ? banner(
          "read-only",
          html`<b>Reading only.</b> ${open.readOnly.reason}`,
          open.readOnly.code === "other-window" ? html`<button type="button" data-testid="take-over" @click=${() => void takeOver(app)}>Take over here</button>` : nothing,
        )
      : nothing}
    ${isOfJob && open.recovered !== null
      ? banner("recovered", open.recovered, html`<button type="button" @click=${() => app.updateOpen({ recovered: null })}>Understood</button>`)
      : nothing}
    ${isOfJob && open.draft !== null
      ? banner(
          "draft",
          html`<b>Typed but not saved</b> when the page last closed, at ${clockText(open.draft.at)}.`,
          html`<button type="button" data-testid="restore-draft" @click=${() => void restoreDraft(app)}>Restore</button>
            <button type="button" data-testid="discard-draft" @click=${() => void discardDraft(app)}>Discard, keep copy</button>`,
        )
      : nothing}
    ${isOfJob && app.state.save.kind === "failed"
      ? banner("not-saved", html`<b>${app.state.save.text}</b>`, html`<button type="button" @click=${() => exportRaw(app)}>Export what is on screen</button>`, true)
      : nothing}
    ${notice !== null
      ? banner(
          "notice",
          notice.text,
          html`${notice.canUndo ? html`<button type="button" data-testid="notice-undo" @click=${() => void stepHistory(app, "undo")}>Undo</button>` : nothing}
            <button type="button" @click=${() => app.update({ notice: null })}>Close</button>`,
          notice.tone === "bad",
        )
      : nothing}
  `;
}

function banner(name: string, text: unknown, actions: unknown, isBad = false): TemplateResult {
  return html`<div class="banner ${isBad ? "is-bad" : ""}" role=${isBad ? "alert" : "status"} data-testid="banner-${name}">
    <p>${text}</p>
    <div class="actions">${actions}</div>
  </div>`;
}

function page(app: App): TemplateResult {
  const { route, open, openFault, formsFault, forms } = app.state;
  switch (route.page) {
    case "jobs":
      return jobsPage(app);
    case "kept":
      return keptPage(app);
    case "help":
      return helpPage(app);
    case "import":
      return importPage(app);
    case "demo":
      return html`<p class="waiting">Opening the demo job…</p>`;
    default:
      if (openFault !== null) return cannotOpen(openFault);
      if (forms === null) return html`<p class="waiting">${formsFault ?? "Reading the forms…"}</p>`;
      if (open === null || open.id !== route.job) return html`<p class="waiting">Opening the job…</p>`;
  }
  switch (route.page) {
    case "wall":
      return wallPage(app, forms);
    case "joint":
      return jointPage(app, forms, route.joint);
    case "face":
      return facePage(app, forms, route.joint);
    case "sheet":
      return sheetPage(app, forms, route.joint);
    case "takeoff":
      return takeoffPage(app, forms);
    case "cure":
      return curePage(app, forms);
    case "history":
      return historyPage(app);
  }
}

function cannotOpen(reason: string): TemplateResult {
  return html`<section class="page">
    <h1 tabindex="-1">This job does not open</h1>
    <p data-testid="open-fault">${reason}</p>
    <p><a class="button" href=${href({ page: "jobs" })}>Back to the jobs</a> <a class="button" href=${href({ page: "kept" })}>What was set aside</a></p>
  </section>`;
}

const THEMES: readonly { name: Theme; word: string }[] = [
  { name: "paper", word: "Paper" },
  { name: "sun", word: "Sun" },
  { name: "dark", word: "Dark" },
];

function foot(app: App): TemplateResult {
  const { save, core, offline, facts, theme, open, route } = app.state;
  const hasJob = open !== null && jobOf(route) === open.id && !open.isLoose;
  const version = core.coreVersion ?? app.state.forms?.core.version;
  return html`<footer class="foot">
    <ul class="facts">
      ${hasJob ? html`<li data-testid="save-state" data-kind=${save.kind} class=${save.kind === "failed" ? "is-bad" : ""}>${save.text}</li>` : nothing}
      <li data-testid="core-state" data-phase=${core.phase}>${core.text}</li>
      <li data-testid="offline-state">${offline.text}</li>
      <li data-testid="backup-state"><a href=${href({ page: "kept" })}>${backupText(facts?.lastBackupAt ?? null)}</a></li>
      ${version ? html`<li data-testid="core-version">Core ${version}</li>` : nothing}
    </ul>
    <div class="themes" role="group" aria-label="Light">
      ${THEMES.map(
        ({ name, word }) =>
          html`<button type="button" class="chip" data-testid="theme-${name}" aria-pressed=${name === theme ? "true" : "false"} @click=${() => setTheme(app, name)}>${word}</button>`,
      )}
    </div>
  </footer>`;
}
