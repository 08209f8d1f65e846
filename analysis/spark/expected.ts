/** The waveform a pulse would have shown without a spark, as far as it can be known. */
import type { Judged } from "./judge.ts";
import { nearest } from "./reference.ts";
import type { SparkWindow } from "./window.ts";

export interface Expected {
  /** In the pulse's own blocks, level removed alike. */
  values: Float64Array;
  /** First block the expectation speaks for. */
  from: number;
  /** Share of its size that it may be wrong by. */
  slack: number;
  /** What it may be wrong by at a block, as the pulses it was made of differ there. */
  spread: Float64Array | null;
  /** Block up to which it holds. */
  to: number;
}

export interface Expectations {
  /** Ways to know the course without a spark: the ring before it, quiet pulses of the run; may be empty. */
  course: Expected[];
  /** Where nothing else is to be had: the first rise as the run's last sparks left it. */
  rise: Expected | null;
  /** And other pulses of the run, each until it strikes itself: the last that is parted from tells the most. */
  peers: Expected[];
}

/** Quiet pulses taken together for the expectation. */
const MODELS = 5;
/** Sparking pulses whose first rises are laid on each other, at least and at most. */
const PEERS = { least: 3, most: 10 };
/** How long a first rise is at most, in periods. */
const RISE = 0.3;
const SLACK = 0.02;
const MOST_SCALE = 0.15;

export interface Member {
  judged: Judged;
  window: SparkWindow;
}

/** `quiet`: ascending places in `run` of the pulses taken for quiet. */
export function expectedOf(
  judged: Judged,
  run: Member[],
  quiet: number[],
  place: number,
  window: SparkWindow,
): Expectations {
  const course = [ringBefore(judged, window), quietNeighbours(judged, run, quiet, place, window)].filter(
    (expected) => expected !== null,
  );
  if (course.length > 0) return { course, rise: null, peers: [] };
  const peers = peersOf(judged, run, place);
  if (peers.length < PEERS.least) return { course, rise: null, peers: [] };
  const seen = peers.map((peer) => asSeen([peer], window, () => 1));
  return { course, rise: highestRise(seen, window), peers: seen };
}

/** Those nearest to it with its modes. */
function peersOf(judged: Judged, run: Member[], place: number): Member[] {
  const near = nearest([...run.keys()], place, 2 * PEERS.most)
    .map((i) => run[i])
    .filter((other) => other.judged.traits.modes === judged.traits.modes);
  return near.slice(0, PEERS.most);
}

/**
 * Until they strike, all pulses rise alike, and a spark only takes: the second highest of many at each block is
 * what the rise would have been, up to the last but one of them.
 */
function highestRise(seen: Expected[], window: SparkWindow): Expected {
  const values = seen[0].values.map(
    (_, i) => seen.map((each) => each.values[i]).toSorted((p, q) => q - p)[1],
  );
  const to = Math.min(values.length, Math.round(RISE * window.period));
  return { values, from: Math.max(...seen.map(({ from }) => from)), slack: SLACK, spread: null, to };
}

function ringBefore({ traits }: Judged, window: SparkWindow): Expected | null {
  if (!traits.ringBefore) return null;
  const { coefficients } = traits.split.before;
  const values = Float64Array.from({ length: window.blocks.count }, (_, i) =>
    traits.sums.value(coefficients, i),
  );
  const from = Math.max(0, traits.a - Math.round(window.period));
  return { values, from, slack: 0, spread: null, to: values.length };
}

/** The run's quiet pulses near this one, scaled to its place in the train; null with none. */
export function quietNeighbours(
  judged: Judged,
  run: Member[],
  quiet: number[],
  place: number,
  window: SparkWindow,
): Expected | null {
  const rest = judged.quietRest;
  if (!rest) return null;
  const scale = ({ judged: { traits } }: Member) =>
    traits.rest ? Math.hypot(...rest) / Math.hypot(...traits.rest) : 1;
  const models = nearest(quiet, place, 2 * MODELS)
    .map((i) => run[i])
    .filter((other) => other.judged.traits.modes === judged.traits.modes)
    // Supplies sag little from one pulse to the next: what is far from its neighbours is no model for them.
    .filter((other) => Math.abs(Math.log(scale(other))) < MOST_SCALE)
    .slice(0, MODELS);
  if (models.length === 0) return null;
  const scales = models.map(scale);
  const earlier = held.get(window);
  const same =
    earlier?.models.length === models.length &&
    earlier.models.every(
      (each, k) => each === models[k].window && Math.abs(earlier.scales[k] - scales[k]) < 1e-3,
    );
  if (same) return earlier.expected;
  const expected = asSeen(models, window, scale);
  held.set(window, { models: models.map((model) => model.window), scales, expected });
  return expected;
}

/** What a window was laid on the last time: a growing run is judged again and again. */
const held = new WeakMap<SparkWindow, { models: SparkWindow[]; scales: number[]; expected: Expected }>();

/** The median of other pulses in this one's blocks: one of them may be no quiet one after all. */
function asSeen(models: Member[], window: SparkWindow, scale: (model: Member) => number): Expected {
  // Before a model's own first block there is nothing to go by.
  const starts = models.map((model) => Math.ceil((model.window.first_s - window.first_s) / window.step_s));
  const from = Math.max(0, ...starts);
  const each = models.map((model) => laidOn(model.window, window, scale(model), from));
  const values = new Float64Array(window.blocks.count);
  const spread = each.length > 1 ? new Float64Array(values.length) : null;
  const at = new Float64Array(each.length);
  for (let i = 0; i < values.length; i++) {
    for (let k = 0; k < at.length; k++) at[k] = each[k][i];
    values[i] = middleOf(at);
    if (!spread) continue;
    for (let k = 0; k < at.length; k++) at[k] = Math.abs(at[k] - values[i]);
    spread[i] = 1.4826 * middleOf(at);
  }
  return { values, from, slack: SLACK, spread, to: values.length };
}

/** Median of a few, which it sorts: this runs for every block of every pulse. */
function middleOf(few: Float64Array): number {
  for (let k = 1; k < few.length; k++) {
    const value = few[k];
    let j = k - 1;
    for (; j >= 0 && few[j] > value; j--) few[j + 1] = few[j];
    few[j + 1] = value;
  }
  const half = few.length >> 1;
  return few.length % 2 === 1 ? few[half] : (few[half - 1] + few[half]) / 2;
}

/** The other pulse's own blocks, read between its block centres, scaled from the level of conduction on. */
function laidOn(other: SparkWindow, window: SparkWindow, scale: number, from: number): Float64Array {
  const known = other.levelOn !== null && window.levelOn !== null;
  const under = known ? other.levelOn! : 0;
  const onto = known ? window.levelOn! : other.blocks.level - window.blocks.level;
  const { values } = other.blocks;
  const at = (i: number) => (window.first_s + i * window.step_s - other.first_s) / other.step_s;
  const seen = (i: number) => onto + scale * (between(values, other.blocks.count, at(i)) - under);
  const shift = shiftOf(window, seen, from);
  return Float64Array.from({ length: window.blocks.count }, (_, i) => seen(i - shift));
}

function between(values: Float64Array, count: number, at: number): number {
  const left = Math.min(count - 2, Math.max(0, Math.floor(at)));
  const part = Math.min(1, Math.max(0, at - left));
  return values[left] * (1 - part) + values[left + 1] * part;
}

const MOST_SHIFT = 3;

/**
 * Blocks by which another pulse's trace must be moved to lie on this one's first rise: two switch-offs are
 * known to a sample or two only.
 */
function shiftOf({ blocks, period }: SparkWindow, seen: (i: number) => number, from: number): number {
  const rise = Math.max(4, Math.round(0.04 * period));
  let [best, least] = [0, Number.POSITIVE_INFINITY];
  for (let shift = -MOST_SHIFT; shift <= MOST_SHIFT; shift += 0.125) {
    let [sum, count] = [0, 0];
    for (let i = from; i < Math.min(from + rise, blocks.count); i++) {
      if (i - shift < from) continue;
      sum += (blocks.values[i] - seen(i - shift)) ** 2;
      count++;
    }
    if (count >= 2 && sum / count < least) [best, least] = [shift, sum / count];
  }
  return best;
}
