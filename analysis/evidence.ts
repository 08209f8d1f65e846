/** What the spark stage and the run need of one capture beside its reading. */
import type { Channel, TimeBase } from "./capture.ts";
import type { CaptureReading, Figure } from "./reading-format.ts";
import type { RingFit } from "./ring/fit-format.ts";

/** Indices into the capture's channels, null where the role is not on screen. */
export interface ChannelMap {
  /** Where the ring is fitted: switch node, else coil voltage, current, secondary. */
  ring: number | null;
  switchNode: number | null;
  coilVoltage: number | null;
  current: number | null;
  gate: number | null;
  supply: number | null;
  secondary: number | null;
  secondaryCurrent: number | null;
}

/** Sample numbers are fractional positions in the capture's arrays (0 = first sample). */
export interface PulseEvidence {
  index: number;
  /** Instant conduction ends; null when it precedes the record. */
  switchOff: number | null;
  /** Standard uncertainty in samples; null with it. */
  switchOffUncertainty: number | null;
  /** Instant conduction began; null when it precedes the record or cannot be told. */
  switchOn: number | null;
  /** Free interval in whole samples [freeFrom, freeTo): from switch-off to the next switching edge or the record's end. */
  freeFrom: number;
  freeTo: number;
  /** +1 when the kick goes up on the ring channel, −1 when it goes down. */
  polarity: 1 | -1;
  /** Level of the ring channel while the switch conducted, just before switch-off; null when not seen. */
  levelOn: number | null;
  /** Largest excursion of the ring channel in kick direction after switch-off; clipped: a lower bound. */
  kick: { index: number; value: number; clipped: boolean } | null;
  /** One period of the ring in samples, rough; null when there is no oscillation. */
  period: number | null;
  /** The window's last sample is where one ring stopped explaining the data (arc, clamp, burst), not floor or edge. */
  courseChanges: boolean;
  fit: RingFit | null;
  /** Current at switch-off, from the ramp; else null. */
  current_A: Figure;
  /** Coil's inductance and total capacitance as used for energies; null where unknown. */
  inductance_H: Figure;
  capacitance_F: Figure;
}

export interface CaptureEvidence {
  /** `spark` null in every pulse until the run is judged. */
  reading: CaptureReading;
  pulses: PulseEvidence[];
  timebase: TimeBase;
  /** The capture's own channels, samples by reference. */
  channels: Channel[];
  map: ChannelMap;
}
