/**
 * A coil, its capacitor and a switch, integrated in small steps: what a bare bench does, with the ways
 * real ones misbehave (body diode, clamp, contact bounce, a second mode, saturation). Independent of the
 * analysis: it knows only i and v.
 */
export interface CoilBench {
  inductance_H: number;
  resistance_ohm: number;
  capacitance_F: number;
  supply_V: number;
  on_V?: number;
  /** Node held at −0.7 V through this resistance when it swings below (body diode). */
  diode_ohm?: number;
  /** Node held at this voltage through 1 Ω when it swings above. */
  clamp_V?: number;
  /** Inductance falls with current: L(i) = L0/(1 + (i/saturation)^4). */
  saturation_A?: number;
  /** Capacitance of the switch that falls with voltage: added C0/√(1 + |v|/1 V). */
  junction_F?: number;
}

export interface BenchTrace {
  node_V: Float64Array;
  current_A: Float64Array;
  gate: Float64Array;
}

/** `conductions`: [on, off] in seconds. Semi-implicit steps of step_s/fine, energy kept to second order. */
export function runBench(
  bench: CoilBench,
  conductions: [number, number][],
  samples: number,
  step_s: number,
  fine = 40,
): BenchTrace {
  const { inductance_H: L, resistance_ohm: R, capacitance_F: C, supply_V } = bench;
  const onVoltage = bench.on_V ?? 0.2;
  const h = step_s / fine;
  const node_V = new Float64Array(samples);
  const current_A = new Float64Array(samples);
  const gate = new Float64Array(samples);
  let i = 0;
  let v = supply_V;
  let k = 0;
  for (let n = 0; n < samples; n++) {
    for (let f = 0; f < fine; f++) {
      const t = n * step_s + f * h;
      while (k < conductions.length && t >= conductions[k][1]) k++;
      const on = k < conductions.length && t >= conductions[k][0];
      if (f === 0) {
        node_V[n] = on ? onVoltage : v;
        current_A[n] = i;
        gate[n] = on ? 10 : 0;
      }
      const sat = bench.saturation_A;
      const inductance = sat ? L / (1 + (i / sat) ** 4) : L;
      if (on) {
        v = onVoltage;
        i += (h / inductance) * (supply_V - v - R * i);
        continue;
      }
      // Leapfrog: half a step of the current, a step of the voltage, half a step of the current.
      i += (h / 2 / inductance) * (supply_V - v - R * i);
      let into = i;
      const capacitance = C + (bench.junction_F ?? 0) / Math.sqrt(1 + Math.abs(v));
      let conductance = 0;
      if (bench.diode_ohm && v < -0.7) {
        conductance = 1 / bench.diode_ohm;
        into += -0.7 * conductance;
      }
      if (bench.clamp_V && v > bench.clamp_V) {
        conductance = 1;
        into += bench.clamp_V * conductance;
      }
      v = (v + (h / capacitance) * into) / (1 + (h / capacitance) * conductance);
      i += (h / 2 / inductance) * (supply_V - v - R * i);
    }
  }
  return { node_V, current_A, gate };
}
