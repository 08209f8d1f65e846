/** A coil over its runs: where a run departs from those before it, and where the whole drifts. */
import type { Figure } from "../reading-format.ts";
import { median, robustSpread } from "../numeric/median.ts";
import { driftOf } from "../statistics/drift.ts";

export interface CoilRun {
  /** Instant of the run, in days on any scale. */
  day: number;
  /** With this capacitor; a null stands for an unknown one. */
  capacitance_F: Figure;
  inductance_H: Figure;
  q: Figure;
  resistance20_ohm: Figure;
}

/** Runs that must lie before a run can be told from them. */
const needed = 3;
/** A change smaller than this is no news, however well it was measured: setups are never quite the same. */
const least = { inductance_H: 0.003, q: 0.05, resistance20_ohm: 0.02 };
type Tracked = keyof typeof least;

const words: Record<Tracked, string> = { inductance_H: "L", q: "Q", resistance20_ohm: "R at 20 °C" };

/**
 * One text a run, in the order of time; null where a run is like those before it. The capacitor's
 * tolerance is common to all runs, so a run is held against the scatter of the earlier ones and not
 * against its own stated uncertainty.
 */
export function departures(runs: CoilRun[]): (string | null)[] {
  return runs.map((run, i) => {
    const changes = (Object.keys(least) as Tracked[]).flatMap((key) => {
      const change = changeOf(key, run, runs.slice(0, i));
      return change === null ? [] : [{ key, change }];
    });
    if (changes.length === 0) return null;
    const fell = (key: Tracked) => changes.some((other) => other.key === key && other.change < 0);
    const texts = changes.map(
      ({ key, change }) =>
        `${words[key]} is ${Math.abs(change * 100).toFixed(1)} % ${change < 0 ? "below" : "above"} the runs before`,
    );
    if (fell("inductance_H") && fell("q"))
      texts.push("falling L with falling Q is what shorted turns look like");
    return texts.join("; ");
  });
}

const sameCapacitor = 0.02;

/** Q goes with the capacitor, and L where stray capacitance is not stated; the winding's resistance with neither. */
function comparable(key: Tracked, one: CoilRun, other: CoilRun): boolean {
  if (key === "resistance20_ohm") return true;
  const [a, b] = [one.capacitance_F?.value, other.capacitance_F?.value];
  if (a === undefined || b === undefined) return a === b;
  return Math.abs(a / b - 1) <= sameCapacitor;
}

/** Relative departure from the median of the earlier runs, null when it is within their scatter. */
function changeOf(key: Tracked, run: CoilRun, earlier: CoilRun[]): number | null {
  const now = run[key]?.value;
  const before = earlier.flatMap((other) => (comparable(key, run, other) && other[key]?.value) || []);
  if (now === undefined || before.length < needed) return null;
  const middle = median(before);
  if (!(middle > 0)) return null;
  const change = now / middle - 1;
  const scatter = Math.max(least[key], (3 * robustSpread(before)) / middle);
  return Math.abs(change) > scatter ? change : null;
}

/** What drifts over the runs with the capacitor of the last, in words with the rate a year; empty where nothing does. */
export function drifts(runs: CoilRun[]): string[] {
  return (Object.keys(least) as Tracked[]).flatMap((key) => {
    const last = runs.findLast((run) => run[key] !== null);
    const points = runs.flatMap((run) => {
      if (!last || !comparable(key, run, last)) return [];
      const figure = run[key];
      return figure ? [{ x: run.day, value: figure.value, u: 0 }] : [];
    });
    const drift = driftOf(points);
    if (!drift?.drifts || drift.level.value === 0) return [];
    const rate = ((drift.slope.value * 365.25) / drift.level.value) * 100;
    const u = Math.abs(((drift.slope.u * 365.25) / drift.level.value) * 100);
    return [
      `${words[key]} drifts by ${rate.toFixed(2)} ± ${u.toFixed(2)} % a year over ${points.length} runs`,
    ];
  });
}
