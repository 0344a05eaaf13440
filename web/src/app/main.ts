// Entry: the real neighbours.

import { CoreClient } from "../core/client";
import { Store } from "../store/index";
import { boot } from "./boot";
import { offlineCopy } from "./offline";

const APP_VERSION = "0.1.0";

const root = document.getElementById("app");
if (root === null) throw new Error("the page has no place for the app");
const core = new CoreClient();
const store = await Store.open({ app: APP_VERSION });
boot(root, { store, core, offline: offlineCopy(store, core) });
