/**
 * Traces that hold no free ring of a coil, or too little of one: refused, no pulse at all, or poor with the
 * reason; never a confident figure. Each shape by its formula, at several sizes, lengths, noises and both ways up.
 */
import { expect, it } from "vitest";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, scoped } from "../reference/captures.ts";
import { seeded } from "../reference/random.ts";

const STEP = 1e-6;

interface Variant {
  samples: number;
  /** Samples a cycle of whatever swings. */
  cycle: number;
  phase: number;
}

/** Value at sample i; `x` is i over the record's length. */
const shapes: Record<string, (v: Variant) => (i: number, x: number) => number> = {
  DC: () => () => 1,
  "noise only": () => () => 0,
  sine:
    ({ cycle, phase }) =>
    (i) =>
      Math.sin((2 * Math.PI * i) / cycle + phase),
  "square wave":
    ({ cycle, phase }) =>
    (i) =>
      Math.sign(Math.sin((2 * Math.PI * i) / cycle + phase)),
  triangle:
    ({ cycle, phase }) =>
    (i) =>
      Math.asin(Math.sin((2 * Math.PI * i) / cycle + phase)),
  step:
    ({ samples }) =>
    (i) =>
      i > 0.4 * samples ? 1 : 0,
  "exponential decay":
    ({ samples }) =>
    (i) =>
      i > 0.3 * samples ? Math.exp((0.3 * samples - i) / 200) : 0,
  chirp:
    ({ cycle, samples }) =>
    (i) =>
      Math.sin((2 * Math.PI * i * (1 + (3 * i) / samples)) / cycle),
  "growing oscillation":
    ({ cycle, samples }) =>
    (i, x) =>
      i > 0.2 * samples ? Math.exp(3 * (x - 1)) * Math.sin((2 * Math.PI * i) / cycle) : 0,
  "a burst of steady size":
    ({ cycle, samples }) =>
    (i) =>
      i > 0.3 * samples && i < 0.6 * samples ? Math.sin((2 * Math.PI * i) / cycle) : 0,
  hum:
    ({ samples, phase }) =>
    (_, x) =>
      Math.sin(2 * Math.PI * 1.7 * x + phase + samples),
  ramp: () => (_, x) => x,
};

it.each(Object.keys(shapes))("%s: no confident ring", (name) => {
  const random = seeded(17);
  for (let trial = 0; trial < 24; trial++) {
    const samples = Math.round(10 ** random.between(2.6, 4.2));
    const variant = { samples, cycle: random.between(8, samples / 4), phase: random.between(0, 6.28) };
    const size = 10 ** random.between(-1, 3) * random.pick([-1, 1]);
    const shape = shapes[name](variant);
    const signal = Float64Array.from({ length: samples }, (_, i) => size * (0.3 + shape(i, i / samples)));
    const noise_lsb = random.pick([0.3, 1, 4]);
    const screen = 2.4 * Math.max(...signal.map(Math.abs), 1e-3);
    const channel = scoped("switch-node", "V", signal, random, { noise_lsb, screen });
    const { reading } = readCapture(captureOf([channel], STEP), { capacitor_F: 1e-7 });
    const confident = reading.pulses.filter(({ ring }) => ring?.quality === "good");
    expect(confident, `trial ${trial}: ${JSON.stringify({ ...variant, size, noise_lsb })}`).toEqual([]);
    for (const { ring, inductance_H } of reading.pulses) {
      if (ring?.quality !== "good") expect(ring?.reason ?? "none").not.toBe("");
      if (!ring || ring.quality === "refused") expect(inductance_H).toBeNull();
    }
  }
});

/** A free ring from switch-off on, by its formula, of which too little can be seen. */
const scant: Record<string, { cycles: [number, number]; perCycle: [number, number]; clipShare?: number }> = {
  "fewer than two cycles": { cycles: [0.6, 1.9], perCycle: [40, 200] },
  "fewer than five samples a cycle": { cycles: [10, 60], perCycle: [2.1, 4.9] },
  "a ring pinned at the screen's edge all along": { cycles: [3, 8], perCycle: [40, 200], clipShare: 0.02 },
};

it.each(Object.entries(scant))("%s: no confident ring", (_, { cycles, perCycle, clipShare }) => {
  const random = seeded(23);
  for (let trial = 0; trial < 24; trial++) {
    const cycle = random.between(...perCycle);
    const count = Math.round(cycle * random.between(...cycles));
    const conduction = Math.round(Math.max(40, 3 * cycle));
    const q = random.between(10, 40);
    const sign = random.pick([-1, 1]);
    const signal = Float64Array.from({ length: conduction + count }, (__, i) => {
      const t = i - conduction;
      const ring = Math.exp((-Math.PI * t) / (q * cycle)) * Math.sin((2 * Math.PI * t) / cycle);
      return sign * (t < 0 ? 0.4 : 12 + 300 * ring);
    });
    const channel = scoped("switch-node", "V", signal, random, { noise_lsb: 0.5, clipShare });
    const { reading } = readCapture(captureOf([channel], STEP), { capacitor_F: 1e-7 });
    const confident = reading.pulses.filter(({ ring }) => ring?.quality === "good");
    expect(
      confident.map(({ ring }) => ring),
      `trial ${trial}`,
    ).toEqual([]);
  }
});
