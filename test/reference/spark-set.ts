/** The simulated set: runs of pulses with the gap's truth and each spark's strength. */
import type { Capture, Channel, ChannelRole } from "../../analysis/capture.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { integrateRing, type Gap, type RingWaves } from "./coupled-ring.ts";
import { seeded, type Random } from "./random.ts";
import { digitise, type ScopeInput } from "./simulate-scope.ts";
import { randomBench, randomScope, type RandomBench, type Trouble } from "./spark-bench.ts";
import { strength } from "./spark-strength.ts";

export type SparkKind = "first-rise" | "late" | "low" | "glow" | "weak";

export interface PulseTruth {
  spark: boolean;
  kind: SparkKind | null;
  /** √Σ(…)²/σ after the best quiet ring is fitted away; and before. */
  strength: number;
  strengthBefore: number;
  /** After the file's zero, which is the first switch-off of the capture. */
  onset_s: number | null;
  breakdown_V: number | null;
  switchOff_s: number;
}

export interface SimulatedRun {
  trouble: Trouble;
  captures: Capture[];
  setup: Setup;
  truths: PulseTruth[][];
  period_s: number;
  /** Samples in one period of the low mode. */
  perPeriod: number;
  /** Samples from each switch-off to the next edge or the record's end. */
  free: number;
}

export interface RunRecipe {
  trouble: Trouble;
  pulses: number;
  /** Share of pulses whose gap may strike. */
  sparkShare: number;
  kinds: readonly SparkKind[];
  /** One capture holding all pulses instead of one each. */
  train: boolean;
  secondary?: boolean;
}

export function simulateRun(seed: number, recipe: RunRecipe): SimulatedRun {
  const random = seeded(seed);
  const bench = randomBench(recipe.trouble, random);
  const full = integrateRing(bench.circuit, startOf(bench, bench.current_A), null, gridOf(bench));
  const kick_V = Math.max(...full.node_V) - bench.circuit.supply_V;
  harden(bench, kick_V, random);
  const scope = randomScope(bench, kick_V, random);
  const reach_V = Math.max(...full.secondary_V.map(Math.abs));
  const sag = random.uniform() < 0.3 ? random.between(0, 0.1) : 0;
  const share = random.between(0.3, 0.95);
  const pulses = Array.from({ length: recipe.pulses }, (_, i) => {
    const along = i / Math.max(1, recipe.pulses - 1);
    const current_A = bench.current_A * (1 - sag * along) * (1 + 0.002 * random.normal());
    const kind = random.uniform() < recipe.sparkShare ? random.pick(recipe.kinds) : null;
    return makePulse(
      bench,
      scope,
      current_A,
      kind,
      { full, reach_V, share: share * (1 - 0.2 * along) },
      random,
    );
  });
  const groups = recipe.train ? [pulses] : pulses.map((pulse) => [pulse]);
  const captures = groups.map((group) => capture(group, bench, scope, recipe, random));
  return {
    trouble: recipe.trouble,
    captures: captures.map((made) => made.capture),
    truths: captures.map((made) => made.truths),
    period_s: bench.period_s,
    perPeriod: bench.period_s / bench.step_s,
    free: bench.free,
    setup: {
      format: "ringbook.setup/1",
      expected: "spark",
      capacitor_F: bench.circuit.capacitance_F,
      capacitorAcross: "switch",
      turnsRatio: bench.turnsRatio,
      supply_V: bench.circuit.supply_V,
      switchOnVoltage_V: bench.onVoltage_V,
    },
  };
}

const gridOf = (bench: RandomBench) => ({ samples: bench.free, step_s: bench.step_s });
const startOf = (bench: RandomBench, current_A: number) => ({ current_A, node_V: bench.onVoltage_V });

/** Troubles of the circuit whose size hangs on the kick. */
function harden(bench: RandomBench, kick_V: number, random: Random): void {
  const { circuit, trouble, period_s } = bench;
  if (trouble === "clamp") circuit.clamp_V = circuit.supply_V + kick_V * random.between(0.6, 0.92);
  if (trouble === "hysteresis") circuit.lossGrowth_per_V = random.between(0.5, 2) / kick_V;
  if (trouble === "bounce") {
    const from = period_s * random.between(0.01, 0.06);
    circuit.bounces_s = [[from, from + period_s * random.between(0.01, 0.05)]];
  }
}

interface MadePulse {
  waves: RingWaves;
  current_A: number;
  truth: Omit<PulseTruth, "switchOff_s">;
}

function makePulse(
  bench: RandomBench,
  scope: ScopeInput,
  current_A: number,
  kind: SparkKind | null,
  reference: { full: RingWaves; reach_V: number; share: number },
  random: Random,
): MadePulse {
  const gap = kind === null ? null : gapOf(kind, bench, reference, random);
  const start = startOf(bench, current_A);
  const waves = integrateRing(bench.circuit, start, gap, gridOf(bench));
  const first = waves.strikes[0];
  const truth = {
    spark: false,
    kind: null,
    strength: 0,
    strengthBefore: 0,
    onset_s: null,
    breakdown_V: null,
  };
  if (!first) return { waves, current_A, truth };
  const quiet = integrateRing(bench.circuit, start, null, gridOf(bench));
  const lsb = scope.screen / 256;
  const sigma = Math.hypot(scope.noise, lsb / Math.sqrt(12));
  return {
    waves,
    current_A,
    truth: {
      spark: true,
      kind,
      onset_s: first.onset_s,
      breakdown_V: first.breakdown_V,
      ...strength(waves.node_V, quiet.node_V, bench.step_s, sigma),
    },
  };
}

const GOLDEN = (Math.sqrt(5) - 1) / 2;

function gapOf(
  kind: SparkKind,
  bench: RandomBench,
  { full, reach_V, share }: { full: RingWaves; reach_V: number; share: number },
  random: Random,
): Gap {
  const least = kind === "low" ? 2.5 : 0.6;
  const lag =
    kind === "first-rise" ? 0 : Math.floor(bench.free * random.between(0.05, kind === "low" ? 0.6 : 0.4));
  // Between two samples: a gap does not wait for the scope, and one that strikes on a sample is read half a sample off.
  const between_s = ((GOLDEN * lag) % 1) * bench.step_s;
  const lag_s = kind === "first-rise" ? 0 : Math.max(least * bench.period_s, lag * bench.step_s) + between_s;
  const from = Math.min(bench.free - 2, Math.round(lag_s / bench.step_s));
  const ahead = full.secondary_V.subarray(from, from + Math.ceil(bench.period_s / bench.step_s));
  const local_V = kind === "first-rise" ? reach_V : Math.max(...ahead.map(Math.abs));
  const breakdown_V = local_V * Math.min(0.97, share * (1 + 0.05 * random.normal()));
  const current_A = bench.current_A / bench.turnsRatio;
  if (kind === "glow" || kind === "weak") {
    const { inductance_H, capacitance_F } = bench.circuit.secondary;
    return {
      breakdown_V,
      lag_s: random.uniform() < 0.5 ? 0 : lag_s,
      kind: {
        glow_ohm:
          Math.sqrt(inductance_H / capacitance_F) *
          (kind === "weak" ? 10 ** random.between(0.6, 2) : random.between(0.5, 4)),
      },
      hold: breakdown_V * random.between(0.3, 0.6),
    };
  }
  return {
    breakdown_V,
    lag_s,
    kind: { burn_V: breakdown_V * random.between(0.03, 0.1) },
    hold: current_A * random.between(0.02, 0.15),
  };
}

/** Idle, conduction and ring of each pulse in a row, through the scope. */
function capture(
  group: MadePulse[],
  bench: RandomBench,
  scope: ScopeInput,
  recipe: RunRecipe,
  random: Random,
) {
  const dwell = Math.round((bench.period_s / bench.step_s) * random.between(1, 3));
  const idle = Math.round(dwell * 0.3);
  const total = idle + group.length * (dwell + bench.free) + (bench.trouble === "next turn-on" ? dwell : 0);
  const node = new Float64Array(total).fill(bench.onVoltage_V);
  const high = new Float64Array(total);
  node.fill(bench.circuit.supply_V, 0, idle);
  const truths: PulseTruth[] = [];
  // The switch opens anywhere between two samples: the truth is where the first free sample starts from.
  group.forEach(({ waves, truth }, i) => {
    const off = idle + dwell + i * (dwell + bench.free);
    node.set(waves.node_V, off);
    high.set(waves.secondary_V, off);
    const switchOff_s = (off - idle - dwell) * bench.step_s;
    truths.push({
      ...truth,
      switchOff_s,
      onset_s: truth.onset_s === null ? null : switchOff_s + truth.onset_s,
    });
  });
  const hum = scope.hum ? { ...scope.hum, phase_rad: random.between(0, 6.28) } : null;
  const seen = digitise(node, bench.step_s, { ...scope, hum }, random);
  if (bench.trouble === "burst") addBurst(seen, scope, idle + dwell, bench, random);
  const channels = [channel(0, "node", "switch-node", seen, scope)];
  if (recipe.secondary) {
    const screen = 2.4 * Math.max(...high.map(Math.abs), 1);
    const input = { screen, centre: 0, noise: screen / 400 };
    channels.push(channel(1, "high", "secondary", digitise(high, bench.step_s, input, random), input));
  }
  const timebase = {
    start_s: -(idle + dwell) * bench.step_s,
    step_s: bench.step_s,
    stepUncertainty_s: 0,
    samples: total,
  };
  const made: Capture = {
    record: { index: 0, count: 1, time: null },
    channels,
    timebase,
    acquisition: [],
    notes: [],
  };
  return { capture: made, truths };
}

/** Pickup from somewhere else: a short packet that leaves the ring as it was. */
function addBurst(
  seen: Float64Array,
  scope: ScopeInput,
  off: number,
  bench: RandomBench,
  random: Random,
): void {
  const period = bench.period_s / bench.step_s;
  const from = off + Math.floor(random.between(0.3 * period, bench.free * 0.7));
  const length = period * random.between(0.05, 0.8);
  const size = scope.noise * random.between(5, 40);
  const omega = random.between(0.3, 2.5);
  const [top, bottom] = [scope.centre + scope.screen / 2, scope.centre - scope.screen / 2];
  for (let i = from; i < Math.min(seen.length, from + 4 * length); i++) {
    const extra =
      size * Math.exp(-(i - from) / length) * Math.sin(omega * (i - from)) * (1 + 0.3 * random.normal());
    seen[i] = Math.min(top, Math.max(bottom, seen[i] + extra));
  }
}

function channel(
  position: number,
  name: string,
  role: ChannelRole,
  samples: Float64Array,
  { screen, centre }: ScopeInput,
): Channel {
  const lsb = screen / 256;
  const top = centre + 127 * lsb - lsb / 4;
  const bottom = centre - 128 * lsb + lsb / 4;
  const unusable: number[] = [];
  let overrange = 0;
  for (let i = 0; i < samples.length; i++) {
    if (samples[i] < top && samples[i] > bottom) continue;
    overrange++;
    if (unusable[unusable.length - 1] === i) unusable[unusable.length - 1] = i + 1;
    else unusable.push(i, i + 1);
  }
  return {
    position,
    name,
    unit: "V",
    fileUnit: "V",
    role,
    roleGuessed: false,
    scale: 1,
    offset: 0,
    samples,
    lsb,
    unusable: Int32Array.from(unusable),
    overrange,
  };
}
