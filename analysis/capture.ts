/** What ingest hands to every later stage: one record on one time base, plain typed values. */

export const channelRoles = [
  "switch-node",
  "coil-voltage",
  "coil-current",
  "gate",
  "supply",
  "secondary",
  "secondary-current",
  "other",
] as const;
export type ChannelRole = (typeof channelRoles)[number];

export interface Channel {
  /** Counts the file's value channels from 0 (time columns are none). */
  position: number;
  name: string;
  /** Unit after scaling, without SI prefix ("V", "A"); "" where the file says none. */
  unit: string;
  /** Unit as the file spells it, prefix included; null where the file says none. */
  fileUnit: string | null;
  role: ChannelRole;
  roleGuessed: boolean;
  /** value = file value (prefix resolved) · scale + offset. */
  scale: number;
  offset: number;
  /** In `unit`, one a time step. NaN where the file has no number. */
  samples: Float64Array;
  /** Resolution in `unit`, null when it cannot be told. */
  lsb: number | null;
  /**
   * Stretches that carry no measurement (missing, infinite, pinned at the screen's edge), as pairs
   * [from, to) of sample numbers, sorted and apart. No fit uses them.
   */
  unusable: Int32Array;
  /** Samples in those stretches that are overrange (not merely blank). */
  overrange: number;
}

export interface TimeBase {
  /** Time of the first sample on the file's own time axis; may be negative. */
  start_s: number;
  /** null: the file does not tell and the question is in the notes. */
  step_s: number | null;
  /** Standard uncertainty of the step (rounded time columns), 0 where it is exact. */
  stepUncertainty_s: number;
  samples: number;
}

/** Something the user should know, or be asked. The code is stable, the text is for people. */
export interface Note {
  code: string;
  text: string;
  /** Pulse index, where the note is about one pulse. */
  pulse?: number;
  /** Channel name, where the note is about one channel. */
  channel?: string;
  question?: string;
  choices?: string[];
  /** Setup key that answers the question, e.g. "sampleInterval_s". */
  answers?: string;
}

/** How the scope took the record, as far as the data show it (see the note of the same code). */
export type AcquisitionCode =
  | "ac-coupled"
  | "averaged"
  | "peak-detect"
  | "undersampled"
  | "starts-in-ring"
  | "roll-mode";

export interface Capture {
  /** Number of this record in its file, and of how many. */
  record: { index: number; count: number; time: string | null };
  channels: Channel[];
  timebase: TimeBase;
  acquisition: AcquisitionCode[];
  notes: Note[];
}
