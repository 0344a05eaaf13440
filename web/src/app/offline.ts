// The offline copy as the app sees it: one line for the foot, and the change to a newer version after a save.

import type { Store } from "../store/index";
import { offline } from "../sw/register";
import type { CorePort, OfflinePort } from "./ports";

export function offlineCopy(store: Store, core: CorePort): OfflinePort {
  const save = (): Promise<void> => store.flush();
  void offline.register({ after: settled(core), beforeReload: save });
  const port: OfflinePort = Object.assign(new EventTarget(), {
    state: offline.state,
    takeUpdate: () => offline.applyUpdate(save),
  });
  offline.addEventListener("state", () => {
    Object.assign(port, { state: offline.state });
    port.dispatchEvent(new Event("change"));
  });
  return port;
}

/** The first start of the core has the line to itself; storing the app comes after. */
function settled(core: CorePort): Promise<void> {
  return new Promise((resolve) => {
    const look = (): void => {
      if (core.status.phase === "ready" || core.status.phase === "failed") resolve();
    };
    core.addEventListener("status", look);
    look();
  });
}
