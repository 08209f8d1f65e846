/** What the user should know about the figures of a capture: assumptions made, things missing, odd agreements. */
import type { Note } from "./capture.ts";
import { hasSecondary } from "./coil/secondary.ts";
import type { ChannelMap } from "./evidence.ts";
import type { PulseReading } from "./reading-format.ts";
import type { Setup } from "./setup/schema.ts";

const stated = (value: unknown) => value !== undefined && value !== null;

export function notesOn(map: ChannelMap, setup: Setup, pulses: PulseReading[]): Note[] {
  const notes: Note[] = [];
  const add = (code: string, text: string, more: Partial<Note> = {}) => notes.push({ code, text, ...more });
  if (pulses.length === 0) {
    add("no-switch-off", "No switch-off was found: nothing in this record goes from conduction to a ring.");
    return notes;
  }
  const rings = pulses.some((pulse) => pulse.ring !== null && pulse.ring.modes.length > 0);
  if (rings) capacitanceNotes(map, setup, add);
  if (!stated(setup.supply_V) && map.supply === null && map.current !== null)
    add("supply-unknown", "Without the supply voltage the ramp gives no inductance and no resistance.");
  if (map.current === null)
    add("no-current", "No current channel: no ramp, and the energy in the coil is not known.");
  for (const pulse of pulses) agreement(pulse, add);
  return notes;
}

type Add = (code: string, text: string, more?: Partial<Note>) => void;

function capacitanceNotes(map: ChannelMap, setup: Setup, add: Add): void {
  if (!stated(setup.capacitor_F) && !stated(setup.knownInductance_H))
    return add(
      "capacitor-unknown",
      "Neither a capacitor nor an inductance is stated: the ring gives frequency and Q only.",
    );
  if (stated(setup.capacitor_F) && !stated(setup.strayCapacitance_F))
    add(
      "stray-capacitance-unstated",
      "No stray capacitance is stated: it counts as 0, so L comes out too high by its share.",
    );
  if ((hasSecondary(setup) || map.secondary !== null) && !stated(setup.secondaryCapacitance_F))
    add(
      "secondary-capacitance-unknown",
      "A secondary is coupled and its capacitance is not stated: L is the effective inductance, with the reflected capacitance of the secondary inside it.",
    );
  else if (stated(setup.secondaryCapacitance_F) && !stated(setup.coupling) && stated(setup.turnsRatio))
    add("coupling-unstated", "No coupling is stated: it counts as 1 (L is 0.5 % off at 0.99, 5 % at 0.9).");
}

/** Ramp and ring measure the same inductance: within three standard uncertainties, or within 5 %. */
function agreement(pulse: PulseReading, add: Add): void {
  const ring = pulse.inductance_H;
  const ramp = pulse.ramp?.inductance_H;
  if (!ring || !ramp) return;
  const apart = ramp.value - ring.value;
  if (Math.abs(apart) < Math.max(3 * Math.hypot(ring.u, ramp.u), 0.05 * ring.value)) return;
  const percent = ((100 * apart) / ring.value).toFixed(0);
  add(
    "ramp-ring-disagree",
    `The ramp's inductance is ${percent} % off the ring's: check the capacitor, the supply, a coupled secondary or saturation.`,
    { pulse: pulse.index },
  );
}
