import { swingWith } from "../../../analysis/coil/capacitor-choice.ts";
import { ringFrequency_Hz } from "../../../analysis/coil/kick.ts";
import { coilFromCaptures } from "../../../analysis/coil/line.ts";
import type { Argument, CapacitorOption, CaptureDetail, CoilSheet } from "../../bridge.ts";
import type { Book } from "../book/index.ts";
import type { Handlers } from "../call.ts";
import type { BenchParts } from "./bench-parts.ts";

/** Runs of a coil whose captures are opened for its sheet; its history covers all of them. */
const latestRuns = 20;

export function coilHandlers({ book }: BenchParts): Pick<Handlers, "coils" | "coil" | "capacitorChoice"> {
  return {
    coils: () => book.coils(),
    coil: ({ coil }) => coilSheet(book, coil),
    capacitorChoice: (asked) => capacitorOptions(book, asked),
  };
}

/** The coil over its runs: history from the book's columns, the rest from its latest captures. */
export function coilSheet(book: Book, coil: string): CoilSheet {
  const { rows, drifts } = book.coilHistory(coil);
  const captures = capturesOf(book, coil);
  const {
    addedCapacitor,
    notes,
    format: _,
    ...blocks
  } = coilFromCaptures(
    captures.map(({ reading }) => reading),
    captures.map(({ setup }) => setup),
  );
  const points = addedCapacitor?.points.map(({ capture, ...point }) => ({
    run: captures[capture].run,
    file: captures[capture].file,
    ...point,
  }));
  return {
    ...blocks,
    coil,
    history: rows,
    notes: [...drifts.map((text) => ({ code: "drift", text })), ...notes],
    addedCapacitor: addedCapacitor && { ...addedCapacitor, points: points ?? [] },
  };
}

/** What each capacitor would do, undamped; figures are null where the drive is not known. */
function capacitorOptions(book: Book, asked: Argument<"capacitorChoice">): CapacitorOption[] {
  const { drive } = coilSheet(book, asked.coil);
  const setup = capturesOf(book, asked.coil).at(-1)?.setup;
  const current = asked.current_A === null ? drive.current_A : { value: asked.current_A, u: 0 };
  const { inductance_H, supply_V, rating_V } = drive;
  return asked.capacitances_F.map((capacitance_F) => {
    if (inductance_H === null) return { capacitance_F, peak_V: null, frequency_Hz: null, margin: null };
    const frequency = ringFrequency_Hz(inductance_H.value, capacitance_F);
    const frequency_Hz = { value: frequency, u: (frequency * inductance_H.u) / inductance_H.value / 2 };
    if (current === null || supply_V === null)
      return { capacitance_F, peak_V: null, frequency_Hz, margin: null };
    const input = { inductance_H, current_A: current, supply_V, on_V: setup?.switchOnVoltage_V ?? 0 };
    const { peak_V } = swingWith(input, { value: capacitance_F, u: 0 }, true);
    const margin = rating_V === null ? null : 1 - peak_V.value / rating_V;
    return { capacitance_F, peak_V, frequency_Hz, margin };
  });
}

/** In the order they were taken: what is stated last counts for the drive. */
export function capturesOf(book: Book, coil: string): CaptureDetail[] {
  const { rows } = book.runs({ coil, limit: latestRuns });
  return rows.toReversed().flatMap(({ run }) => book.captures(run));
}
