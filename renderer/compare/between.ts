/** What lies between two runs, in words. */
import type { RunComparison } from "../../analysis/coil/compare.ts";
import type { Figure } from "../../analysis/reading-format.ts";

/** Figures whose difference its own uncertainty does not explain (k = 2). */
export function farApart(figures: { name: string; difference: Figure }[]): string {
  const known = figures.filter(({ difference }) => difference !== null);
  if (known.length === 0) return "No figure was measured in both runs.";
  const apart = known.filter(({ difference }) => Math.abs(difference!.value) > 2 * difference!.u);
  if (apart.length === 0) return "No figure differs by more than its uncertainty explains (k = 2).";
  return `${apart.map(({ name }) => name).join(" and ")} ${apart.length === 1 ? "differs" : "differ"} by more than the uncertainty explains (k = 2).`;
}

/** Share of quiet pulses, second less first, in points of a hundred. */
export function between(rate: RunComparison["quietRate"]): string {
  if (!rate) return "In one of them no pulse was judged: their rates can't be compared.";
  const points = (share: number) => `${Math.abs(100 * share).toFixed(1)} ${share < 0 ? "fewer" : "more"}`;
  const sure = rate.low > 0 || rate.high < 0;
  return (
    `Of a hundred pulses ${points(rate.value)} stay without a spark in the second ` +
    `(${points(rate.low)} to ${points(rate.high)} at ${(100 * rate.level).toFixed(0)} %): ` +
    `${sure ? "more than chance explains." : "chance explains that."}`
  );
}
