// The list at the top of a page of all that stands in the way; each line jumps to its field.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { Issue, Row } from "../app/contract";
import { sectionsOf } from "../app/fields";
import { getRows, rowNameOf, split } from "../app/pointer";
import { go } from "../app/jobs";
import { fieldId, severityWord } from "./field";
import { focusSoon } from "./focus";
import { openParts } from "./form";
import { rowParts, SETTINGS_BLOCK, showRow } from "./rows";

const MOST_SHOWN = 6;

export function issueList(app: App, wanted: (issue: Issue) => boolean): TemplateResult | typeof nothing {
  const all = (app.state.result?.evaluation.issues ?? []).filter((issue) => issue.severity !== "note" && wanted(issue));
  if (all.length === 0) return nothing;
  const sorted = [...all].sort((one, other) => Number(other.severity === "error") - Number(one.severity === "error"));
  const isWhole = app.state.opened.has("all issues") || sorted.length <= MOST_SHOWN;
  const shown = isWhole ? sorted : sorted.slice(0, MOST_SHOWN);
  const errors = all.filter((issue) => issue.severity === "error").length;
  const title = errors > 0 ? `${errors} to fix${all.length > errors ? `, ${all.length - errors} to check` : ""}` : `${all.length} to check`;
  return html`<section class="issues" aria-label="To fix and check" data-testid="issues">
    <h2 class="issues-title">${title}</h2>
    <ul>
      ${shown.map(
        (issue) => html`<li>
          <a href="#${fieldId(issue.path)}" class="issue is-${issue.severity}" data-path=${issue.path} @click=${(event: Event) => jump(app, issue, event)}>
            <b>${severityWord(issue.severity)}:</b> ${issue.message}${placeWords(app, issue)}
          </a>
        </li>`,
      )}
    </ul>
    ${isWhole ? nothing : html`<button type="button" class="plain" @click=${() => openParts(app, ["all issues"])}>Show all ${all.length}</button>`}
  </section>`;
}

/** On the wall page a joint's fault needs the joint's name. */
function placeWords(app: App, issue: Issue): string {
  const [list, index, at] = split(issue.path);
  if (list === "takeoff" && index !== undefined && at !== undefined) {
    const row = getRows(app.job, `/${list}/${index}`)[Number(at)];
    return row === undefined ? "" : ` (${rowNameOf(row, "Row", Number(at))})`;
  }
  if (app.state.route.page !== "wall" || index === undefined || (list !== "joints" && list !== "sealants")) return "";
  const row = getRows(app.job, `/${list}`)[Number(index)];
  return row === undefined ? "" : ` (${rowNameOf(row, list === "joints" ? "Joint" : "Sealant", Number(index))})`;
}

/** Go to the page that has the field, open what hides it, and put the cursor there. */
export function jump(app: App, issue: Issue, event: Event): void {
  event.preventDefault();
  const [list, index, part] = split(issue.path);
  const job = app.open.id;
  if (list === "joints" && index !== undefined) {
    const id = String((getRows(app.job, "/joints")[Number(index)] as Row | undefined)?.["id"] ?? "");
    const page = part === "face" ? "face" : "joint";
    const route = app.state.route;
    if (!(route.page === page && "joint" in route && route.joint === id) && id !== "") go({ page, job, joint: id });
  } else if (list === "takeoff") {
    showRow(app, issue.path);
    if (app.state.route.page !== "takeoff") go({ page: "takeoff", job });
  } else if (list === "cure") {
    showRow(app, issue.path);
    if (app.state.route.page !== "cure") go({ page: "cure", job });
  } else if (app.state.route.page !== "wall") go({ page: "wall", job });
  openParts(app, partsAround(app, issue.path));
  focusSoon(fieldId(issue.path));
}

function partsAround(app: App, path: string): string[] {
  const base = path.slice(0, path.lastIndexOf("/"));
  const key = split(path).at(-1);
  const titles = (app.state.forms?.groups ?? [])
    .flatMap(sectionsOf)
    .filter((section) => section.advanced.some((spec) => spec.key === key))
    .map((section) => `more ${base} ${section.title}`);
  const [list, index] = split(path);
  if (list === "cure") return [...titles, ...rowParts(app, path)];
  if (list === "sealants") return [...titles, `sealant ${index}`];
  if (list === "takeoff") return [...titles, SETTINGS_BLOCK, ...rowParts(app, path)];
  return list !== "joints" && list !== "site" ? [...titles, "job block"] : titles;
}
