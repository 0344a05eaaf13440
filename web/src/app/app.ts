// The app: one state, one way round. An action calls `update`, and the page is drawn again from the whole state.

import type { Row } from "./contract";
import type { Store } from "../store/index";
import type { CorePort, OfflinePort } from "./ports";
import type { OpenJob, State } from "./state";

export interface Neighbours {
  store: Store;
  core: CorePort;
  offline: OfflinePort;
}

export class App {
  state: State;
  readonly store: Store;
  readonly core: CorePort;
  readonly offline: OfflinePort;
  readonly #draw: (app: App) => void;
  #isDrawPending = false;

  constructor(first: State, neighbours: Neighbours, draw: (app: App) => void) {
    this.state = first;
    this.store = neighbours.store;
    this.core = neighbours.core;
    this.offline = neighbours.offline;
    this.#draw = draw;
  }

  update(change: Partial<State>): void {
    this.state = { ...this.state, ...change };
    if (this.#isDrawPending) return;
    this.#isDrawPending = true;
    queueMicrotask(() => {
      this.#isDrawPending = false;
      this.#draw(this);
    });
  }

  updateOpen(change: Partial<OpenJob>): void {
    if (this.state.open !== null) this.update({ open: { ...this.state.open, ...change } });
  }

  /** The open job; asking for it where none is open is a fault of ours. */
  get open(): OpenJob {
    if (this.state.open === null) throw new Error("no job is open");
    return this.state.open;
  }

  get job(): Row {
    return this.open.job;
  }

  say(text: string, tone: "plain" | "bad" = "plain", canUndo = false): void {
    this.update({ notice: { text, tone, canUndo } });
  }
}

export function messageOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}
