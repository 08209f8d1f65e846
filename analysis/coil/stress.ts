/** What a pulse asks of the parts, each against its stated rating. */
import type { Figure, Measured } from "../reading-format.ts";
import type { Setup } from "../setup/schema.ts";
import type { Stress } from "./coil-format.ts";

export interface PulseLoad {
  inductance_H: Figure;
  capacitance_F: Figure;
  current_A: Figure;
  /** Largest at the switch node to ground. */
  peak_V: number | null;
  supply_V: number | null;
  /** Direct-current resistance of the loop and length of the conduction. */
  resistance_ohm: Figure;
  dwell_s: number | null;
  rate_Hz: number | null;
  turnsRatio: number | null;
}

/** One row a quantity; shares from 0.8 of a rating are warnings (design.md). */
export function stresses(load: PulseLoad, setup: Setup): Stress[] {
  return [...ofVoltage(load, setup), ...ofEnergy(load, setup)];
}

function row(
  part: string,
  quantity: string,
  unit: string,
  value: Figure,
  rating: number | null | undefined,
  missing: string,
): Stress {
  const share = value && rating ? value.value / rating : null;
  return { part, quantity, unit, value, rating: rating ?? null, share, reason: value ? null : missing };
}

const exact = (value: number | null): Figure => (value === null ? null : { value, u: 0 });
const scaled = (figure: Figure, by: number | null): Figure =>
  figure && by !== null ? { value: figure.value * by, u: figure.u * by } : null;

function ofVoltage(load: PulseLoad, setup: Setup): Stress[] {
  const { inductance_H: l, capacitance_F: c, peak_V, supply_V, turnsRatio } = load;
  const swing = peak_V === null || supply_V === null ? null : peak_V - supply_V;
  // V/√(LC) at the zero crossing; the current is C times that, V·√(C/L).
  const steepest = swing !== null && l && c ? swing / Math.sqrt(l.value * c.value) : null;
  const relative = l && c ? 0.5 * Math.hypot(l.u / l.value, c.u / c.value) : 0;
  const slope: Figure = steepest === null ? null : { value: steepest, u: steepest * relative };
  const acrossCoil = setup.capacitorAcross === "coil";
  const needs = "needs the measured peak, the supply, L and C";
  const unseen = "the peak was not measured";
  const secondary = swing !== null && turnsRatio !== null ? swing * turnsRatio : null;
  return [
    row("switch", "peak voltage", "V", exact(peak_V), setup.switchRating_V, unseen),
    row(
      "capacitor",
      "peak voltage",
      "V",
      exact(acrossCoil ? swing : peak_V),
      setup.capacitorRating_V,
      unseen,
    ),
    row(
      "capacitor",
      "peak current",
      "A",
      scaled(slope, c?.value ?? null),
      setup.capacitorPeakCurrent_A,
      needs,
    ),
    row("capacitor", "dv/dt", "V/s", slope, setup.capacitorDvdt_V_per_s, needs),
    row(
      "coil",
      "secondary peak voltage",
      "V",
      exact(secondary),
      setup.coilRating_V,
      "needs the peak and the turns ratio",
    ),
  ];
}

function ofEnergy(load: PulseLoad, setup: Setup): Stress[] {
  const clamp = clampEnergy_J(load, setup.clampVoltage_V ?? null);
  const loss = windingLoss_J(load);
  const rate = "needs several pulses in a record, or a stated repetition rate";
  const noClamp = "no clamp voltage is stated, or L and the current are not known";
  const noLoss = "needs the ramp's resistance, the current and the dwell";
  const clampPower = scaled(clamp, load.rate_Hz);
  return [
    row("clamp", "energy a pulse", "J", clamp, null, noClamp),
    row("clamp", "mean power", "W", clampPower, setup.clampPower_W, clamp ? rate : noClamp),
    row("winding", "loss a pulse", "J", loss, null, noLoss),
    row("winding", "mean loss", "W", scaled(loss, load.rate_Hz), null, loss ? rate : noLoss),
    row("coil", "stored energy", "J", storedEnergy_J(load), null, "needs L and the current"),
  ];
}

/** ½·L·I². */
function storedEnergy_J({ inductance_H: l, current_A: i }: PulseLoad): Measured | null {
  if (!l || !i) return null;
  const value = 0.5 * l.value * i.value ** 2;
  return { value, u: value * Math.hypot(l.u / l.value, (2 * i.u) / i.value) };
}

/** What is stored less what the capacitor takes up to the clamp voltage; 0 where the ring stays below it. */
function clampEnergy_J(load: PulseLoad, clamp_V: number | null): Figure {
  const stored = storedEnergy_J(load);
  if (!stored || clamp_V === null) return null;
  const { capacitance_F: c, supply_V } = load;
  const taken = c ? 0.5 * c.value * (clamp_V - (supply_V ?? 0)) ** 2 : 0;
  return { value: Math.max(0, stored.value - taken), u: stored.u };
}

/** R·∫i² of a ramp that rises about linearly: R·I²·t/3. */
function windingLoss_J({ resistance_ohm: r, current_A: i, dwell_s }: PulseLoad): Figure {
  if (!r || !i || dwell_s === null) return null;
  const value = (r.value * i.value ** 2 * dwell_s) / 3;
  return { value, u: value * Math.hypot(r.u / r.value, (2 * i.u) / i.value) };
}
