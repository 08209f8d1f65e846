/** Weighted means over pulses; what is common to all of them does not shrink with their number. */
import type { BudgetLine, CaptureReading, Figure, Measured, PulseReading } from "../reading-format.ts";

/** Inputs one capture or run shares: stated parts and the time base. */
const COMMON = new Set(["capacitor tolerance", "stray capacitance", "sample interval", "stated inductance"]);

type TankKey = "inductance_H" | "capacitance_F" | "resistance_ohm";

/** Over the pulses given (the caller leaves out sparking ones). Null where none has the figure. */
export function combinePulses(pulses: PulseReading[]): CaptureReading["combined"] {
  const good = pulses.filter((pulse) => pulse.ring?.quality === "good");
  const used = good.length > 0 ? good : pulses.filter((pulse) => pulse.ring?.quality === "poor");
  const tank = (key: TankKey) =>
    weightedMean(
      used.flatMap((pulse) => {
        const figure = pulse[key];
        return figure ? [{ figure, common: commonPart(pulse.budget?.[key] ?? []) }] : [];
      }),
    );
  return {
    inductance_H: tank("inductance_H"),
    capacitance_F: tank("capacitance_F"),
    resistance_ohm: tank("resistance_ohm"),
    q: weightedMean(
      used.flatMap((pulse) => (pulse.ring?.modes[0] ? [{ figure: pulse.ring.modes[0].q, common: 0 }] : [])),
    ),
  };
}

const commonPart = (lines: BudgetLine[]) =>
  Math.hypot(...lines.filter((line) => COMMON.has(line.source)).map((line) => line.u));

/** Own parts weigh and shrink, enlarged by the Birge ratio where they scatter more than they say. */
export function weightedMean(items: { figure: Measured; common: number }[]): Figure {
  if (items.length === 0) return null;
  const own = items.map(({ figure, common }) =>
    Math.sqrt(Math.max(figure.u ** 2 - common ** 2, (1e-12 * figure.value) ** 2)),
  );
  const weights = own.map((u) => 1 / u ** 2);
  const sum = weights.reduce((a, b) => a + b);
  const value = items.reduce((total, { figure }, k) => total + weights[k] * figure.value, 0) / sum;
  const chi2 = items.reduce((total, { figure }, k) => total + weights[k] * (figure.value - value) ** 2, 0);
  const birge = items.length > 1 ? Math.max(1, Math.sqrt(chi2 / (items.length - 1))) : 1;
  const common = Math.max(...items.map((item) => item.common));
  return { value, u: Math.hypot(birge / Math.sqrt(sum), common) };
}
