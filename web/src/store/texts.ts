// What the store says to people. Facts only, short words.

const MINUTE_MS = 60_000;
const HOUR_MS = 60 * MINUTE_MS;
const DAY_MS = 24 * HOUR_MS;
const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

const two = (n: number): string => String(n).padStart(2, "0");

export function clockText(iso: string, now: Date = new Date()): string {
  const at = new Date(iso);
  const clock = `${two(at.getHours())}:${two(at.getMinutes())}`;
  if (at.toDateString() === now.toDateString()) return clock;
  const day = `${at.getDate()} ${MONTHS[at.getMonth()]!}`;
  return at.getFullYear() === now.getFullYear() ? `${day}, ${clock}` : `${day} ${at.getFullYear()}, ${clock}`;
}

export function savedText(iso: string, now: Date = new Date()): string {
  return `Saved ${clockText(iso, now)} on this tablet`;
}

export function draftText(iso: string, now: Date = new Date()): string {
  return `Draft kept ${clockText(iso, now)}, not yet saved`;
}

export function ageText(iso: string, now: Date = new Date()): string {
  const age = now.getTime() - new Date(iso).getTime();
  const count = (n: number, word: string): string => `${n} ${word}${n === 1 ? "" : "s"} ago`;
  if (age < 2 * MINUTE_MS) return "just now";
  if (age < HOUR_MS) return count(Math.floor(age / MINUTE_MS), "minute");
  if (age < DAY_MS) return count(Math.floor(age / HOUR_MS), "hour");
  return count(Math.floor(age / DAY_MS), "day");
}

export function bytesText(bytes: number): string {
  if (bytes < 1000) return `${bytes} bytes`;
  if (bytes < 1e6) return `${Math.round(bytes / 1e3)} kB`;
  if (bytes < 1e9) return `${(bytes / 1e6).toFixed(bytes < 1e7 ? 1 : 0)} MB`;
  return `${(bytes / 1e9).toFixed(1)} GB`;
}

export function backupText(lastBackupAt: string | null, now: Date = new Date()): string {
  return lastBackupAt === null ? "No backup yet" : `Last backup ${ageText(lastBackupAt, now)}`;
}

export function persistText(persisted: boolean | null): string {
  if (persisted === true) return "The browser has promised not to clear these jobs by itself";
  if (persisted === false) return "The browser may clear these jobs when space runs out, so make backups";
  return "This browser does not say whether it keeps these jobs, so make backups";
}

export const TEXT = {
  idle: "Nothing changed yet",
  pending: "Not yet saved",
  saving: "Saving…",
  full: "Not saved: this tablet has no space left. Your work is still on screen. Export it now, then free some space.",
  failed: "Not saved: the browser's storage does not answer. Your work is still on screen. Export it now.",
  noStorage: "Not saved: this browser keeps nothing. Your work is only on screen. Export it before you close the page.",
  unreachable: "The jobs kept on this tablet cannot be reached: the browser's storage does not answer. Load the page again.",
  takenOver: "Another window has taken over this job. This window only reads it now.",
  otherWindow: "This job is open in another window. You can read it here, or take over.",
  fenced: "Not saved: another window has changed this job. What you typed here is kept as a copy.",
  newerApp: "A newer version of the app is open in another window. This one no longer saves. Close it or load it again.",
  newerRecord: "This job was saved by a newer version of the app. You can read it and export it as it is, but not change it.",
  blocked: "Close the other windows of this app, so that the newer version can open its data.",
  dropped: "The browser had lost the stored copy of this job. It was saved again from the screen.",
} as const;

export function recoveredText(faultyRev: number, reason: string, openedAt: string, now: Date = new Date()): string {
  return `The newest copy (${faultyRev}) could not be used: ${reason}. It was set aside, and the copy saved ${clockText(openedAt, now)} was opened.`;
}

export function broughtBackText(count: number): string {
  const jobs = count === 1 ? "1 job was" : `${count} jobs were`;
  return `The browser had lost its stored data. ${jobs} brought back from a second copy, without photos and older copies. Make a backup now.`;
}
