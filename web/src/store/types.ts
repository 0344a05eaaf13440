// The shapes that the store keeps and hands out. It knows no trade: a job is an opaque JSON object with an id.

export type Json = null | boolean | number | string | Json[] | { [key: string]: Json };

export type Job = Record<string, unknown> & { id: string; title?: string };

export interface JobSummary {
  id: string;
  title: string;
  joints: number;
  savedAt: string;
  rev: number;
  readOnly: boolean;
}

export interface SaveState {
  kind: "idle" | "pending" | "saving" | "saved" | "failed" | "read-only";
  savedAt: string | null;
  /** Ready to show. */
  text: string;
}

export interface OpenResult {
  job: Job;
  rev: number;
  savedAt: string | null;
  /** Text that was typed and not saved when the page ended; offered, never applied by itself. */
  draft: { job: Job; at: string } | null;
  /** A message when the newest revision was damaged and an older one was opened. */
  recovered: string | null;
  readOnly: { reason: string; code: ReadOnlyCode } | null;
}

export type ReadOnlyCode = "other-window" | "newer-record" | "newer-app" | "no-storage";

export interface StoreFacts {
  /** True or false when the browser has said; null when it cannot or has not yet. */
  persisted: boolean | null;
  usageBytes: number | null;
  quotaBytes: number | null;
  lastBackupAt: string | null;
  quarantined: number;
  /** Jobs with changes that are in no backup. */
  notBackedUp: number;
  jobs: number;
  inBin: number;
  photos: number;
  photoBytes: number;
  text: string[];
}

export interface RevisionInfo {
  rev: number;
  savedAt: string;
  reason: string;
  pinned: boolean;
  exported: boolean;
  /** Length of the JSON text in characters. */
  size: number;
}

export interface QuarantineInfo {
  key: string;
  id: string;
  reason: string;
  at: string;
  /** The record as it was found, as JSON text. */
  raw: string;
}

/** One kept record, in the database and in a backup file alike. */
export interface Envelope<P = unknown> {
  kind: "job" | "draft" | "photo";
  schema: number;
  id: string;
  rev: number;
  parent: number | null;
  saved_at: string;
  app: string;
  core: string;
  tables: string[];
  payload: P;
  sha256: string;
}

export interface RevisionMark {
  rev: number;
  saved_at: string;
  reason: string;
  size: number;
  pinned: boolean;
  exported: boolean;
}

/** The record in `jobs`: which revision is the job now, and which are kept. */
export interface Pointer {
  id: string;
  rev: number;
  sha256: string;
  schema: number;
  title: string;
  joints: number;
  saved_at: string;
  removed_at: string | null;
  /** The newest revision that is in a file outside the browser. */
  backup: { rev: number; at: string } | null;
  revisions: RevisionMark[];
}

export interface DraftRecord {
  id: string;
  /** "now" for what is being typed; "left …" for the last words of a window that went away; "kept …" for copies set aside. */
  slot: string;
  envelope: Envelope<Job>;
}

export interface QuarantineRecord {
  key: string;
  id: string;
  from: string;
  reason: string;
  at: string;
  record: unknown;
}

export interface PhotoMeta {
  job: string;
  name: string;
  type: string;
  width: number | null;
  height: number | null;
  bytes: number;
  data_sha256: string;
  taken_at: string;
  /** Size and type of the untouched original when it is kept beside the smaller picture. */
  original: { type: string; bytes: number; data_sha256: string } | null;
  /** Why the picture could not be read, when it could not; the file is kept as it came. */
  problem: string | null;
}

export interface PhotoRef extends PhotoMeta {
  id: string;
}

export type PhotoRecord =
  | { id: string; part: "meta"; job: string; envelope: Envelope<PhotoMeta> }
  | { id: string; part: "shown" | "original"; data: ArrayBuffer };

export interface PhotoOptions {
  name?: string;
  keepOriginal?: boolean;
  longestEdgePx?: number;
  quality?: number;
}

export interface Clash {
  id: string;
  title: string;
  mine: { rev: number; savedAt: string };
  theirs: { rev: number; savedAt: string };
}

export type ClashChoice = "keep" | "replace" | "both";

export interface RestoreResult {
  restored: number;
  skipped: number;
  photos: number;
  issues: string[];
}

export interface HistoryEntry {
  rev: number;
  label: string;
  at: string;
}

/** The steps of one job, oldest first; `at` is the one on screen. */
export interface HistoryRecord {
  entries: HistoryEntry[];
  at: number;
}

export interface HistoryState {
  canUndo: boolean;
  canRedo: boolean;
  undoLabel: string | null;
  redoLabel: string | null;
  /** How many steps back are there. */
  depth: number;
}

export type StoreErrorCode =
  | "not-open"
  | "not-found"
  | "exists"
  | "read-only"
  | "quota"
  | "no-storage"
  | "conflict"
  | "newer-app"
  | "damaged"
  | "too-large"
  | "refused"
  | "failed";

export class StoreError extends Error {
  readonly code: StoreErrorCode;

  constructor(code: StoreErrorCode, message: string, cause?: unknown) {
    super(message, cause === undefined ? undefined : { cause });
    this.name = "StoreError";
    this.code = code;
  }
}

export interface MigrationStep {
  to: number;
  /** A pure function on the payload of a job record. */
  migrate: (payload: Job) => Job;
}

export interface StoreOptions {
  app: string;
  core?: string;
  tables?: string[];
  /** Asked once a job has been read; false sends the record to quarantine. */
  validate?: (job: Job) => Promise<boolean>;
  /** Name of the database; another name is another store. */
  name?: string;
  /** What a later version of the app would have; tests stand in for it with these. */
  schema?: number;
  databaseVersion?: number;
  migrations?: readonly MigrationStep[];
}
