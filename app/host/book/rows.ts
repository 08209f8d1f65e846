import { deflateSync, inflateSync } from "node:zlib";
import type { Figure } from "../../../analysis/reading-format.ts";

/** Column pairs ↔ figures, and JSON ↔ compressed bytes: how values lie in the book's rows. */

export const figure = (value: unknown, u: unknown): Figure =>
  typeof value === "number" && typeof u === "number" ? { value, u } : null;

export const valueOf = (measured: Figure | undefined) => measured?.value ?? null;
export const uOf = (measured: Figure | undefined) => measured?.u ?? null;

export const pack = (value: unknown): Uint8Array => deflateSync(JSON.stringify(value), { level: 4 });
export const unpack = <T>(bytes: unknown): T => JSON.parse(inflateSync(bytes as Uint8Array).toString()) as T;
export const parse = <T>(text: unknown): T => JSON.parse(text as string) as T;
