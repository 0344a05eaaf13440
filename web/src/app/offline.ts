// What is known of the offline copy, as one line for the foot of the page.

import type { Store } from "../store/index";
import type { OfflinePort } from "./ports";

export function offlineCopy(store: Store): OfflinePort {
  void store;
  return Object.assign(new EventTarget(), { state: { text: "Offline copy: not yet known", updateWaiting: false }, takeUpdate: async () => undefined });
}
