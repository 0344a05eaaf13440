// Putting the parts together: the events of the neighbours become state, and the address becomes a page.

import { render } from "lit";
import { shell } from "../ui/shell";
import { App, messageOf, type Neighbours } from "./app";
import type { Forms } from "./contract";
import { commitPending, stepHistory } from "./editing";
import { exportRaw } from "./files";
import { follow, openJob, refreshJobs } from "./jobs";
import { jobOf, parseRoute } from "./routes";
import { NO_HISTORY, NO_TAKEOFF, type Demo, type State } from "./state";
import { applyTheme, storedTheme } from "./theme";
import { askForAnswer } from "./working";

const NAME = "Beadwright";

export function boot(root: HTMLElement, neighbours: Neighbours): App {
  // What the page showed before this ran makes room.
  root.replaceChildren();
  const app = new App(firstState(neighbours), neighbours, (current) => draw(current, root));
  applyTheme(app.state.theme);
  listenToStore(app);
  listenToCore(app);
  app.offline.addEventListener("change", () => app.update({ offline: app.offline.state }));
  addEventListener("hashchange", () => void follow(app).then(() => arrive(app)));
  addEventListener("keydown", (event) => onKey(app, event));
  document.addEventListener("visibilitychange", () => {
    if (document.visibilityState === "hidden") commitPending(app, "Edit");
  });
  app.core.start();
  void loadForms(app);
  const demos = loadDemos(app);
  void (app.state.route.page === "demo" ? demos.then(() => follow(app)) : follow(app));
  void app.store.facts().then((facts) => app.update({ facts }), () => undefined);
  return app;
}

function firstState({ core, offline }: Neighbours): State {
  return {
    route: parseRoute(location.hash),
    theme: storedTheme(),
    core: core.status,
    coreFault: null,
    forms: null,
    formsFault: null,
    jobs: null,
    demos: [],
    bin: null,
    quarantine: null,
    revisions: null,
    setAside: [],
    open: null,
    openFault: null,
    pending: null,
    history: NO_HISTORY,
    result: null,
    isStale: false,
    frames: null,
    frameIndex: null,
    incoming: null,
    clash: null,
    takeoff: NO_TAKEOFF,
    save: { kind: "idle", savedAt: null, text: "" },
    offline: offline.state,
    facts: null,
    photos: {},
    chips: {},
    opened: new Set(),
    isArranging: false,
    asking: null,
    notice: null,
    spoken: "",
  };
}

function draw(app: App, root: HTMLElement): void {
  try {
    render(shell(app), root);
    document.title = titleOf(app);
  } catch (error) {
    showFault(app, root, error);
  }
}

/** A page that cannot be drawn is a fault of ours: say so plainly, and let the work out. */
function showFault(app: App, root: HTMLElement, error: unknown): void {
  console.error(error);
  const place = document.createElement("div");
  root.replaceWith(place);
  const text = document.createElement("p");
  text.className = "waiting is-bad";
  text.setAttribute("role", "alert");
  text.textContent = `This page cannot be drawn: ${messageOf(error)}. What was saved is safe. Load the page again.`;
  const again = document.createElement("button");
  again.textContent = "Load again";
  again.addEventListener("click", () => location.reload());
  place.append(text, again);
  if (app.state.open === null) return;
  const out = document.createElement("button");
  out.textContent = "Export the job as it stands";
  out.addEventListener("click", () => exportRaw(app));
  place.append(out);
}

function titleOf(app: App): string {
  const { open, route } = app.state;
  const job = open !== null && jobOf(route) === open.id ? String(open.job["title"] ?? "") || "Untitled job" : null;
  return [job, NAME].filter(Boolean).join(" – ");
}

/** After a change of page, the reading place is its heading. */
function arrive(app: App): void {
  queueMicrotask(() => {
    scrollTo(0, 0);
    document.querySelector<HTMLElement>("h1")?.focus({ preventScroll: true });
    void app;
  });
}

function listenToStore(app: App): void {
  const on = <T>(name: string, act: (detail: T) => void): void => app.store.addEventListener(name, (event) => act((event as CustomEvent<T>).detail));
  on<{ id: string }>("save-state", ({ id }) => {
    if (app.state.open?.id === id) app.update({ save: app.store.saveState(id), history: app.store.history(id) });
  });
  on<{ id: string | null; isOther: boolean }>("jobs", ({ id, isOther }) => {
    if (app.state.route.page === "jobs") void refreshJobs(app);
    const open = app.state.open;
    // A window that only reads follows the one that writes.
    if (isOther && open !== null && open.id === id && open.readOnly?.code === "other-window") void openJob(app, open.id);
  });
  on<{ id: string; isWriter: boolean; text: string }>("writer", ({ id, isWriter, text }) => {
    if (!isWriter && app.state.open?.id === id) app.updateOpen({ readOnly: { reason: text, code: "other-window" } });
  });
  on<{ text: string }>("notice", ({ text }) => app.say(text));
  on("facts", () => void app.store.facts().then((facts) => app.update({ facts }), () => undefined));
}

function listenToCore(app: App): void {
  app.core.addEventListener("status", () => {
    const was = app.state.core;
    const now = app.core.status;
    app.update({ core: now });
    if (now.phase === "ready" && was.phase !== "ready") {
      askForAnswer(app);
      void takeForms(app);
    }
    // The section of a bead is solved with numpy, which comes later than the rest.
    if (now.numpy === "ready" && was.numpy !== "ready" && app.state.route.page === "cure") askForAnswer(app);
  });
  if (app.core.status.phase === "ready") void takeForms(app);
}

/** The forms as built, so that a job can be read and typed into before the core runs. */
async function loadForms(app: App): Promise<void> {
  try {
    const response = await fetch("forms.json");
    if (!response.ok) throw new Error(`forms.json: ${response.status}`);
    if (app.state.forms === null) app.update({ forms: (await response.json()) as Forms });
  } catch (error) {
    if (app.state.forms === null) app.update({ formsFault: `The forms come with the core. ${messageOf(error)}` });
  }
}

/** The running core's own forms are the truth. */
async function takeForms(app: App): Promise<void> {
  try {
    const forms = await app.core.call<Forms>("forms", []);
    app.update({ forms });
    app.store.describe(forms.core.version, forms.core.tables);
  } catch {
    // The forms of the build serve as well.
  }
}

async function loadDemos(app: App): Promise<void> {
  try {
    const response = await fetch("demo/index.json");
    if (response.ok) app.update({ demos: (await response.json()) as Demo[] });
  } catch {
    // A build without demo jobs.
  }
}

function onKey(app: App, event: KeyboardEvent): void {
  if (!(event.ctrlKey || event.metaKey) || event.altKey || app.state.open === null) return;
  const key = event.key.toLowerCase();
  const direction = key === "z" && !event.shiftKey ? "undo" : key === "y" || (key === "z" && event.shiftKey) ? "redo" : null;
  // Inside a field that is being typed in, the browser's own undo is meant.
  if (direction === null || app.state.pending !== null) return;
  event.preventDefault();
  void stepHistory(app, direction);
}
