// The one state object. Pages are drawn from it; actions make a new one.

import type { CoreStatus } from "../core/client";
import type { Clash, ClashChoice, HistoryState, JobSummary, QuarantineInfo, RevisionInfo, SaveState, StoreFacts } from "../store/types";
import type { Change, Comparison, Conflict, Evaluation, Forms, Frames, Issue, Pasted, Row } from "./contract";
import type { Shown } from "./photos";
import type { OfflineState } from "./ports";
import type { Route } from "./routes";

export type Theme = "paper" | "sun" | "dark";

export interface OpenJob {
  id: string;
  job: Row;
  /** The last whole that was committed; typing runs ahead of it. */
  committed: Row;
  /** Counts every change, so that an answer can be matched to what it answers. */
  version: number;
  draft: { job: Row; at: string } | null;
  recovered: string | null;
  readOnly: { reason: string; code: string } | null;
  /** Looked at without being kept: a newer file, or a sample in a browser that keeps nothing. */
  isLoose: boolean;
}

/** A field in which typing is not yet committed; the unit is the chip beside it. */
export interface Pending {
  pointer: string;
  unit: string | null;
}

export interface Result {
  jobId: string;
  version: number;
  evaluation: Evaluation;
}

export interface FrameSet {
  jointId: string;
  version: number;
  data: Frames;
}

/** A file that has been read and waits for a decision. */
export interface Incoming {
  fileName: string;
  raw: Uint8Array;
  job: Row | null;
  issues: Issue[];
  readOnly: boolean;
  mine: Row | null;
  changes: Change[];
  merged: { job: Row; conflicts: Conflict[]; choices: Record<string, "mine" | "theirs"> } | null;
}

/** What the take-off page holds beside the job: the cell touched last, a paste, a comparison. */
export interface TakeoffDesk {
  /** List and row of the cell touched last, and its field: what 'fill down' and 'duplicate' work on. */
  cell: { list: string; index: number; key: string } | null;
  /** How many rows of each list are on the page. */
  shown: Readonly<Record<string, number>>;
  paste: { text: string; columns: (string | null)[] | null; read: Pasted | null } | null;
  /** What to change for the comparison, as entered, and its answer with the version that it answers. */
  change: Readonly<Record<string, string>>;
  compared: { version: number; data: Comparison } | null;
}

export const NO_TAKEOFF: TakeoffDesk = { cell: null, shown: {}, paste: null, change: {}, compared: null };

export interface Notice {
  text: string;
  tone: "plain" | "bad";
  /** An undo offered with the notice. */
  canUndo?: boolean;
}

/** A sample job of the build, as its `demo/index.json` lists it. */
export interface Demo {
  file: string;
  id: string;
  title: string;
}

export interface State {
  route: Route;
  theme: Theme;
  core: CoreStatus;
  /** Why the last answer failed, for people; null when it did not. */
  coreFault: string | null;
  forms: Forms | null;
  formsFault: string | null;
  jobs: JobSummary[] | null;
  demos: Demo[];
  bin: JobSummary[] | null;
  quarantine: QuarantineInfo[] | null;
  revisions: RevisionInfo[] | null;
  /** Typing that was never saved and was set aside, newest first. */
  setAside: { slot: string; at: string; job: Row }[];
  open: OpenJob | null;
  openFault: string | null;
  pending: Pending | null;
  history: HistoryState;
  result: Result | null;
  isStale: boolean;
  frames: FrameSet | null;
  /** Frame shown by the scrubber; null means where the core starts it. */
  frameIndex: number | null;
  incoming: Incoming | null;
  /** A job that stands both in a backup and on this tablet, and waits for a choice. */
  clash: { clash: Clash; choose: (choice: ClashChoice) => void } | null;
  takeoff: TakeoffDesk;
  save: SaveState;
  offline: OfflineState;
  facts: StoreFacts | null;
  /** Pictures on the page, by photo id. */
  photos: Readonly<Record<string, Shown>>;
  /** Unit chips that people chose, by pointer. */
  chips: Readonly<Record<string, string>>;
  /** Disclosures that are open, by name. */
  opened: ReadonlySet<string>;
  isArranging: boolean;
  /** What waits for a second tap, such as removing a job. */
  asking: string | null;
  notice: Notice | null;
  spoken: string;
}

export const NO_HISTORY: HistoryState = { canUndo: false, canRedo: false, undoLabel: null, redoLabel: null, depth: 0 };
