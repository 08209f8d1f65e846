/** What the event stage hands on: instants as fractional sample numbers. */
export interface SwitchOff {
  /** Instant conduction ends; null when it precedes the record. */
  at: number | null;
  /** Standard uncertainty in samples. */
  u: number | null;
  /** Instant conduction began; null when it precedes the record or cannot be told. */
  on: number | null;
  /** Free interval in whole samples, from switch-off to the next switching edge or the record's end. */
  freeFrom: number;
  freeTo: number;
  /** Direction of the kick on the trace it was found on. */
  polarity: 1 | -1;
  /** Level while the switch conducted, just before switch-off. */
  levelOn: number | null;
  /** Scatter of the trace during conduction about a straight line; null when not seen. */
  scatter: number | null;
  /** Whether gate or current shows it as well; null where there is no such channel. */
  witnessed: boolean | null;
}
