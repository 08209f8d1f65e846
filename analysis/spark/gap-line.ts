/**
 * What a gap should stand, as a plausibility mark and nothing more: real electrodes, dust and humidity
 * move it by a tenth and more.
 */
import type { Setup } from "../setup/schema.ts";

export interface GapLine {
  voltage_V: number;
  /** Relative to 20 °C and 101.3 kPa. */
  airDensity: number;
  text: string;
}

/** Relative air density (IEC 60060-1: b/101.3 kPa · 293 K/T). */
export function airDensity(temperature_C: number, pressure_Pa: number): number {
  return (pressure_Pa / 101_300) * (293 / (273 + temperature_C));
}

/**
 * Peek's formula for equal spheres (Dielectric Phenomena in High-Voltage Engineering, 1929; from memory):
 * V = 27.2·δ·(1 + 0.54/√(δ·r))·d/f kV, f = ¼·(d/r + 1 + √((d/r + 1)² + 8)), lengths in cm. Peak volts.
 */
export function sphereBreakdown_V(distance_m: number, diameter_m: number, density: number): number {
  const d = distance_m * 100;
  const r = diameter_m * 50;
  const ratio = d / r + 1;
  const f = 0.25 * (ratio + Math.sqrt(ratio * ratio + 8));
  return 27.2e3 * density * (1 + 0.54 / Math.sqrt(density * r)) * (d / f);
}

/** About 1.6 kV/mm between points, roughly 40 kV over 25 mm of air (common practice, no source). */
export function pointBreakdown_V(distance_m: number, density: number): number {
  return 1.6e6 * distance_m * density;
}

/** The stated gap's expected breakdown; null where distance, electrodes or a sphere's diameter are not stated. */
export function gapLine(setup: Setup): GapLine | null {
  const gap = setup.gap;
  if (!gap?.distance_m || !gap.electrodes) return null;
  const density = airDensity(setup.airTemperature_C ?? 20, setup.airPressure_Pa ?? 101_300);
  const millimetres = `${(gap.distance_m * 1e3).toPrecision(3)} mm`;
  if (gap.electrodes === "points") {
    const voltage_V = pointBreakdown_V(gap.distance_m, density);
    return { voltage_V, airDensity: density, text: `points ${millimetres} apart, rule of thumb 1.6 kV/mm` };
  }
  if (!gap.diameter_m) return null;
  const voltage_V = sphereBreakdown_V(gap.distance_m, gap.diameter_m, density);
  return { voltage_V, airDensity: density, text: `spheres ${millimetres} apart, Peek's formula` };
}
