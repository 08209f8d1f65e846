/** A coil from several captures: added-capacitor line, ramp, saturation, dwell table, stress of the parts. */
import type { Note } from "../capture.ts";
import { median } from "../numeric/median.ts";
import { combineRamps } from "../ramp/combine-ramps.ts";
import type { CaptureReading, Figure, PulseReading } from "../reading-format.ts";
import { standard } from "../setup/toleranced.ts";
import type { Setup } from "../setup/schema.ts";
import { addedCapacitorLine, type RingAtCapacitor } from "./added-capacitor.ts";
import { smallestCapacitor_F } from "./capacitor-choice.ts";
import type { AddedCapacitorLine, CoilReading, DriveStart, DwellTable } from "./coil-format.ts";
import { combinePulses, weightedMean } from "./combine.ts";
import { currentForEnergy_A, dwellTable } from "./dwell.ts";
import { stresses } from "./stress.ts";

/** Supplies about the stated one and winding temperatures the dwell table is made for. */
const SUPPLY_SHARES = [0.5, 0.75, 1, 1.2];
const TEMPERATURES_C = [-20, 20, 60, 100];

/** What the dwell table is made for; without one, the current at which the captures switched off. */
export type DwellGoal = { current_A: number } | { energy_J: number };

/** readings[k] was taken with setups[k]; all of one coil. Sparking pulses are left out of ring figures. */
export function coilFromCaptures(
  readings: CaptureReading[],
  setups: Setup[],
  goal: DwellGoal | null = null,
): CoilReading {
  const setup: Setup = setups.at(-1) ?? {};
  const pulses = readings.flatMap((reading) => reading.pulses);
  const line = lineOf(readings, setups);
  const ramp = combineRamps(pulses);
  const notes: Note[] = [];
  const inductance_H =
    line.inductance_H ?? combinePulses(quietOf(readings)).inductance_H ?? ramp?.inductance_H ?? null;
  // Peaks and the capacitor in use are those of the last capture; its setup is the one in force.
  const last = readings.slice(-1);
  const drive = driveOf(quietOf(last), pulses, setup, inductance_H);
  const dwell = dwellOf(pulses, setup, inductance_H, goal, notes);
  if (line.reason)
    notes.push({ code: "no-capacitor-line", text: `No added-capacitor line: ${line.reason}.` });
  if (!ramp) notes.push({ code: "no-ramp", text: "No current channel in these captures: no ramp." });
  return {
    format: "ringbook.coil/1",
    coil: setup.coil ?? null,
    notes,
    addedCapacitor: line.points.length > 0 ? line : null,
    ramp,
    saturation: ramp?.curve
      ? { x: ramp.curve.current_A, y: ramp.curve.inductance_H, u: ramp.curve.current_A.map(() => null) }
      : null,
    dwell,
    stress: stresses({ ...drive, ...loadOf(last, ramp?.resistance_ohm ?? null, setup) }, setup),
    drive,
  };
}

const quietOf = (readings: CaptureReading[]) =>
  readings.flatMap(({ pulses }) => pulses.filter((pulse) => pulse.spark?.verdict !== "spark"));

function lineOf(readings: CaptureReading[], setups: Setup[]): AddedCapacitorLine {
  const points: RingAtCapacitor[] = [];
  readings.forEach((reading, capture) => {
    const capacitor_F = standard(setups[capture]?.capacitor_F);
    if (!capacitor_F) return;
    const rings = reading.pulses.filter(
      (pulse) => pulse.spark?.verdict !== "spark" && pulse.ring?.quality === "good",
    );
    const figures = rings.map(({ ring }) => ring!.modes[0]);
    if (figures.length === 0) return;
    const f = weightedMean(figures.map((mode) => ({ figure: mode.frequency_Hz, common: 0 })))!;
    const decay_per_s = weightedMean(figures.map((mode) => ({ figure: mode.decay_per_s, common: 0 })))!;
    const square = (2 * Math.PI * f.value) ** 2 + decay_per_s.value ** 2;
    const u =
      Math.hypot(8 * Math.PI ** 2 * f.value * f.u, 2 * decay_per_s.value * decay_per_s.u) / square / square;
    const stray_F = standard(setups[capture].strayCapacitance_F)?.value ?? 0;
    points.push({ capture, capacitor_F, stray_F, inverseSquare_s2: { value: 1 / square, u }, decay_per_s });
  });
  return addedCapacitorLine(points);
}

function typicalCurrent(pulses: PulseReading[]): Figure {
  const currents = pulses.flatMap((pulse) => (pulse.ramp?.finalCurrent_A ? [pulse.ramp.finalCurrent_A] : []));
  if (currents.length === 0) return null;
  const value = Math.abs(median(currents.map((current) => current.value)));
  return { value, u: median(currents.map((current) => current.u)) };
}

function driveOf(
  quiet: PulseReading[],
  pulses: PulseReading[],
  setup: Setup,
  inductance_H: Figure,
): DriveStart {
  const current_A = typicalCurrent(pulses);
  const supply_V = setup.supply_V ?? null;
  const rating_V = setup.switchRating_V ?? null;
  const missing = [
    inductance_H ? "" : "the inductance",
    current_A ? "" : "the current at switch-off",
    supply_V === null ? "the supply voltage" : "",
    rating_V === null ? "the switch's rating" : "",
  ].filter(Boolean);
  const known = missing.length === 0;
  const input = {
    inductance_H: inductance_H!,
    current_A: current_A!,
    supply_V: supply_V!,
    on_V: setup.switchOnVoltage_V ?? 0,
  };
  const smallest_F = known ? smallestCapacitor_F(input, rating_V!) : null;
  const reason = known
    ? smallest_F
      ? null
      : "no capacitor keeps the peak below this rating: it is too close to twice the supply"
    : `not known: ${missing.join(", ")}`;
  return {
    inductance_H,
    capacitance_F: combinePulses(quiet).capacitance_F,
    current_A,
    supply_V,
    rating_V,
    smallest_F,
    reason,
  };
}

function dwellOf(
  pulses: PulseReading[],
  setup: Setup,
  inductance_H: Figure,
  goal: DwellGoal | null,
  notes: Note[],
): DwellTable | null {
  const ramp = combineRamps(pulses);
  const current = typicalCurrent(pulses);
  const l = ramp?.inductance_H ?? inductance_H;
  const r20 = ramp?.resistance20_ohm ?? ramp?.resistance_ohm ?? null;
  const supply = setup.supply_V ?? null;
  if (!l || !r20 || !current || supply === null) {
    notes.push({
      code: "no-dwell-table",
      text: "A dwell table needs the ramp's inductance and resistance, and the supply voltage.",
    });
    return null;
  }
  if (!ramp?.resistance20_ohm)
    notes.push({
      code: "winding-temperature-unstated",
      text: "No winding temperature is stated: the measured resistance counts as that at 20 °C.",
    });
  const external = ramp?.resistance20_ohm ? (setup.externalResistance_ohm ?? 0) : 0;
  const winding = {
    inductance_H: l,
    resistance20_ohm: r20,
    external_ohm: external,
    on_V: setup.switchOnVoltage_V ?? 0,
    curve: ramp?.curve ?? null,
  };
  return dwellTable(
    winding,
    goal ? ("energy_J" in goal ? currentForEnergy_A(l.value, goal.energy_J) : goal.current_A) : current.value,
    SUPPLY_SHARES.map((share) => share * supply),
    TEMPERATURES_C,
  );
}

function loadOf(readings: CaptureReading[], resistance_ohm: Figure, setup: Setup) {
  const pulses = readings.flatMap((reading) => reading.pulses);
  const peaks = pulses.flatMap((pulse) => (pulse.peak_V === null ? [] : [pulse.peak_V]));
  const dwells = pulses.flatMap((pulse) => (pulse.dwell_s === null ? [] : [pulse.dwell_s]));
  return {
    peak_V: peaks.length > 0 ? Math.max(...peaks) : null,
    dwell_s: dwells.length > 0 ? median(dwells) : null,
    resistance_ohm,
    rate_Hz: setup.repetitionRate_Hz ?? measuredRate_Hz(readings),
    turnsRatio: setup.turnsRatio ?? null,
  };
}

/** From the median interval between neighbouring switch-offs of one record; null for single pulses. */
function measuredRate_Hz(readings: CaptureReading[]): number | null {
  const intervals = readings.flatMap(({ pulses }) =>
    pulses.slice(1).flatMap((pulse, k) => {
      const [a, b] = [pulses[k].switchOffTime_s, pulse.switchOffTime_s];
      return a === null || b === null ? [] : [b - a];
    }),
  );
  return intervals.length > 0 ? 1 / median(intervals) : null;
}
