// Asking the core for answers. The newest question wins, and the last good answer stays until there is a better one.

import { CoreFault, Superseded } from "../core/client";
import { App } from "./app";
import type { Evaluation, Frames, Row } from "./contract";
import { withUnit } from "./fields";
import { get, getRows, set } from "./pointer";

/** An answer that comes sooner than this is never called old; it would only flicker. */
const STALE_AFTER_MS = 350;
/** The scrubber's frames wait for a pause in typing. */
const FRAMES_DELAY_MS = 120;

let staleTimer: ReturnType<typeof setTimeout> | undefined;
let framesTimer: ReturnType<typeof setTimeout> | undefined;

export function askForAnswer(app: App): void {
  const open = app.state.open;
  if (open === null) return;
  markStaleSoon(app);
  if (app.state.core.phase !== "ready") return;
  void ask(app, open.id, open.version);
}

async function ask(app: App, jobId: string, version: number): Promise<void> {
  try {
    const evaluation = await app.core.call<Evaluation>("evaluate", [jobForCore(app), wantedInFull(app)], { key: "evaluate" });
    if (app.state.open?.id !== jobId) return;
    const isCurrent = app.state.open.version === version;
    if (isCurrent) clearTimeout(staleTimer);
    const spoken = newsOf(app, evaluation) ?? app.state.spoken;
    app.update({ result: { jobId, version, evaluation }, coreFault: null, spoken, ...(isCurrent ? { isStale: false } : {}) });
    askForFrames(app);
  } catch (error) {
    if (error instanceof Superseded) return;
    if (app.state.open?.id !== jobId) return;
    app.update({ coreFault: faultText(error), isStale: app.state.result !== null });
  }
}

function faultText(error: unknown): string {
  const code = error instanceof CoreFault ? error.code : "unknown";
  return `The working could not be done this time (${code}). What you typed is safe. Change a field or load the page again to try once more.`;
}

/** The job with the field that is being typed completed, as leaving the field would complete it. */
function jobForCore(app: App): Row {
  const pending = app.state.pending;
  if (pending === null || pending.unit === null) return app.job;
  const typed = String(get(app.job, pending.pointer) ?? "");
  return set(app.job, pending.pointer, withUnit(typed, pending.unit));
}

function wantedInFull(app: App): string[] {
  const route = app.state.route;
  if (route.page === "joint" || route.page === "face") return [route.joint];
  if (route.page === "sheet") return route.joint !== null ? [route.joint] : getRows(app.job, "/joints").map((row) => String(row["id"]));
  if (route.page === "takeoff") return ["takeoff"];
  if (route.page === "cure") return ["cure"];
  return [];
}

/** What to say aloud when the verdict of the joint on screen has changed. */
function newsOf(app: App, next: Evaluation): string | null {
  const route = app.state.route;
  if (route.page === "takeoff") {
    const text = next.takeoff?.left_out_text;
    return text !== undefined && text !== (app.state.result?.evaluation.takeoff?.left_out_text ?? "") ? text || "Nothing is left out." : null;
  }
  if (route.page === "cure") {
    const first = next.cure?.answers?.[0];
    return first !== undefined && first.answer !== app.state.result?.evaluation.cure?.answers?.[0]?.answer ? `${first.question} ${first.answer}.` : null;
  }
  if (route.page !== "joint" && route.page !== "face") return null;
  const joint = next.joints[route.joint];
  const before = app.state.result?.evaluation.joints[route.joint];
  if (joint === undefined) return null;
  if (route.page === "face") {
    const isNew = joint.face?.verdict_word !== before?.face?.verdict_word;
    return isNew && joint.face ? `${joint.name}: ${joint.face.verdict_word}. ${joint.face.verdict_text}` : null;
  }
  return joint.verdict_word !== before?.verdict_word ? `${joint.name}: ${joint.verdict_word}.` : null;
}

function markStaleSoon(app: App): void {
  clearTimeout(staleTimer);
  if (app.state.result === null) return;
  staleTimer = setTimeout(() => {
    const { open, result } = app.state;
    if (open !== null && result !== null && result.version !== open.version) app.update({ isStale: true });
  }, STALE_AFTER_MS);
}

function askForFrames(app: App): void {
  clearTimeout(framesTimer);
  const route = app.state.route;
  if (route.page !== "joint") return;
  const joint = route.joint;
  framesTimer = setTimeout(() => {
    const version = app.state.open?.version ?? -1;
    if (app.state.open === null || app.state.core.phase !== "ready") return;
    app.core
      .call<Frames>("frames", [jobForCore(app), joint], { key: "frames" })
      .then((data) => {
        const isWanted = app.state.route.page === "joint" && app.state.route.joint === joint;
        if (isWanted) app.update({ frames: { jointId: joint, version, data } });
      })
      .catch((error: unknown) => {
        if (!(error instanceof Superseded) && app.state.frames?.version !== version) app.update({ frames: null });
      });
  }, FRAMES_DELAY_MS);
}
