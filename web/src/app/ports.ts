// What the app asks of its neighbours. Screens can be tried with another core behind the same door.

import type { CoreStatus } from "../core/client";

export interface CorePort extends EventTarget {
  readonly status: CoreStatus;
  start(): void;
  call<T>(method: string, params: unknown[], options?: { key?: string; timeLimitMs?: number }): Promise<T>;
}

/** The offline copy of the app, as one line to show and, when a newer version waits, a way to take it. */
export interface OfflineState {
  text: string;
  updateWaiting: boolean;
}

export interface OfflinePort extends EventTarget {
  readonly state: OfflineState;
  takeUpdate(): Promise<void>;
}
