// At the face: a few large fields, and one large word with its reasons. For gloves, glare and thirty seconds.

import { html, nothing, type TemplateResult } from "lit";
import type { App } from "../app/app";
import type { Check, FaceAnswer, Forms, JointAnswer } from "../app/contract";
import { groupOf } from "../app/fields";
import { getRows, rowNameOf } from "../app/pointer";
import { href } from "../app/routes";
import { bands, smallVerdict, verdict, verdictOf, waiting, workingPart, type VerdictParts } from "./answers";
import { form } from "./form";
import { issueList } from "./issues";
import { gone } from "./joint";
import { mark } from "./marks";

export function facePage(app: App, forms: Forms, id: string): TemplateResult {
  const rows = getRows(app.job, "/joints");
  const index = rows.findIndex((row) => row["id"] === id);
  if (index < 0) return gone(app);
  const base = `/joints/${index}`;
  const group = groupOf(forms, "face");
  const answer = app.state.result?.evaluation.joints[id];
  const face = answer?.face ?? null;
  return html`<div class="page two is-face">
    <div class="face-top">
      <header class="joint-head">
        <div>
          <p class="title-label">${group.label}</p>
          <h1 tabindex="-1">${rowNameOf(rows[index]!, "Joint", index)}</h1>
        </div>
        <div class="actions"><a class="button" href=${href({ page: "joint", job: app.open.id, joint: id })}>Back to the joint</a></div>
      </header>
      ${answer === undefined ? waiting(app) : verdict(face === null ? unmeasured(answer) : faceVerdict(face), app.state.isStale)}
      ${answer !== undefined && app.state.coreFault !== null ? waiting(app) : nothing}
    </div>
    <div class="inputs" role="region" aria-label="Measured now" tabindex="-1">
      <h2 class="hidden-word">Measured now</h2>
      ${face === null ? nothing : html`<p class="face-now only-narrow" aria-hidden="true">${smallVerdict(face.verdict, face.verdict_word)}</p>`}
      ${form(app, forms, group, `${base}/face`, { isGlove: true })}
    </div>
    <div class="face-rest">
      ${face === null ? nothing : reasons(app, face, id)} ${issueList(app, (issue) => issue.path.startsWith(`${base}/`))}
    </div>
  </div>`;
}

/** Without readings there is no answer here; a joint that cannot be judged says why. */
function unmeasured(answer: JointAnswer): VerdictParts {
  if (answer.verdict === "unknown" || answer.verdict === "referred") return verdictOf(answer);
  return { verdict: "unknown", word: "Not measured yet", text: "Enter what you read at the joint. The answer comes at once." };
}

function faceVerdict(face: FaceAnswer): VerdictParts {
  return { verdict: face.verdict, word: face.verdict_word, text: face.verdict_text };
}

function reasons(app: App, face: FaceAnswer, id: string): TemplateResult {
  return html`${checks(face)}
  <h2 class="hidden-word">Answers</h2>
  ${bands(face.answers)} ${workingPart(app, face.steps, `face working ${id}`)}`;
}

/** Each gate with what was found and what is wanted. */
export function checks(face: FaceAnswer): TemplateResult | typeof nothing {
  return face.checks.length === 0 ? nothing : html`<ul class="checks" data-testid="checks">${face.checks.map(checkRow)}</ul>`;
}

function checkRow(check: Check): TemplateResult {
  const [name, word] = check.pass === true ? ["ok", "Good"] : check.pass === false ? ["bad", "Not good"] : ["plain", "Not known"];
  return html`<li class="check tone-${name!}">
    <p class="check-word"><span>${word}</span>${mark(name!)}</p>
    <p class="check-label">${check.label}${check.text ? html`<span class="detail">${check.text}</span>` : nothing}</p>
    <p class="check-values"><b>${check.value}</b>${check.limit ? html`<span class="detail">limit ${check.limit}</span>` : nothing}</p>
  </li>`;
}
