// Which revisions of a job stay. Pure: the clock and the calendar come in as arguments.

export const KEEP_OF_TODAY = 3;
export const KEEP_IN_ALL = 10;

export interface Kept {
  rev: number;
  saved_at: string;
  pinned: boolean;
  exported: boolean;
}

/** The day that a moment falls on, where the tablet is. */
export function localDay(iso: string): string {
  const at = new Date(iso);
  if (Number.isNaN(at.getTime())) return "unknown";
  return `${at.getFullYear()}-${at.getMonth() + 1}-${at.getDate()}`;
}

/**
 * The revisions that may go: 3 of today stay, the last of each earlier day, 10 in all; and besides these
 * every pinned or exported one and those in `held` (the undo steps).
 */
export function revisionsToDrop(
  revisions: readonly Kept[],
  now: string,
  held: ReadonlySet<number> = new Set(),
  dayOf: (iso: string) => string = localDay,
): number[] {
  const newestFirst = [...revisions].sort((a, b) => b.rev - a.rev);
  const today = dayOf(now);
  const keep = new Set<number>();
  const perDay = new Map<string, number>();
  for (const { rev, saved_at } of newestFirst) {
    if (keep.size >= KEEP_IN_ALL) break;
    // A clock that was set back leaves records of tomorrow; they count as today's.
    const day = saved_at > now ? today : dayOf(saved_at);
    const taken = perDay.get(day) ?? 0;
    if (taken >= (day === today ? KEEP_OF_TODAY : 1)) continue;
    perDay.set(day, taken + 1);
    keep.add(rev);
  }
  const newest = newestFirst[0];
  return newestFirst
    .filter((r) => r !== newest && !keep.has(r.rev) && !r.pinned && !r.exported && !held.has(r.rev))
    .map((r) => r.rev)
    .reverse();
}
