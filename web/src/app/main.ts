// Entry: the real neighbours.

import { CoreClient } from "../core/client";
import { Store } from "../store/index";
import { boot } from "./boot";
import { offlineCopy } from "./offline";

const APP_VERSION = "0.1.0";

const root = document.getElementById("app");
if (root === null) throw new Error("the page has no place for the app");
// Python starts while the store opens: the first verdict waits for the slower of the two, not for both.
const core = new CoreClient();
core.start();
const store = await Store.open({ app: APP_VERSION });
boot(root, { store, core, offline: offlineCopy(store, core) });
