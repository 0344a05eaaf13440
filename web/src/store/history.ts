// Undo and redo. A step is a whole saved revision: the list only says which ones, so it costs nothing to keep and is
// written in the same transaction as the revision itself. Pure functions on an immutable record.

import type { HistoryEntry, HistoryRecord, HistoryState } from "./types";

/** How many states are kept; the oldest falls off. */
export const MOST_STEPS = 61;

export const EMPTY_HISTORY: HistoryRecord = { entries: [], at: -1 };

/** A new state after the one on screen; what had been undone is given up. */
export function withStep(history: HistoryRecord, entry: HistoryEntry): HistoryRecord {
  const entries = [...history.entries.slice(0, history.at + 1), entry].slice(-MOST_STEPS);
  return { entries, at: entries.length - 1 };
}

/** Move back (-1) or forth (+1). The state moved to has been saved again as `rev`. */
export function withMove(history: HistoryRecord, by: -1 | 1, rev: number): HistoryRecord {
  const at = history.at + by;
  const target = history.entries[at];
  if (target === undefined) return history;
  const entries = [...history.entries];
  entries[at] = { ...target, rev };
  return { entries, at };
}

export function target(history: HistoryRecord, by: -1 | 1): HistoryEntry | null {
  return history.entries[history.at + by] ?? null;
}

export function describe(history: HistoryRecord): HistoryState {
  const here = history.entries[history.at];
  const next = history.entries[history.at + 1];
  return {
    canUndo: history.at > 0,
    canRedo: next !== undefined,
    undoLabel: history.at > 0 ? (here?.label ?? null) : null,
    redoLabel: next?.label ?? null,
    depth: Math.max(0, history.at),
  };
}

/** Read back from the database, where anything may have happened to it. */
export function checkedHistory(value: unknown): HistoryRecord {
  const record = value as Partial<HistoryRecord> | undefined;
  if (record === undefined || record === null || !Array.isArray(record.entries)) return EMPTY_HISTORY;
  const areSound = record.entries.every((e) => Number.isInteger(e?.rev) && typeof e.label === "string");
  if (!areSound || !Number.isInteger(record.at) || record.at! < -1 || record.at! >= record.entries.length) return EMPTY_HISTORY;
  return { entries: record.entries, at: record.at! };
}
