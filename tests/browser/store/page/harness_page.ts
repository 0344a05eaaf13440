// A page small enough to be killed all day: one field, one line that says whether it is saved. The hooks
// (data-testid) are those of the app itself, so that the kill harness can drive either.
import { Store, type Job } from "../../../../web/src/store/index";

const ID = "kill";
const FILLER = "0123456789abcdef".repeat(2048);

const store = await Store.open({ app: "harness" });
document.body.insertAdjacentHTML(
  "beforeend",
  `<div data-testid="field-title"><input></div><p data-testid="save-state" data-kind=""></p><p data-testid="recovered"></p>`,
);
const hook = (name: string): HTMLElement => document.querySelector(`[data-testid="${name}"]`)!;
const input = document.querySelector("input")!;

function show(): void {
  const state = store.saveState(ID);
  hook("save-state").dataset["kind"] = state.kind;
  hook("save-state").textContent = state.text;
}

/** Every part names the edit: a record put together from two edits would show. */
function jobFor(title: string): Job {
  return { id: ID, title, joints: Array.from({ length: 8 }, (_, i) => ({ id: String(i), note: title })), filler: title + FILLER };
}

store.addEventListener("save-state", show);
if ((await store.list()).some((summary) => summary.id === ID)) {
  const opened = await store.open(ID);
  input.value = String(opened.job.title);
  hook("recovered").textContent = opened.recovered ?? "";
} else {
  input.value = "0";
  await store.create(jobFor("0"));
}
input.addEventListener("input", () => store.change(ID, jobFor(input.value)));
input.addEventListener("change", () => void store.commit(ID, jobFor(input.value)));
show();
