/** What one test file of a shape is: its text, and what the reader must make of it. Invented numbers. */
import type { Setup } from "../../../analysis/setup/schema.ts";

export interface ExpectedRecord {
  names: string[];
  units: string[];
  /** Where they don't count from 0. */
  positions?: number[];
  /** null: asked. */
  step_s: number | null;
  /** Largest relative error of the step; float noise alone unless the file rounds its times. */
  stepTolerance?: number;
  start_s?: number;
  samples: number;
  /** Per channel, in final units; NaN where there is no number. */
  first: number[];
  last: number[];
}

export interface ShapeFile {
  shape: string;
  file: string;
  what: string;
  bytes: Uint8Array;
  setup?: Setup;
  outcome: "read" | "asked" | "refused";
  /** The error's code where it is refused. */
  refused?: string;
  records: ExpectedRecord[];
  /** Codes among the notes. */
  notes?: string[];
  acquisition?: string[];
}

export const utf8 = (text: string) => new TextEncoder().encode(text);

/** A coil's switch node: supply, conduction, kick, ring back to the supply; in volts. */
export function node(time_s: number): number {
  const wobble = 0.3 * Math.sin(time_s * 9.7e6);
  if (time_s < -0.4e-3) return 12 + wobble;
  if (time_s < 0) return 0.4 + wobble;
  const ring = 320 * Math.exp(-600 * time_s) * Math.sin(2 * Math.PI * 3400 * time_s);
  return 12 + ring + wobble;
}

/** The coil's current, in amperes. */
export function current(time_s: number): number {
  if (time_s < -0.4e-3) return 0;
  const atOff = 0.4e-3 * 1600;
  if (time_s < 0) return (time_s + 0.4e-3) * 1600;
  return atOff * Math.exp(-600 * time_s) * Math.cos(2 * Math.PI * 3400 * time_s);
}

/** Times on an even grid from whole numbers, so that written digits carry no float noise. */
export function grid(start: number, step: number, count: number, unit = 1): number[] {
  return Array.from({ length: count }, (_, i) => (start + i * step) * unit);
}

export const lines = (rows: string[], end = "\n") => rows.join(end) + end;

/** Values as the file writes them, and what those digits are worth. */
export function written(values: number[], digits = 2): { text: string[]; value: number[] } {
  const text = values.map((value) => value.toFixed(digits));
  return { text, value: text.map(Number) };
}

export const ends = (...channels: number[][]) => ({
  first: channels.map((values) => values[0]),
  last: channels.map((values) => values[values.length - 1]),
});
