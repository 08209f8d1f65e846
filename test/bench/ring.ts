/**
 * Rings: figures against their bound, and speed against a general-purpose fitting library on
 * the same samples and model, in one run.
 */
import { levenbergMarquardt } from "ml-levenberg-marquardt";
import { readCapture } from "../../analysis/reading.ts";
import { fitRing } from "../../analysis/ring/fit.ts";
import { captureOf, channelOf, scoped } from "../reference/captures.ts";
import { seeded } from "../reference/random.ts";
import {
  digitised,
  ringBound,
  ringTrial,
  twoModeTrial,
  wholeRange,
  type RingTrial,
} from "../reference/ring-set.ts";
import { scoreRings, series } from "../reference/ring-score.ts";
import { noises, scoreHardNoise } from "../reference/hard-noise.ts";
import { scoreRamps, scoreTroubledRings, type Errors } from "../reference/value-score.ts";
import { runBench } from "../reference/switched-coil.ts";

const milliseconds = (f: () => void, times: number): number => {
  const start = performance.now();
  for (let k = 0; k < times; k++) f();
  return (performance.now() - start) / times;
};

/** Best of a few rounds: what the machine can do when it is left alone. */
const best = (f: () => void, times: number, rounds = 5): number =>
  Math.min(...Array.from({ length: rounds }, () => milliseconds(f, times)));

const row = (figure: string, reached: string, wanted: string) =>
  console.log(`${figure.padEnd(62)} ${reached.padStart(22)}   ${wanted}`);
const percent = (share: number) => `${(100 * share).toFixed(1)} %`;

export async function run(): Promise<void> {
  row("figure", "reached", "wanted");
  accuracy();
  secondModes();
  values();
  hardNoise();
  speed();
  await Promise.resolve();
}

function accuracy(): void {
  const score = scoreRings(series(3000, 10_000, (seed) => ringTrial(seed)));
  const at = (name: string, { rms, bias }: { rms: number; bias: number }) => {
    row(`${name}: RMSE / Cramér–Rao bound (3,000 rings, 20–60 dB)`, rms.toFixed(3), "≤ 1.05");
    row(`${name}: bias / bound`, bias.toFixed(3), "≤ 0.15");
  };
  at("frequency", score.frequency);
  at("decay", score.decay);
  const held = [score.frequency, score.decay, score.q, score.inductance].map(({ within2u }) =>
    percent(within2u),
  );
  row("within 2u: frequency, decay, Q, L", held.join(" "), "93–97 %");
  row("switch-offs missed, invented", `${score.missed}, ${score.invented}`, "0, 0");
  row("second mode invented", percent(score.inventedModes / score.trials), "≤ 1 %");
  row("worst switch-off instant in ring periods", score.worstInstant_periods.toFixed(3), "≤ 0.05");
  const coarse = scoreRings(
    series(1500, 60_000, (seed) => ringTrial(seed, { ...wholeRange, leastNoise_lsb: 0.02 })),
  );
  const low = [coarse.frequency, coarse.decay, coarse.q, coarse.inductance].map(({ within2u }) =>
    percent(within2u),
  );
  row("within 2u with noise down to 0.02 LSB", low.join(" "), "≥ 93 %");
}

function secondModes(): void {
  const trials = [...series(1000, 5000, (seed) => twoModeTrial(seed, [8, 60]))].filter(
    ({ strength }) => strength >= 8,
  );
  const errors: number[] = [];
  let found = 0;
  for (const trial of trials) {
    const fit = fitRing(trial.samples, trial.first, trial.samples.length, trial.step_s, { lsb: trial.lsb });
    if (fit?.modes.length !== 2) continue;
    found++;
    const bound = ringBound(trial);
    trial.modes.forEach((mode, m) =>
      errors.push(Math.abs(fit.modes[m].frequency_Hz - mode.frequency_Hz) / bound.frequency_Hz[m]),
    );
  }
  errors.sort((a, b) => a - b);
  row("second mode found (matched filter ≥ 8 σ, 1.5/window apart)", percent(found / trials.length), "≥ 95 %");
  const of = (share: number) => errors[Math.floor(share * (errors.length - 1))].toFixed(2);
  row(
    "frequency error, both modes, median / 99 % / worst over bound",
    `${of(0.5)} / ${of(0.99)} / ${of(1)}`,
    "≤ 1 / 3 / 4.5",
  );
}

/** L, R and saturation current against the components' values. */
function values(): void {
  const at = (name: string, { relative, within2u, missing }: Errors, wanted: string) => {
    const of = (share: number) =>
      `${(100 * relative[Math.floor(share * (relative.length - 1))]).toFixed(3)} %`;
    row(`${name}: median, 95 %, worst error`, `${of(0.5)}, ${of(0.95)}, ${of(1)}`, wanted);
    row("… within 2u, figures missing", `${percent(within2u)}, ${missing}`, "93–97 %, 0");
  };
  const rings = scoreTroubledRings(1600, 20_000);
  at("L by exact C, ≥ 40 dB: hum, bursts, clipping", rings, "median 0.01 %, worst 0.3 %");
  row("… pulses missed, invented", `${rings.missed}, ${rings.invented}`, "0, 0");
  const ramps = scoreRamps(200, 30_000);
  at("ramp L, ≥ 40 dB, dwell ≥ L/R", ramps.inductance, "0.5 %");
  const { rms, worst, largest } = ramps.bound;
  row(
    "… RMSE, worst over each ramp's bound; the largest bound",
    `${rms.toFixed(2)}, ${worst.toFixed(2)}, ${(100 * largest).toFixed(2)} %`,
    "1.05, 3.5; below the bound nothing can be reached",
  );
  at("ramp R", ramps.resistance, "1 %");
  at("ramp saturation current", ramps.saturation, "2 %");
}

/** Noise as it is met: coloured, with hum, quantised; each alone and with a slow baseline. */
function hardNoise(): void {
  for (const noise of noises) {
    const { l, q, f, a, read, refused } = scoreHardNoise(400, 40_000, noise);
    const shares = [f, a, q, l].map((held) => percent(held / read)).join(" ");
    row(`within 2u, ${noise}: f, decay, Q, L`, shares, `93–97 % (${refused} of 400 refused)`);
  }
}

/** A 4,000-sample pulse of two modes, 80 samples a cycle, 8 bits. */
function pulseOf(second: number): RingTrial {
  const modes = [
    { frequency_Hz: 3420, decay_per_s: 500, amplitude: 300, phase_rad: -1.6 },
    { frequency_Hz: 17_000, decay_per_s: 1900, amplitude: second, phase_rad: 1 },
  ].filter(({ amplitude }) => amplitude > 0);
  const scope = { cycles: 48, perCycle: 80, snr_dB: 44, sigma: 1.6, bits: 8, screen: 700 };
  return digitised(1, seeded(3), modes, 12, 1 / (3420 * 80), scope);
}

function speed(): void {
  const two = pulseOf(25);
  const capture = captureOf([channelOf("switch-node", "V", two.samples, two.lsb)], two.step_s);
  const whole = best(() => readCapture(capture, { capacitor_F: 1e-7 }), 5, 200);
  row(`a pulse of ${two.samples.length} samples, two modes, read whole (ms)`, whole.toFixed(2), "≤ 1");
  train();
  againstLibrary();
}

function train(): void {
  const pulses = Array.from({ length: 100 }, (_, k): [number, number] => [
    k * 1e-2 + 0.3e-3,
    k * 1e-2 + 2.3e-3,
  ]);
  const bench = { inductance_H: 7.5e-3, resistance_ohm: 2.2, capacitance_F: 330e-9, supply_V: 12 };
  const trace = runBench(bench, pulses, 1_000_000, 1e-6, 4);
  const channel = scoped("switch-node", "V", trace.node_V, seeded(2));
  const reads = [1, 0.5, 0.25].map((share) => {
    const samples = channel.samples.slice(0, share * channel.samples.length);
    const capture = captureOf([channelOf("switch-node", "V", samples, channel.lsb)], 1e-6);
    return best(() => readCapture(capture, { capacitor_F: 330e-9 }), 1);
  });
  row("a train of 100 pulses, 1 M samples (ms)", reads[0].toFixed(0), "≤ 150");
  row(
    "… time for 1/2 and 1/4 of it, as a share",
    reads
      .slice(1)
      .map((ms) => (ms / reads[0]).toFixed(2))
      .join(", "),
    "0.50, 0.25",
  );
}

/** Single-mode model, same samples, same start; the library's own defaults but for enough iterations. */
function againstLibrary(): void {
  const trial = pulseOf(0);
  const from = trial.first;
  const y = trial.samples.slice(from);
  const t_ms = Float64Array.from(y, (_, i) => i * trial.step_s * 1e3);
  const model =
    ([offset, a, b, decay, omega]: number[]) =>
    (t: number) =>
      offset + Math.exp(-decay * t) * (a * Math.cos(omega * t) + b * Math.sin(omega * t));
  // In ms: in seconds or µs the library stalls. The start is 0.2 % off in frequency, 20 % in decay.
  const initialValues = [10, 0, 250, 0.6, 2 * Math.PI * 3.42 * 1.002];
  let found: number[] = [];
  const library = best(
    () => {
      const options = {
        damping: 1e-2,
        initialValues,
        maxIterations: 100,
        gradientDifference: 1e-6,
        errorTolerance: 1e-12,
      };
      found = levenbergMarquardt({ x: Array.from(t_ms), y: Array.from(y) }, model, options).parameterValues;
    },
    1,
    3,
  );
  const start = [{ frequency_Hz: 3420 * 1.002, decay_per_s: 600 }];
  let own = 0;
  const ours = best(() => {
    own = fitRing(trial.samples, from, trial.samples.length, trial.step_s, { start, lsb: trial.lsb })!
      .modes[0].frequency_Hz;
  }, 100);
  const bound = ringBound(trial).frequency_Hz[0];
  const error = (f: number) => `${((f - 3420) / bound).toFixed(2)} bounds`;
  row(
    "same single-mode fit: ml-levenberg-marquardt (ms), its error",
    `${library.toFixed(1)}, ${error((found[4] * 1e3) / (2 * Math.PI))}`,
    "",
  );
  row("… this fit (ms), its error", `${ours.toFixed(3)}, ${error(own)}`, "");
  row("… times faster", (library / ours).toFixed(0), "≥ 20");
}
