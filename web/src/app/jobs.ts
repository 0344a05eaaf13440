// Opening, making and removing jobs.

import { clockText } from "../store/texts";
import type { Job, OpenResult } from "../store/types";
import { App, messageOf } from "./app";
import type { Opened, Row, UnitSystem } from "./contract";
import { commitPending, forgetOpen, newId } from "./editing";
import { loadPhotos } from "./photos";
import { getRows } from "./pointer";
import { href, jobOf, parseRoute, type Route } from "./routes";
import { askForAnswer } from "./working";

export function go(route: Route): void {
  location.hash = href(route).slice(1);
}

/** The address has changed: show that page, and open its job if it is another one. */
export async function follow(app: App): Promise<void> {
  const route = parseRoute(location.hash);
  commitPending(app, "Edit");
  const wasJoint = "joint" in app.state.route ? app.state.route.joint : null;
  const isSameJoint = "joint" in route && route.joint === wasJoint;
  app.update({ route, asking: null, isArranging: false, ...(isSameJoint ? {} : { frames: null, frameIndex: null }) });
  if (route.page === "import" && app.state.incoming === null) go({ page: "jobs" });
  if (route.page === "jobs") void refreshJobs(app);
  if (route.page === "kept") void refreshKept(app);
  if (route.page === "demo") await openDemo(app, route.name);
  const wanted = jobOf(route);
  if (wanted !== null && app.state.open?.id !== wanted) await openJob(app, wanted);
  if (route.page === "history") await refreshRevisions(app, route.job);
  if (wanted !== null) askForAnswer(app);
  if (app.state.open !== null) showPhotos(app, route);
}

function showPhotos(app: App, route: Route): void {
  if (route.page !== "joint" && route.page !== "sheet") return;
  const wanted = route.joint !== null ? [route.joint] : getRows(app.job, "/joints").map((joint) => String(joint["id"]));
  for (const id of wanted) void loadPhotos(app, id);
}

export async function openJob(app: App, id: string): Promise<void> {
  letGo(app);
  try {
    const result = await app.store.open(id);
    if (jobOf(app.state.route) === id) showOpened(app, id, result);
  } catch (error) {
    if (jobOf(app.state.route) === id) app.update({ openFault: messageOf(error) });
  }
}

/** Leave the open job, so that another window may write it. */
export function letGo(app: App): void {
  const open = app.state.open;
  if (open !== null && !open.isLoose) void app.store.close(open.id).catch(() => undefined);
  forgetOpen(app);
}

export function showOpened(app: App, id: string, result: OpenResult): void {
  app.update({
    open: {
      id,
      job: result.job,
      committed: result.job,
      version: (app.state.open?.version ?? 0) + 1,
      draft: result.draft,
      recovered: result.recovered,
      readOnly: result.readOnly,
      isLoose: false,
    },
    openFault: null,
    history: app.store.history(id),
    save: app.store.saveState(id),
  });
  askForAnswer(app);
}

/** Show a job that is not kept on this tablet. */
export function showLoose(app: App, job: Row, reason: string): void {
  const id = String(job["id"] ?? "") || "file";
  letGo(app);
  app.update({
    open: { id, job, committed: job, version: 1, draft: null, recovered: null, readOnly: { reason, code: "newer-file" }, isLoose: true },
  });
  go({ page: "wall", job: id });
}

export async function makeJob(app: App, units: UnitSystem): Promise<void> {
  try {
    const job = await blankJob(app, units);
    await keepNew(app, { ...job, id: newId(), date: today() }, "New job");
    app.update({ notice: null, opened: new Set([...app.state.opened, "job block"]) });
  } catch (error) {
    app.say(`The new job could not be made: ${messageOf(error)}`, "bad");
  }
}

/** An empty job as the core makes it; the build ships a copy, so that nobody waits for Python. */
async function blankJob(app: App, units: UnitSystem): Promise<Row> {
  if (app.state.core.phase === "ready") return app.core.call<Row>("blank", [units]);
  const response = await fetch("blank.json").catch(() => null);
  if (response?.ok !== true) return app.core.call<Row>("blank", [units]);
  return ((await response.json()) as Record<UnitSystem, Row>)[units];
}

/** Keep a job that is new to this tablet, and open it. */
export async function keepNew(app: App, job: Row, reason: string): Promise<void> {
  const id = String(job["id"] ?? "") || newId();
  await app.store.create({ ...job, id } as Job, reason);
  void app.store.requestPersistence();
  go({ page: "wall", job: id });
}

export async function openDemo(app: App, name: string): Promise<void> {
  try {
    const demo = app.state.demos.find((item) => item.id === name || item.file === `demo/${name}.beadwright.json`) ?? (name === "" ? app.state.demos[0] : undefined);
    if (demo === undefined) throw new Error("this build has no such demo job");
    const jobs = await app.store.list();
    if (!jobs.some((summary) => summary.id === demo.id)) {
      const response = await fetch(demo.file);
      if (!response.ok) throw new Error(`its file is missing (${response.status})`);
      await app.store.create({ ...((await response.json()) as Row), id: demo.id } as Job, "Demo job");
    }
    location.replace(href({ page: "wall", job: demo.id }));
  } catch (error) {
    app.say(`The demo could not be opened: ${messageOf(error)}`, "bad");
    go({ page: "jobs" });
  }
}

export async function removeJob(app: App, id: string, title: string): Promise<void> {
  try {
    if (app.state.open?.id === id) letGo(app);
    await app.store.remove(id);
    app.say(`“${title}” is in the bin. It stays there until you empty it.`);
  } catch (error) {
    app.say(`The job could not be removed: ${messageOf(error)}`, "bad");
  }
  await refreshJobs(app);
}

export async function takeOver(app: App): Promise<void> {
  const { id } = app.open;
  try {
    showOpened(app, id, await app.store.takeOver(id));
  } catch (error) {
    app.say(`This window could not take over: ${messageOf(error)}`, "bad");
  }
}

/** The offered draft becomes the job, as a step that can be undone. */
export async function restoreDraft(app: App): Promise<void> {
  const { id, draft, version } = app.open;
  if (draft === null) return;
  app.updateOpen({ job: draft.job, committed: draft.job, draft: null, version: version + 1 });
  askForAnswer(app);
  await app.store.restoreDraft(id).catch((error: unknown) => app.say(messageOf(error), "bad"));
  app.update({ history: app.store.history(id) });
}

export async function discardDraft(app: App): Promise<void> {
  await app.store.discardDraft(app.open.id, true);
  app.updateOpen({ draft: null });
}

export async function refreshJobs(app: App): Promise<void> {
  try {
    app.update({ jobs: await app.store.list() });
  } catch (error) {
    app.update({ jobs: [] });
    app.say(messageOf(error), "bad");
  }
}

export async function refreshKept(app: App): Promise<void> {
  try {
    const [facts, bin, quarantine] = await Promise.all([app.store.facts(), app.store.bin(), app.store.quarantine()]);
    app.update({ facts, bin, quarantine });
  } catch (error) {
    app.say(messageOf(error), "bad");
  }
}

export async function putBack(app: App, id: string): Promise<void> {
  await app.store.putBack(id).catch((error: unknown) => app.say(messageOf(error), "bad"));
  await refreshKept(app);
}

export async function emptyBin(app: App): Promise<void> {
  await app.store.emptyBin().catch((error: unknown) => app.say(messageOf(error), "bad"));
  app.update({ asking: null });
  await refreshKept(app);
}

export async function refreshRevisions(app: App, id: string): Promise<void> {
  try {
    const [revisions, setAside] = await Promise.all([app.store.revisions(id), app.store.keptDrafts(id)]);
    app.update({ revisions, setAside });
  } catch (error) {
    app.update({ revisions: [], setAside: [] });
    app.say(messageOf(error), "bad");
  }
}

/** An earlier revision becomes the job again, as a new step. */
export async function bringBack(app: App, rev: number): Promise<void> {
  try {
    await becomeJob(app, await app.store.openRevision(app.open.id, rev), `Copy ${rev}`);
  } catch (error) {
    app.say(messageOf(error), "bad");
  }
}

/** Typing that was set aside becomes the job, as a new step; its copy stays. */
export async function bringBackTyping(app: App, at: string, job: Row): Promise<void> {
  await becomeJob(app, job as Job, `The typing of ${clockText(at)}`).catch((error: unknown) => app.say(messageOf(error), "bad"));
}

async function becomeJob(app: App, job: Job, name: string): Promise<void> {
  const { id } = app.open;
  app.updateOpen({ job, committed: job, version: app.open.version + 1 });
  await app.store.commit(id, job, `Brought back: ${name}`);
  app.update({ history: app.store.history(id) });
  app.say(`${name} is the job again. Undo takes you back.`, "plain", true);
  go({ page: "wall", job: id });
}

/** The one door for bytes from outside. */
export async function readFile(app: App, bytes: Uint8Array): Promise<Opened> {
  return app.core.call<Opened>("open_file", [bytes]);
}

export function today(): string {
  const now = new Date();
  const two = (n: number): string => String(n).padStart(2, "0");
  return `${now.getFullYear()}-${two(now.getMonth() + 1)}-${two(now.getDate())}`;
}
