// A bare page for the tests and the benchmark of worker and offline copy: no shell, no storage.
import { CoreClient, CoreFault, Superseded } from "../../../web/src/core/client.ts";
import { offline } from "../../../web/src/sw/register.ts";

declare const __BUILD__: { stamp: string };

const address = new URLSearchParams(location.search);
const core = new CoreClient({ timeLimitMs: Number(address.get("limit") ?? 15_000) });
const status = document.getElementById("status") as HTMLElement;
const answer = document.getElementById("answer") as HTMLElement;
const texts: string[] = [];
core.addEventListener("status", () => {
  status.textContent = `${core.status.phase}: ${core.status.text}`;
  if (texts.at(-1) !== core.status.text) texts.push(core.status.text);
});

const log: string[] = [];
for (const name of ["ready", "update-waiting", "broken"] as const) offline.on(name, () => log.push(name));

async function firstVerdict(): Promise<void> {
  const job = (await (await fetch(`${address.get("job") ?? "demo/first.json"}`)).json()) as { joints: { id: string }[] };
  const ids = job.joints.slice(0, 1).map((joint) => joint.id);
  const result = await core.call<{ joints: Record<string, { verdict: string }> }>("evaluate", [job, ids]);
  answer.textContent = Object.values(result.joints)
    .map((joint) => joint.verdict)
    .join(" ");
  document.documentElement.dataset["verdictMs"] = String(Math.round(performance.now()));
}

Object.assign(window, { core, offline, log, texts, CoreFault, Superseded, stamp: __BUILD__.stamp, saves: 0, loads: Number(sessionStorage.getItem("loads") ?? 0) + 1 });
sessionStorage.setItem("loads", String((window as unknown as { loads: number }).loads));
core.start();
const first = firstVerdict().catch((error: unknown) => {
  answer.textContent = `failed: ${String(error)}`;
});
if (!address.has("nosw")) {
  void offline.register({
    after: first,
    beforeReload: async () => {
      sessionStorage.setItem("saved", String(Number(sessionStorage.getItem("saved") ?? 0) + 1));
    },
  });
}
