/** The pulse looked at last: back on its run it is the marked one. */
export interface SeenPulse {
  run: number;
  capture: number;
  pulse: number;
}

let seen: SeenPulse | null = null;

export const rememberPulse = (pulse: SeenPulse) => {
  seen = pulse;
};

export const lastPulseOf = (run: number): SeenPulse | null => (seen?.run === run ? seen : null);
