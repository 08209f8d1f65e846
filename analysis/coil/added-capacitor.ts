/**
 * The added-capacitor line (the classic self-capacitance method): 1/ω0² = L·(C_added + C_self), slope L,
 * intercept L·C_self; and the loss split 2α = Rs/L + 1/(Rp·C), a straight line against 1/C. Both axes
 * weigh by the effective variance u_y² + (slope·u_x)² (Orear, Am. J. Phys. 50, 1982).
 */
import type { Figure, Measured } from "../reading-format.ts";
import type { AddedCapacitorLine } from "./coil-format.ts";

export interface RingAtCapacitor {
  capture: number;
  capacitor_F: Measured;
  /** Stated stray capacitance, counted with the added one. */
  stray_F: number;
  inverseSquare_s2: Measured;
  decay_per_s: Measured;
}

/** Residual over its standard uncertainty from which a point is flagged. */
const FLAG = 3;
/** Capacitors must differ by this factor at least for a line. */
const LEAST_SPREAD = 1.05;

export function addedCapacitorLine(points: RingAtCapacitor[]): AddedCapacitorLine {
  const values = points.map((p) => p.capacitor_F.value);
  if (points.length < 2 || Math.max(...values) < LEAST_SPREAD * Math.min(...values))
    return {
      points: points.map((p) => described(p, 0, false)),
      inductance_H: null,
      selfCapacitance_F: null,
      seriesResistance_ohm: null,
      parallelResistance_ohm: null,
      reason: "at least two captures of the coil with different capacitors are needed",
    };
  const line = robustLine(points);
  const drawn = points.map((p, k) => described(p, line.residuals[k], line.flags[k]));
  if (!(line.slope > 0)) return noCoil(drawn);
  const inductance_H = { value: line.slope, u: Math.sqrt(line.vSlope) };
  const self = line.intercept / line.slope;
  // d(self) = (d intercept − self·d slope)/slope
  const vSelf = (line.vIntercept - 2 * self * line.cov + self * self * line.vSlope) / line.slope ** 2;
  const used = points.filter((_, k) => !line.flags[k]);
  return {
    points: drawn,
    inductance_H,
    selfCapacitance_F: { value: self - points[0].stray_F, u: Math.sqrt(Math.max(0, vSelf)) },
    ...lossSplit(used, inductance_H, self),
    reason: null,
  };
}

const noCoil = (points: AddedCapacitorLine["points"]): AddedCapacitorLine => ({
  points,
  inductance_H: null,
  selfCapacitance_F: null,
  seriesResistance_ohm: null,
  parallelResistance_ohm: null,
  reason: "1/ω0² does not rise with the capacitance: these captures do not belong to one coil",
});

const described = (p: RingAtCapacitor, residual: number, flagged: boolean) => ({
  capture: p.capture,
  capacitance_F: p.capacitor_F.value,
  inverseSquare_s2: p.inverseSquare_s2,
  residual,
  flagged,
});

interface Line {
  slope: number;
  intercept: number;
  vSlope: number;
  vIntercept: number;
  cov: number;
}

/** Weighted straight line; variances from the stated uncertainties, enlarged where the points scatter more. */
export function weightedLine(x: Measured[], y: Measured[]): Line {
  let slope = (y.at(-1)!.value - y[0].value) / (x.at(-1)!.value - x[0].value || 1);
  let line: Line = { slope, intercept: 0, vSlope: 0, vIntercept: 0, cov: 0 };
  for (let round = 0; round < 10; round++) {
    const w = x.map((xi, k) => 1 / (y[k].u ** 2 + (slope * xi.u) ** 2 + (1e-9 * y[k].value) ** 2));
    const sum = w.reduce((a, b) => a + b);
    const mx = x.reduce((s, xi, k) => s + w[k] * xi.value, 0) / sum;
    const my = y.reduce((s, yi, k) => s + w[k] * yi.value, 0) / sum;
    const sxx = x.reduce((s, xi, k) => s + w[k] * (xi.value - mx) ** 2, 0);
    const sxy = x.reduce((s, xi, k) => s + w[k] * (xi.value - mx) * (y[k].value - my), 0);
    slope = sxy / sxx;
    const intercept = my - slope * mx;
    const chi2 = x.reduce((s, xi, k) => s + w[k] * (y[k].value - intercept - slope * xi.value) ** 2, 0);
    const birge = x.length > 2 ? Math.max(1, chi2 / (x.length - 2)) : 1;
    line = {
      slope,
      intercept,
      vSlope: birge / sxx,
      vIntercept: birge * (1 / sum + (mx * mx) / sxx),
      cov: (-birge * mx) / sxx,
    };
  }
  return line;
}

/** The line through all points, or without the one that fits least when the others agree without it. */
function robustLine(points: RingAtCapacitor[]): Line & { residuals: number[]; flags: boolean[] } {
  let line = through(points);
  let flags = points.map(() => false);
  if (points.length >= 4) {
    const without = points.map((_, k) => through(points.filter((__, j) => j !== k)));
    const strange = points.map((p, k) => Math.abs(distance(p, without[k])));
    const worst = strange.indexOf(Math.max(...strange));
    const rest = points.filter((_, j) => j !== worst);
    if (strange[worst] > FLAG && rest.every((p) => Math.abs(distance(p, without[worst])) < FLAG)) {
      line = without[worst];
      flags = points.map((_, k) => k === worst);
    }
  }
  const residuals = points.map(
    (p) => p.inverseSquare_s2.value - line.intercept - line.slope * p.capacitor_F.value,
  );
  return { ...line, residuals, flags };
}

const through = (points: RingAtCapacitor[]) =>
  weightedLine(
    points.map((p) => p.capacitor_F),
    points.map((p) => p.inverseSquare_s2),
  );

/** Distance of a point from a line in standard uncertainties of both, each as stated. */
function distance(p: RingAtCapacitor, line: Line): number {
  const x = p.capacitor_F.value;
  const point2 = p.inverseSquare_s2.u ** 2 + (line.slope * p.capacitor_F.u) ** 2;
  const line2 = Math.max(0, line.vIntercept + 2 * x * line.cov + x * x * line.vSlope);
  return (p.inverseSquare_s2.value - line.intercept - line.slope * x) / Math.sqrt(point2 + line2 + 1e-300);
}

function lossSplit(points: RingAtCapacitor[], inductance: Measured, self: number) {
  const x = points.map((p) => {
    const total = p.capacitor_F.value + self;
    return { value: 1 / total, u: p.capacitor_F.u / total ** 2 };
  });
  const y = points.map((p) => ({ value: 2 * p.decay_per_s.value, u: 2 * p.decay_per_s.u }));
  const line = weightedLine(x, y);
  const series = line.intercept * inductance.value;
  const uSeries = Math.hypot(Math.sqrt(line.vIntercept) * inductance.value, line.intercept * inductance.u);
  const seen = line.slope > 2 * Math.sqrt(line.vSlope);
  const seriesResistance_ohm: Figure = series > 0 ? { value: series, u: uSeries } : null;
  const parallelResistance_ohm: Figure = seen
    ? { value: 1 / line.slope, u: Math.sqrt(line.vSlope) / line.slope ** 2 }
    : null;
  return { seriesResistance_ohm, parallelResistance_ohm };
}
