/** Invented captures for the window's bench: damped rings by formula, as CSV text in parts. */
import { seeded } from "../reference/random.ts";

const partOfRows = 100_000;

/** One record of `samples` rows with 300 switch-offs, 1 µs a sample. */
export const longRecord = (samples: number) => rows(samples, Math.floor(samples / 300), 1e-6, 4000);

/** A train of `pulses` short rings, 4 µs a sample. */
export const manyPulses = (pulses: number) => rows(pulses * 700, 700, 4e-6, 4000);

function* rows(samples: number, period: number, step_s: number, frequency_Hz: number): Generator<string> {
  const { uniform } = seeded(7);
  yield "Time [s],Switch node [V]\n";
  let part = "";
  const conducting = Math.min(Math.floor(period * 0.25), Math.round(2e-3 / step_s));
  for (let at = 0; at < samples; at++) {
    const phase = at % period;
    const since_s = (phase - conducting) * step_s;
    const ring = 150 * Math.exp(-900 * since_s) * Math.sin(2 * Math.PI * frequency_Hz * since_s);
    const value = (phase < conducting ? 1 : 12 + ring) + (uniform() - 0.5) * 2;
    part += `${(at * step_s).toFixed(6)},${value.toFixed(1)}\n`;
    if (at % partOfRows === partOfRows - 1) {
      yield part;
      part = "";
    }
  }
  yield part;
}
