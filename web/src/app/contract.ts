// The shapes that the core sends. The shell shows them; it never works any of them out.

export type UnitSystem = "metric" | "inch";
export type Severity = "error" | "warning" | "note";
export type Row = Record<string, unknown>;

export interface Choice {
  value: string;
  label: string;
  group?: string;
  help?: string;
  [more: string]: unknown;
}

export interface FieldSpec {
  key: string;
  label: string;
  symbol: string | null;
  kind: string;
  units: Partial<Record<UnitSystem, string[]>>;
  default: string | Partial<Record<UnitSystem, string>> | null;
  required: boolean;
  choices: Choice[] | null;
  choices_from: null | "sealants" | "joints" | { field: string; key: string };
  section: string;
  show_when: null | Record<string, string[]>;
  help: string;
  example: string | Partial<Record<UnitSystem, string>>;
  source: string;
  multiline?: boolean;
  advanced?: boolean;
}

export interface FieldGroup {
  key: string;
  label: string;
  path: string;
  fields: FieldSpec[];
}

export interface Forms {
  core: { version: string; tables: string[] };
  groups: FieldGroup[];
  words: Record<string, unknown>;
  /** Rows to begin with, by group and system; all of them to edit. */
  starters?: Record<string, Partial<Record<UnitSystem, Row[]>>>;
}

export interface Issue {
  path: string;
  code: string;
  severity: Severity;
  message: string;
}

export interface Reading {
  reads: string;
  short: string;
}

export interface Answer {
  key: string;
  question: string;
  answer: string;
  detail?: string;
  tone?: "plain" | "ok" | "warn" | "bad";
}

export interface AnswerTable {
  key: string;
  title: string;
  columns: { label: string; align?: "left" | "right" }[];
  rows: { cells: string[]; mark?: null | "chosen" | "bad" | "total" }[];
  note?: string | null;
}

export interface Step {
  key: string;
  title: string;
  symbol?: string | null;
  formula?: string | null;
  numbers?: string | null;
  result: string;
  source?: string | null;
  status?: string | null;
}

export interface Check {
  label: string;
  value: string;
  limit: string;
  pass: boolean | null;
  text?: string;
}

export interface FaceAnswer {
  verdict: string;
  verdict_word: string;
  verdict_text: string;
  answers: Answer[];
  checks: Check[];
  steps: Step[];
}

export interface JointAnswer {
  id: string;
  name: string;
  kind: string;
  short: boolean;
  verdict: string;
  verdict_word: string;
  verdict_text?: string;
  headline?: { width?: string | null; depth?: string | null; rod?: string | null } | null;
  answers?: Answer[];
  tables?: AnswerTable[];
  face?: FaceAnswer | null;
  steps?: Step[];
  notes?: { severity: string; text: string }[];
  cautions?: string[];
  drawing?: string | null;
}

export interface Caution {
  id: string;
  severity: "note" | "warning" | "stop";
  title: string;
  text: string;
  source?: string;
  joints?: string[];
}

export interface Evaluation {
  core: { version: string; tables: string[] };
  issues: Issue[];
  readings: Record<string, Reading>;
  joints: Record<string, JointAnswer>;
  takeoff?: TakeoffAnswer | null;
  cautions: Caution[];
  cure?: CureAnswer | null;
  facts: { label: string; value: string }[];
}

export interface CureDrawing {
  key: string;
  title: string;
  svg: string;
}

interface CurePart {
  trouble?: null | string | { code: string; text: string };
  answers?: Answer[];
  tables?: AnswerTable[];
  drawings?: CureDrawing[];
  notes?: { severity: string; key?: string; text: string }[];
  steps?: Step[];
}

export interface CureRun extends CurePart {
  id: string;
  name: string;
  joint: string | null;
  start_text: string;
  section?: { method: string } | null;
  record?: { label: string; value: string }[];
  headline?: { through: string | null; green: string | null } | null;
}

/** Empty where the job has no cure; short where it was not asked for. */
export interface CureAnswer extends CurePart {
  short?: boolean;
  runs?: Record<string, CureRun>;
  room?: CurePart | null;
}

/** The take-off; an empty object while there is none, the totals alone where it is not asked for in full. */
export interface TakeoffAnswer {
  short?: boolean;
  left_out_text?: string;
  runs?: { path: string; text: string; left_out: string | null }[];
  answers?: Answer[];
  tables?: AnswerTable[];
  drawing?: string | null;
  notes?: { severity: string; text: string }[];
  steps?: Step[];
}

/** Rows read from a pasted text, with how each column was understood. */
export interface Pasted {
  rows: Row[];
  columns: { index: number; header: string; field: string | null; label: string | null; samples: string[]; text: string }[];
  separator: string;
  decimal: string;
  has_header: boolean;
  issues: { severity: Severity; message: string }[];
  text: string;
}

export interface Comparison {
  table: AnswerTable | null;
  error?: string;
}

export interface Frame {
  fraction: number;
  title: string;
  lines: { label: string; value: string }[];
  drawing: string;
}

export interface Frames {
  frames: Frame[];
  start: number;
  caption: string;
}

export interface Opened {
  job: Row | null;
  issues: Issue[];
  read_only: boolean;
  from_version: number | null;
}

export interface Change {
  path: string;
  label: string;
  mine: unknown;
  theirs: unknown;
  kind: "changed" | "added" | "removed";
}

export interface Conflict {
  path: string;
  label: string;
  base: unknown;
  mine: unknown;
  theirs: unknown;
}

export interface ExportFile {
  name: string;
  media: string;
  bytes: Uint8Array | string;
}
