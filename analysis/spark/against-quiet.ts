/**
 * A pulse laid on the run's quiet ones: what no free ring explains in any of them (a core's bend, a clamp, a
 * bouncing contact) is in all alike, and what is left of the difference is this pulse's own.
 */
import { median, robustSpread } from "../numeric/median.ts";
import { quietNeighbours, type Member } from "./expected.ts";
import type { Judged } from "./judge.ts";
import type { Likelihood } from "./likelihood.ts";
import { NOISE } from "./traits.ts";

interface Comparison {
  /** √ of what the best multiple of the quiet course leaves over, in σ: its strength. */
  left: number;
  /** That multiple over the whole pulse, and over what follows its second period. */
  whole: number;
  late: number;
}

/** Quiet pulses needed for a comparison to have a measure. */
const LEAST = 3;
/** A pulse is like the quiet ones up to this multiple of them: less is another current or a spark. */
const LIKE = 0.9;
const TURNED = 0.04;
/** Share of the quiet course that is missing late, at least, for a spark. */
const LOST = 0.08;

/** One likelihood for each of `run`, its own or the one that the comparison bears out better. */
export function againstQuiet(run: Member[], quiet: number[]): Likelihood[] {
  if (quiet.length < LEAST) return run.map(({ judged }) => judged.likelihood);
  const found = run.map((_, place) => compared(run, quiet, place));
  const usual = (of: (comparison: Comparison) => number) => {
    const values = quiet.flatMap((place) => (found[place] ? [of(found[place])] : []));
    return { middle: median(values), spread: robustSpread(values) };
  };
  const [left, late] = [usual((each) => each.left), usual((each) => each.late)];
  return run.map(({ judged }, place) => weigh(judged, found[place], left, late.spread));
}

function weigh(
  { likelihood, traits }: Judged,
  comparison: Comparison | null,
  left: { middle: number; spread: number },
  strays: number,
): Likelihood {
  if (!comparison || likelihood.because === "volt-seconds" || traits.startsInRing) return likelihood;
  const usual = left.middle + 3 * left.spread;
  if (comparison.left < Math.max(NOISE, usual) && comparison.whole > LIKE) {
    // Nothing lost and only turned: two switch-offs placed differently, which the laying-on makes good.
    const turned = likelihood.loss !== null && Math.abs(likelihood.loss) < TURNED;
    if (likelihood.probability < 0.1 || (likelihood.probability > 0.99 && !turned)) return likelihood;
    return {
      ...likelihood,
      probability: 0.02,
      because: "like-quiet",
      away: null,
      loss: 1 - comparison.whole,
    };
  }
  const loss = 1 - comparison.late;
  const strange = comparison.left > 3 * NOISE && comparison.left > 2 * usual;
  if (!strange || loss < Math.max(LOST, 4 * strays) || likelihood.probability > 0.98) return likelihood;
  return { ...likelihood, probability: 0.98, because: "unlike-quiet", away: null, loss };
}

function compared(run: Member[], quiet: number[], place: number): Comparison | null {
  const { judged, window } = run[place];
  const expected = quietNeighbours(judged, run, quiet, place, window);
  if (!expected?.spread) return null;
  const { values: y, segments, count } = window.blocks;
  const { values, spread, from } = expected;
  const variance = judged.traits.split.variance;
  const sums = (start: number) => {
    let [n, s, sy, sx, sxx, sxy, syy] = [0, 0, 0, 0, 0, 0, 0];
    for (let k = 0; k < segments.length; k += 2)
      for (let i = Math.max(start, segments[k]); i < Math.min(segments[k + 1], count); i++) {
        const w = 1 / (variance + spread[i] * spread[i]);
        const wx = w * values[i];
        const wy = w * y[i];
        n++;
        s += w;
        sx += wx;
        sy += wy;
        sxx += wx * values[i];
        sxy += wx * y[i];
        syy += wy * y[i];
      }
    const [cxx, cxy, cyy] = [sxx - (sx * sx) / s, sxy - (sx * sy) / s, syy - (sy * sy) / s];
    return { n, multiple: cxy / cxx, known: cxx, rest: cyy - (cxy * cxy) / cxx };
  };
  const whole = sums(from + 2);
  const late = sums(Math.max(from, Math.round(2 * window.period)));
  // A multiple known no better than to a few percent tells no loss.
  if (whole.n < 8 || !(late.known > 40 ** 2)) return null;
  return { left: Math.sqrt(Math.max(0, whole.rest - whole.n)), whole: whole.multiple, late: late.multiple };
}
