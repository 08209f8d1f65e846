/** What is known of a coil from several captures, `ringbook.coil/1`: SI units, null with the reason in the notes. */
import type { Note } from "../capture.ts";
import type { Figure, Measured, RampReading } from "../reading-format.ts";

export interface AddedCapacitorPoint {
  /** Index of the capture among those given. */
  capture: number;
  capacitance_F: number;
  /** 1/ω0². */
  inverseSquare_s2: Measured;
  /** Measured less the line, s². */
  residual: number;
  /** Farther from the line than its uncertainty allows. */
  flagged: boolean;
}

export interface AddedCapacitorLine {
  points: AddedCapacitorPoint[];
  inductance_H: Figure;
  selfCapacitance_F: Figure;
  seriesResistance_ohm: Figure;
  parallelResistance_ohm: Figure;
  reason: string | null;
}

export interface DwellTable {
  current_A: number;
  supplies_V: number[];
  temperatures_C: number[];
  /** A row for each supply, a column for each temperature; null: the current is never reached. */
  time_s: Figure[][];
}

export interface Stress {
  part: string;
  quantity: string;
  unit: string;
  value: Figure;
  rating: number | null;
  share: number | null;
  reason: string | null;
}

export interface DriveStart {
  inductance_H: Figure;
  capacitance_F: Figure;
  current_A: Figure;
  supply_V: number | null;
  rating_V: number | null;
  /** Smallest capacitor that keeps the lossless peak at the rating. */
  smallest_F: Figure;
  reason: string | null;
}

export interface CoilReading {
  format: "ringbook.coil/1";
  coil: string | null;
  notes: Note[];
  addedCapacitor: AddedCapacitorLine | null;
  ramp: RampReading | null;
  saturation: { x: number[]; y: number[]; u: (number | null)[] } | null;
  dwell: DwellTable | null;
  stress: Stress[];
  drive: DriveStart;
}
