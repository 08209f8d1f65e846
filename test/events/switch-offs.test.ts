import { describe, expect, it } from "vitest";
import type { Capture } from "../../analysis/capture.ts";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, scoped, type Digitiser } from "../reference/captures.ts";
import { seeded } from "../reference/random.ts";
import { runBench, type CoilBench } from "../reference/switched-coil.ts";

// L, C and R are known, so the instants and the inductance are the truth.
const bench: CoilBench = { inductance_H: 7.5e-3, resistance_ohm: 2.2, capacitance_F: 330e-9, supply_V: 12 };
const setup = { capacitor_F: 330e-9, supply_V: 12, switchOnVoltage_V: 0.2 };
const period_s = 2 * Math.PI * Math.sqrt(bench.inductance_H * bench.capacitance_F);
const random = seeded(7);

function check(capture: Capture, truth_s: number[]): ReturnType<typeof readCapture> {
  const evidence = readCapture(capture, setup);
  const found = evidence.reading.pulses.map((pulse) => pulse.switchOffTime_s!);
  expect(found).toHaveLength(truth_s.length);
  found.forEach((time, k) => expect(Math.abs(time - truth_s[k])).toBeLessThan(0.05 * period_s));
  return evidence;
}

const single = (how: Partial<CoilBench> = {}, samples = 6000) =>
  runBench({ ...bench, ...how }, [[200e-6, 2000.4e-6]], samples, 1e-6);
const off_s = [2000.4e-6];
const plain = single();
const node = (how: Digitiser = {}, trace = plain) =>
  captureOf([scoped("switch-node", "V", trace.node_V, random, how)], 1e-6);

describe("one capture", () => {
  it.each<[string, Digitiser]>([
    ["as it is", {}],
    ["the probe inverted", { sign: -1 }],
    ["AC-coupled, 20 ms", { acCoupling: { tau_s: 20e-3, step_s: 1e-6 } }],
    ["AC-coupled, 3 ms", { acCoupling: { tau_s: 3e-3, step_s: 1e-6 } }],
    ["hum of a tenth", { hum: { share: 0.1, step_s: 1e-6 } }],
    ["hum of three tenths", { hum: { share: 0.3, step_s: 1e-6 } }],
    ["a burst in the ring", { bursts: [{ at: 3000, length: 40, share: 0.2 }] }],
    [
      "bursts before it",
      {
        bursts: [
          { at: 1000, length: 30, share: 0.5 },
          { at: 1500, length: 30, share: 0.5 },
        ],
      },
    ],
    ["clipped at 0.6 of the peak", { clipShare: 0.6 }],
    ["clipped at 0.3 of the peak", { clipShare: 0.3 }],
  ])("%s: one switch-off, L within 0.02 %", (_, how) => {
    const { reading } = check(node(how), off_s);
    expect(reading.pulses[0].ring!.quality).toBe("good");
    expect(Math.abs(reading.pulses[0].inductance_H!.value / bench.inductance_H - 1)).toBeLessThan(2e-4);
  });

  it("a body diode cuts the negative half-waves: the free part is fitted", () => {
    const { reading } = check(node({ bits: 12 }, single({ diode_ohm: 0.1 }, 12_000)), off_s);
    expect(reading.pulses[0].inductance_H!.value / bench.inductance_H).toBeCloseTo(1, 3);
  });

  it("a clamp cuts the kick: the plateau is left out", () => {
    const { reading } = check(node({}, single({ clamp_V: 200 }, 8000)), off_s);
    expect(reading.pulses[0].ring!.quality).toBe("good");
    expect(reading.pulses[0].inductance_H!.value / bench.inductance_H).toBeCloseTo(1, 3);
  });

  it("a saturating core: the frequency's move is reported, the small-amplitude value given as poor", () => {
    const { reading } = check(node({ bits: 12 }, single({ saturation_A: 2.5 }, 8000)), off_s);
    const { ring } = reading.pulses[0];
    expect(ring!.nonlinear!.frequencySpan_Hz).toBeGreaterThan(10);
    expect(ring!.quality).toBe("poor");
    expect(Math.abs(reading.pulses[0].inductance_H!.value / bench.inductance_H - 1)).toBeLessThan(0.01);
  });

  it("a record that starts inside the ring has a pulse without an instant", () => {
    const late = captureOf([scoped("switch-node", "V", plain.node_V.slice(2100), random)], 1e-6);
    const { reading } = readCapture(late, setup);
    expect(reading.pulses.map((pulse) => [pulse.switchOffTime_s, pulse.dwell_s])).toEqual([[null, null]]);
    expect(reading.pulses[0].inductance_H!.value / bench.inductance_H).toBeCloseTo(1, 3);
  });

  it("a bouncing contact: both switch-offs", () => {
    const trace = runBench(
      bench,
      [
        [200e-6, 2000e-6],
        [2180e-6, 2400.3e-6],
      ],
      8000,
      1e-6,
    );
    check(node({}, trace), [2000e-6, 2400.3e-6]);
  });
});

describe("a train of 20", () => {
  const conductions = (skip: number[] = [], jitter = 0) => {
    const shaken = seeded(3);
    return Array.from({ length: 20 }, (_, k): [number, number] => {
      const on = k * 6e-3 + 6e-3 * jitter * shaken.uniform() + 0.3e-3;
      return [on, on + 1.8e-3 * (1 - 0.5 * jitter * shaken.uniform())];
    }).filter((_, k) => !skip.includes(k));
  };
  const cases: [string, [number, number][], Digitiser][] = [
    ["regular", conductions(), {}],
    ["irregular with pulses missing", conductions([3, 7, 8], 0.3), {}],
    ["inverted, with hum", conductions(), { sign: -1, hum: { share: 0.05, step_s: 4e-6 } }],
    ["AC-coupled", conductions(), { acCoupling: { tau_s: 10e-3, step_s: 4e-6 } }],
    ["clipped at half the peak", conductions(), { clipShare: 0.5 }],
  ];
  it.each(cases)("%s: none missed, none invented", (_, on, how) => {
    const trace = runBench(bench, on, 31_000, 4e-6, 12);
    const { reading } = check(
      captureOf([scoped("switch-node", "V", trace.node_V, random, how)], 4e-6),
      on.map(([, off]) => off),
    );
    const dwell = on.map(([from, to]) => to - from);
    // Two edges on a 4 µs grid; the turn-on is a step of two LSB.
    reading.pulses.forEach((pulse, k) => expect(Math.abs(pulse.dwell_s! - dwell[k])).toBeLessThan(4 * 4e-6));
  });

  it("from the gate alone, from the current alone, and with an inverted gate", () => {
    const on = conductions();
    const truth = on.map(([, off]) => off);
    const trace = runBench(bench, on, 31_000, 4e-6, 12);
    const gate = check(captureOf([scoped("gate", "V", trace.gate, random)], 4e-6), truth);
    expect(gate.reading.pulses[0].ring).toBeNull();
    const current = check(captureOf([scoped("coil-current", "A", trace.current_A, random)], 4e-6), truth);
    expect(current.reading.pulses[0].ring!.modes[0].amplitude).toBeDefined();
    const inverted = scoped(
      "gate",
      "V",
      trace.gate.map((y) => 10 - y),
      random,
    );
    check(captureOf([inverted, scoped("switch-node", "V", trace.node_V, random)], 4e-6), truth);
  });
});

describe("no switch-off at all", () => {
  const signals: [string, (i: number) => number][] = [
    ["a sine", (i) => 100 * Math.sin(i * 0.02)],
    ["a square wave", (i) => 100 * Math.sign(Math.sin(i * 0.01))],
    ["hum", (i) => 10 * Math.sin(i * 2 * Math.PI * 50e-6)],
    ["noise", () => 10 * random.normal()],
    ["a step", (i) => (i < 3000 ? 0 : 100)],
    ["a triangle", (i) => Math.abs((i % 1000) - 500)],
    ["a tone burst", (i) => (i > 2000 && i < 4000 ? 100 * Math.sin(i * 0.05) : 0)],
    ["a noise burst", (i) => (i > 2000 && i < 2600 ? 100 * random.normal() : 0)],
    ["a growing oscillation", (i) => Math.exp(i * 5e-4) * Math.sin(i * 0.05)],
    ["a chirp", (i) => 100 * Math.sin(i * i * 1e-5)],
    ["a level", () => 5],
    ["a sawtooth", (i) => (i % 1000) / 10],
    ["a single rectangular pulse", (i) => (i > 3000 && i < 3100 ? 100 : 0)],
    ["an exponential", (i) => (i < 2000 ? 0 : 100 * Math.exp((2000 - i) / 500))],
  ];
  it.each(signals)("%s gives no pulse, or a refused ring", (_, f) => {
    const signal = Float64Array.from({ length: 8000 }, (__, i) => f(i));
    for (const [role, unit] of [
      ["switch-node", "V"],
      ["coil-current", "A"],
    ] as const) {
      const { reading } = readCapture(captureOf([scoped(role, unit, signal, random)], 1e-6), setup);
      for (const pulse of reading.pulses) expect(pulse.ring?.quality).toBe("refused");
      for (const pulse of reading.pulses) expect(pulse.inductance_H).toBeNull();
    }
  });
});
