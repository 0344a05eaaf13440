// How to type, in a few lines, and what the app is not.

import { html, type TemplateResult } from "lit";
import type { App } from "../app/app";
import { href } from "../app/routes";

export function helpPage(app: App): TemplateResult {
  const core = app.state.result?.evaluation.core ?? app.state.forms?.core;
  const boundary = app.state.forms?.words["boundary"];
  return html`<section class="page">
    <h1 tabindex="-1">How to type, and cautions</h1>
    <section class="part first">
      <h2>Typing</h2>
      <ul class="lines">
        <li>Type as you would write it: <b>5/8</b>, <b>1 1/4 in</b>, <b>12' 6 1/2"</b>, <b>9,5 mm</b>, <b>-12</b>.</li>
        <li>A number alone takes the unit marked beside the field. Tap another unit to say that the number is in that unit; the number stays as typed.</li>
        <li>One job may mix units. What you typed stays; beside it stands how it reads in the other system.</li>
        <li>Leave a field, press Enter or make a choice, and it is saved. The foot of the page says when.</li>
        <li>Undo and Redo go back through every step: the buttons, or Ctrl+Z and Ctrl+Y.</li>
      </ul>
    </section>
    <section class="part">
      <h2>Keeping</h2>
      <ul class="lines">
        <li>Jobs are kept in this browser, on this tablet, and nowhere else. Nothing is sent.</li>
        <li>A browser may clear its data after a time without use. A backup file is the safe copy.</li>
        <li>On a tablet, add the app to the home screen first: its storage is its own.</li>
      </ul>
    </section>
    <section class="part">
      <h2>Cautions</h2>
      <ul class="lines">
        <li>The numbers are worked out from what you enter, by the sources printed beside each step. Check them by hand.</li>
        <li>General figures for materials and sealants are a start. The maker's data sheet and a test on the wall come first.</li>
        <li>Who answers for a joint by law stays answerable for it. The app signs nothing.</li>
        ${typeof boundary === "string" ? html`<li>${boundary}</li>` : ""}
      </ul>
    </section>
    ${core ? html`<p class="source">Core ${core.version}. Tables: ${core.tables.join(", ")}.</p>` : ""}
    <div class="actions"><a class="button" href=${href({ page: "jobs" })}>Back to the jobs</a></div>
  </section>`;
}
