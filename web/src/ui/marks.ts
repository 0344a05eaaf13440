// Marks that stand after a verdict's word; never alone. Drawn as a pen would: one stroke.

import { svg, html, nothing, type TemplateResult } from "lit";

const STROKES: Record<string, string> = {
  within: "M3 11 L8 17 L19 4",
  seal: "M3 11 L8 17 L19 4",
  ok: "M3 11 L8 17 L19 4",
  "at-limit": "M1 11 H15 M9 5 L15 11 L9 17 M20 2 V20",
  wait: "M7 3 V19 M15 3 V19",
  warn: "M1 11 H15 M9 5 L15 11 L9 17 M20 2 V20",
  beyond: "M4 4 L18 18 M18 4 L4 18",
  stop: "M4 4 L18 18 M18 4 L4 18",
  bad: "M4 4 L18 18 M18 4 L4 18",
  referred: "M3 11 H19 M12 4 L19 11 L12 18",
};

/** The tone in which a verdict is set; the word says the same. */
export function toneOf(verdict: string): "ok" | "warn" | "bad" | "plain" {
  if (verdict === "within" || verdict === "seal") return "ok";
  if (verdict === "at-limit" || verdict === "wait") return "warn";
  if (verdict === "beyond" || verdict === "stop") return "bad";
  return "plain";
}

export function mark(name: string): TemplateResult | typeof nothing {
  const stroke = STROKES[name];
  if (stroke === undefined) return nothing;
  return html`<svg class="mark" viewBox="0 0 22 22" aria-hidden="true" focusable="false">${svg`<path d=${stroke} />`}</svg>`;
}
