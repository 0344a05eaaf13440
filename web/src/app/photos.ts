// Photos of a joint. The pictures lie in the store; the joint's row names them by id, so that undo and merging hold
// for them as for all else.

import { App, messageOf } from "./app";
import type { Row } from "./contract";
import { getRows } from "./pointer";

export interface Shown {
  /** Address of the picture in this page, or null when it cannot be read. */
  url: string | null;
  note: string;
}

export function photoIds(joint: Row): string[] {
  const list = joint["photos"];
  return Array.isArray(list) ? list.filter((id): id is string => typeof id === "string") : [];
}

/** Fetch the pictures of a joint that are not on the page yet. */
export async function loadPhotos(app: App, jointId: string): Promise<void> {
  const joint = app.state.open === null ? undefined : getRows(app.job, "/joints").find((row) => row["id"] === jointId);
  for (const id of joint === undefined ? [] : photoIds(joint)) {
    if (app.state.photos[id] !== undefined) continue;
    const shown = await app.store.photo(id).then(
      (blob): Shown => ({ url: URL.createObjectURL(blob), note: "" }),
      (error: unknown): Shown => ({ url: null, note: messageOf(error) }),
    );
    app.update({ photos: { ...app.state.photos, [id]: shown } });
  }
}
