/**
 * A fast integrator of the same bench for large sets: coil, capacitor, coupled secondary and gap from
 * switch-off on, with the departures from linearity that must not be taken for a spark. Runge–Kutta of
 * fourth order; checked against the circuit simulator in test/reference/coupled-ring.test.ts.
 */

export interface RingCircuit {
  supply_V: number;
  inductance_H: number;
  winding_ohm: number;
  parallelLoss_ohm: number;
  capacitance_F: number;
  secondary: { inductance_H: number; winding_ohm: number; capacitance_F: number; coupling: number };
  /** Incremental inductance falls as 1/(1 + (i/saturation_A)²). */
  saturation_A?: number;
  /** Loss conductance grows by this share per volt of swing: a hysteretic core. */
  lossGrowth_per_V?: number;
  /** Node held at this level by a clamp. */
  clamp_V?: number;
  /** The contact closes again in these stretches [from, to) of seconds after switch-off. */
  bounces_s?: [from: number, to: number][];
  /** No blocking diode: the node cannot go below about −0.7 V. */
  bodyDiode?: boolean;
}

export interface Gap {
  breakdown_V: number;
  /** No breakdown before this time after switch-off. */
  lag_s: number;
  /** An arc holds its burn voltage; a glow is a resistance that discharges the secondary slowly. */
  kind: { burn_V: number } | { glow_ohm: number };
  /** Arc: current below which it goes out. Glow: voltage below which it does. */
  hold: number;
}

export interface RingWaves {
  node_V: Float64Array;
  secondary_V: Float64Array;
  gapCurrent_A: Float64Array;
  coilCurrent_A: Float64Array;
  strikes: { onset_s: number; extinction_s: number | null; breakdown_V: number }[];
}

/** State: node voltage, coil current, secondary voltage, secondary current. */
type State = [number, number, number, number];

/** `gap` null: it holds. Sample i is at i·step_s after switch-off; the state at 0 is given. */
export function integrateRing(
  circuit: RingCircuit,
  start: { current_A: number; node_V: number; secondary_V?: number; secondaryCurrent_A?: number },
  gap: Gap | null,
  grid: { samples: number; step_s: number },
): RingWaves {
  const { samples, step_s } = grid;
  const waves: RingWaves = {
    node_V: new Float64Array(samples),
    secondary_V: new Float64Array(samples),
    gapCurrent_A: new Float64Array(samples),
    coilCurrent_A: new Float64Array(samples),
    strikes: [],
  };
  const substeps = Math.max(4, Math.ceil(step_s / (fastestPeriod_s(circuit) / 40)));
  const h = step_s / substeps;
  let state: State = [start.node_V, start.current_A, start.secondary_V ?? 0, start.secondaryCurrent_A ?? 0];
  let arc = 0;
  for (let i = 0; i < samples; i++) {
    waves.node_V[i] = state[0];
    waves.coilCurrent_A[i] = state[1];
    waves.secondary_V[i] = state[2];
    waves.gapCurrent_A[i] = arc === 0 || !gap ? 0 : gapCurrent(gap, state);
    for (let k = 0; k < substeps; k++) {
      const time_s = i * step_s + (k + 1) * h;
      const before = state;
      state = step(circuit, gap, before, arc, h);
      // The gap gives way where the voltage gets there, not at the step's end.
      const share = gap && arc === 0 ? givesWayAt(gap, before, state, (gap.lag_s - time_s) / h + 1) : null;
      if (gap && share !== null) {
        state = step(circuit, gap, before, 0, share * h);
        arc = switchGap(gap, state, 0, time_s - (1 - share) * h, waves);
        state = step(circuit, gap, state, arc, (1 - share) * h);
      }
      if (circuit.bounces_s?.some(([from, to]) => time_s >= from && time_s < to)) state[0] = start.node_V;
      if (gap) arc = switchGap(gap, state, arc, time_s, waves);
    }
  }
  return waves;
}

/**
 * Share of a step after which the gap gives way: when the voltage reaches the breakdown's, or the lag is over
 * (`lag`, in steps from this one's start) with the voltage already there; null where neither falls in this step.
 */
function givesWayAt(gap: Gap, before: State, after: State, lag: number): number | null {
  const [from, to] = [Math.abs(before[2]), Math.abs(after[2])];
  if (before[2] * after[2] <= 0 || lag > 1) return null;
  // A hair beyond, so that the gap sees it reached.
  const level = gap.breakdown_V * (1 + 1e-9);
  const reached = from >= level ? 0 : to > level ? (level - from) / (to - from) : 2;
  const share = Math.max(reached, lag + 1e-9);
  return share > 0 && share <= 1 && from + share * (to - from) >= level ? share : null;
}

const gapCurrent = (gap: Gap, state: State) =>
  "burn_V" in gap.kind ? state[3] : state[2] / gap.kind.glow_ohm;

function switchGap(gap: Gap, state: State, arc: number, time_s: number, waves: RingWaves): number {
  const isArc = "burn_V" in gap.kind;
  if (arc === 0) {
    if (time_s < gap.lag_s || Math.abs(state[2]) < gap.breakdown_V) return 0;
    const sign = Math.sign(state[2]);
    waves.strikes.push({ onset_s: time_s, extinction_s: null, breakdown_V: state[2] });
    if ("burn_V" in gap.kind) state[2] = sign * gap.kind.burn_V;
    return sign;
  }
  const out = isArc ? state[3] * arc < gap.hold : Math.abs(state[2]) < gap.hold;
  if (!out) return arc;
  waves.strikes[waves.strikes.length - 1].extinction_s = time_s;
  return 0;
}

function step(circuit: RingCircuit, gap: Gap | null, s: State, arc: number, h: number): State {
  const at = (slope: State, share: number): State => [
    s[0] + share * slope[0],
    s[1] + share * slope[1],
    s[2] + share * slope[2],
    s[3] + share * slope[3],
  ];
  const k1 = slopes(circuit, gap, s, arc);
  const k2 = slopes(circuit, gap, at(k1, h / 2), arc);
  const k3 = slopes(circuit, gap, at(k2, h / 2), arc);
  const k4 = slopes(circuit, gap, at(k3, h), arc);
  const next = s.map((value, i) => value + (h / 6) * (k1[i] + 2 * k2[i] + 2 * k3[i] + k4[i])) as State;
  if (circuit.clamp_V !== undefined) next[0] = Math.min(next[0], circuit.clamp_V);
  if (circuit.bodyDiode) next[0] = Math.max(next[0], -0.7);
  return next;
}

function slopes(
  circuit: RingCircuit,
  gap: Gap | null,
  [node, coil, high, second]: State,
  arc: number,
): State {
  const { inductance_H, winding_ohm, parallelLoss_ohm, capacitance_F, supply_V } = circuit;
  const { inductance_H: L2, winding_ohm: R2, capacitance_F: C2, coupling } = circuit.secondary;
  const magnetising = coil + second * Math.sqrt(L2 / inductance_H);
  const softness = circuit.saturation_A ? 1 / (1 + (magnetising / circuit.saturation_A) ** 2) : 1;
  const L1 = inductance_H * softness;
  const M = coupling * softness * Math.sqrt(inductance_H * L2);
  const soft2 = L2 * softness;
  const drive1 = supply_V - winding_ohm * coil - node;
  const drive2 = -high - R2 * second;
  const determinant = L1 * soft2 - M * M;
  const swing = Math.abs(node - supply_V);
  const loss = ((node - supply_V) / parallelLoss_ohm) * (1 + (circuit.lossGrowth_per_V ?? 0) * swing);
  const leak = gap && arc !== 0 && "glow_ohm" in gap.kind ? high / gap.kind.glow_ohm : 0;
  const held = gap && arc !== 0 && "burn_V" in gap.kind;
  return [
    (coil - loss) / capacitance_F,
    (soft2 * drive1 - M * drive2) / determinant,
    held ? 0 : (second - leak) / C2,
    (L1 * drive2 - M * drive1) / determinant,
  ];
}

/** Natural frequencies squared: (1−k²)ω⁴ − (ω1² + ω2²)ω² + ω1²ω2² = 0 (methods, section 1). */
export function naturalFrequencies_Hz(circuit: RingCircuit): [low: number, high: number] {
  const { inductance_H: L2, capacitance_F: C2, coupling } = circuit.secondary;
  const a = 1 / (circuit.inductance_H * circuit.capacitance_F);
  const b = 1 / (L2 * C2);
  const tight = 1 - coupling * coupling;
  const root = Math.sqrt((a + b) ** 2 - 4 * tight * a * b);
  return [a + b - root, a + b + root].map((twice) => Math.sqrt(twice / (2 * tight)) / (2 * Math.PI)) as [
    number,
    number,
  ];
}

function fastestPeriod_s(circuit: RingCircuit): number {
  const tight = 1 - circuit.secondary.coupling ** 2;
  // While the arc burns the primary rings with its leakage inductance alone.
  const leakage = 1 / (2 * Math.PI * Math.sqrt(circuit.inductance_H * tight * circuit.capacitance_F));
  return 1 / Math.max(leakage, naturalFrequencies_Hz(circuit)[1]);
}
