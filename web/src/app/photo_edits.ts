// Putting photos to a joint and taking them off, as steps that can be undone.

import { App, messageOf } from "./app";
import { changeJob } from "./editing";
import { count } from "./files";
import { loadPhotos } from "./photos";
import { get, getRows, set } from "./pointer";

export async function addPhotos(app: App, index: number, files: File[], keepOriginal: boolean): Promise<void> {
  const { id } = app.open;
  const jointId = String(getRows(app.job, "/joints")[index]?.["id"] ?? "");
  try {
    const added: string[] = [];
    for (const file of files) added.push((await app.store.attachPhoto(id, file, { keepOriginal })).id);
    if (app.state.open?.id !== id) return;
    const at = getRows(app.job, "/joints").findIndex((row) => row["id"] === jointId);
    if (at < 0) return;
    const pointer = `/joints/${at}/photos`;
    changeJob(app, `Added ${count(added.length, "photo")}`, (job) => set(job, pointer, [...asList(get(job, pointer)), ...added]));
    await loadPhotos(app, jointId);
  } catch (error) {
    app.say(messageOf(error), "bad");
  }
}

/** Only the joint's mention goes; the picture stays in the store, so that Undo can bring it back. */
export function dropPhoto(app: App, index: number, photo: string): void {
  const pointer = `/joints/${index}/photos`;
  changeJob(app, "Took a photo off", (job) => set(job, pointer, asList(get(job, pointer)).filter((id) => id !== photo)));
}

function asList(value: unknown): unknown[] {
  return Array.isArray(value) ? (value as unknown[]) : [];
}
