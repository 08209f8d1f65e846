/** A setup value as the card writes it, and as the user types it back. */
import * as v from "valibot";
import { setupSchema, type Setup, type Toleranced } from "../../analysis/setup/schema.ts";
import { parseEntry, parsePercent } from "../format/entry.ts";
import { percent, stated } from "../format/figure.ts";
import { meantSizes } from "./doubts.ts";
import type { Field } from "./fields.ts";

export function shownValue(field: Field, setup: Setup): string | null {
  const value = setup[field.key] as unknown;
  if (value === null || value === undefined) return null;
  if (field.kind === "choice")
    return field.choices?.find((choice) => choice.value === value)?.words ?? String(value);
  if (field.kind === "text") return String(value);
  if (typeof value === "number") return stated(value, field.unit);
  const { value: middle, tolerance } = value as Exclude<Toleranced, number>;
  return tolerance
    ? `${stated(middle, field.unit)} ± ${percent(tolerance, tolerance < 0.02 ? 1 : 0)}`
    : stated(middle, field.unit);
}

export interface Draft {
  text: string;
  tolerance: string;
}

export function draftOf(field: Field, setup: Setup): Draft {
  const value = setup[field.key] as unknown;
  if (value === null || value === undefined) return { text: "", tolerance: "" };
  if (typeof value === "object") {
    const { value: middle, tolerance } = value as Exclude<Toleranced, number>;
    return {
      text: stated(middle, field.unit),
      tolerance: tolerance ? String(Number((tolerance * 100).toPrecision(6))) : "",
    };
  }
  return { text: typeof value === "number" ? stated(value, field.unit) : String(value), tolerance: "" };
}

/** The value for the setup, or what is wrong with what was typed. An empty field states nothing. */
export function readDraft(
  field: Field,
  draft: Draft,
  before: Setup,
): { value: unknown } | { problem: string } {
  if (draft.text.trim() === "") return { value: null };
  if (field.kind === "text" || field.kind === "choice") return { value: draft.text.trim() };
  const number = parseEntry(
    draft.text.replace("°C", "").replaceAll("\u00a0", " "),
    field.unit === "°C" ? "" : field.unit,
  );
  if (number === null)
    return {
      problem: `Write a number${field.unit ? ` with or without prefix, as 4.7 or 330n (in ${field.unit})` : ""}.`,
    };
  const absurd = absurdity(field, number);
  if (absurd) return { problem: absurd };
  if (field.kind === "number") return { value: number };
  if (draft.tolerance.trim() === "") return { value: number };
  const tolerance = parsePercent(draft.tolerance);
  if (tolerance === null) return { problem: "Write the tolerance in percent, 0 to 100." };
  const old = before[field.key] as Toleranced | null | undefined;
  const k = typeof old === "object" && old?.k ? { k: old.k } : {};
  return { value: { value: number, tolerance, ...k } };
}

/** What the schema would refuse is said here already, with what may have been meant. */
function absurdity(field: Field, number: number): string | null {
  if (v.safeParse(setupSchema.entries[field.key], number).success) return null;
  const meant = meantSizes(field, number).map((size) => stated(size, field.unit));
  const ask = meant.length > 0 ? ` Did you mean ${meant.join(" or ")}?` : "";
  return `${stated(number, field.unit)} can’t be meant.${ask}`;
}
