// Symbols as they are set in print: what follows an underscore stands below the line.

import { html, type TemplateResult } from "lit";

const SUBSCRIPT = /(\p{L}+)_(\p{L}[\p{L}\d]*(?:,\p{L}[\p{L}\d]*)*|\d+)/gu;

export function lettered(text: string): TemplateResult {
  const parts: (string | TemplateResult)[] = [];
  let end = 0;
  for (const found of text.matchAll(SUBSCRIPT)) {
    parts.push(text.slice(end, found.index), found[1]!, html`<sub>${found[2]!.replaceAll(",", ", ")}</sub>`);
    end = found.index + found[0].length;
  }
  parts.push(text.slice(end));
  return html`${parts}`;
}
