// Reading the field declarations: which fields show, what they offer, which unit a bare number takes.

import type { Choice, FieldGroup, FieldSpec, Forms, Row, UnitSystem } from "./contract";
import { get, getRow, getRows, rowNameOf } from "./pointer";

export function groupOf(forms: Forms, key: string): FieldGroup {
  const found = forms.groups.find((group) => group.key === key);
  if (found === undefined) throw new Error(`the core declares no group “${key}”`);
  return found;
}

export function systemOf(job: Row): UnitSystem {
  return job["units"] === "inch" ? "inch" : "metric";
}

export function forSystem(value: string | Partial<Record<UnitSystem, string>> | null | undefined, system: UnitSystem): string | null {
  if (value === null || value === undefined) return null;
  return typeof value === "string" ? value || null : (value[system] ?? null);
}

export function unitsOf(spec: FieldSpec, system: UnitSystem): string[] {
  return spec.units?.[system] ?? [];
}

export interface Section {
  title: string;
  plain: FieldSpec[];
  advanced: FieldSpec[];
}

/** The fields of a group under their sub-headings, in the order declared. */
export function sectionsOf(group: FieldGroup): Section[] {
  const sections: Section[] = [];
  for (const spec of group.fields) {
    let section = sections.find((item) => item.title === spec.section);
    if (section === undefined) {
      section = { title: spec.section, plain: [], advanced: [] };
      sections.push(section);
    }
    (spec.advanced === true ? section.advanced : section.plain).push(spec);
  }
  return sections;
}

/** What a row says about one key, or the default that the core would take. */
function effective(forms: Forms, group: FieldGroup, row: Row, key: string, system: UnitSystem): unknown {
  const typed = row[key];
  if (typed !== undefined && typed !== null && typed !== "") return typed;
  const spec = groupOf(forms, group.key).fields.find((item) => item.key === key);
  return spec === undefined ? undefined : forSystem(spec.default, system);
}

/** Whether a field shows, given its neighbours in the row or in an outer row named as `group.key`. */
export function shows(forms: Forms, group: FieldGroup, spec: FieldSpec, job: Row, base: string): boolean {
  if (spec.show_when === null || spec.show_when === undefined) return true;
  return Object.entries(spec.show_when).every(([name, allowed]) => {
    const [outer, key] = name.includes(".") ? (name.split(".") as [string, string]) : [group.key, name];
    const place = outer === group.key ? base : outerBase(forms, outer, base);
    const value = effective(forms, groupOf(forms, outer), getRow(job, place), key, systemOf(job));
    return allowed.includes(String(value));
  });
}

/** The pointer of the row of an outer group in which `base` lies: `/joints/3/side_a` -> `/joints/3`. */
function outerBase(forms: Forms, outer: string, base: string): string {
  const depth = groupOf(forms, outer).path.split("[]")[0]!.split(".").filter(Boolean).length;
  const isList = groupOf(forms, outer).path.includes("[]");
  return base.split("/").slice(0, 1 + depth + (isList ? 1 : 0)).join("/");
}

/** Lists of the job that a reference may point into. */
const LISTS: Readonly<Record<string, { path: string; word: string }>> = {
  sealants: { path: "/sealants", word: "Sealant" },
  joints: { path: "/joints", word: "Joint" },
};

/** The choices of a field here and now. */
export function choicesOf(spec: FieldSpec, forms: Forms, group: FieldGroup, job: Row, base: string): Choice[] {
  const list = typeof spec.choices_from === "string" ? LISTS[spec.choices_from] : undefined;
  if (list !== undefined) {
    return getRows(job, list.path).map((row, index) => ({ value: String(row["id"] ?? ""), label: rowNameOf(row, list.word, index) }));
  }
  if (spec.choices_from && typeof spec.choices_from !== "string") {
    const { field, key } = spec.choices_from;
    const owner = group.fields.find((item) => item.key === field);
    const chosen = effective(forms, group, getRow(job, base), field, systemOf(job));
    const offered = owner?.choices?.find((choice) => choice.value === chosen)?.[key];
    return Array.isArray(offered) ? (offered as Choice[]) : [];
  }
  return spec.choices ?? [];
}

const UNIT_SIGNS = /[\p{L}'"°%′″’”‰]/u;

/** What people type, with the unit of the chip put after a number that has none. */
export function withUnit(text: string, unit: string | null): string {
  const typed = text.trim();
  if (unit === null || typed === "" || hasUnit(typed)) return text;
  return `${typed} ${unit}`;
}

/** Whether a text says its own unit, be it one of those offered or not. */
export function hasUnit(text: string): boolean {
  return UNIT_SIGNS.test(text);
}

/** The unit that a text already ends with, if it is one of those offered. */
export function unitIn(text: string, offered: string[]): string | null {
  const typed = text.trim();
  const fits = offered.filter((unit) => typed.endsWith(unit) && !/\p{L}/u.test(typed.at(-unit.length - 1) ?? ""));
  return fits.sort((one, other) => other.length - one.length)[0] ?? null;
}

/** An empty row of a group as its defaults say; the same that the core would make. */
export function blankRow(forms: Forms, key: string, system: UnitSystem): Row {
  const row: Row = {};
  for (const spec of groupOf(forms, key).fields) {
    const value = forSystem(spec.default, system);
    if (value !== null && spec.advanced !== true) row[spec.key] = value;
  }
  return row;
}

/** A reading that only repeats what was typed says nothing. */
export function tellingReading(reads: string | undefined, text: string): string | null {
  const plain = (value: string): string => value.replaceAll(/[\s=]/g, "");
  return reads === undefined || plain(reads) === plain(text) ? null : reads;
}

export function valueAt(job: Row, pointer: string): string {
  const value = get(job, pointer);
  return value === undefined || value === null ? "" : String(value);
}
