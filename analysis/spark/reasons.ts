/** Why a verdict: plain words with their figures, each with its place on the trace. */
import { formatNumber } from "../format/figure.ts";
import type { Judged } from "./judge.ts";
import type { SparkTimes } from "./onset.ts";
import type { SparkWindow } from "./window.ts";

export interface Reason {
  text: string;
  place_s: number | null;
}

const percent = (share: number) => `${Math.round(100 * share)} %`;

export function reasonsOf(
  { traits, likelihood, reference, burn }: Judged,
  window: SparkWindow,
  times: SparkTimes,
): Reason[] {
  const at = (block: number) => window.zero_s + window.first_s + block * window.step_s;
  const after = times.onset_s === null ? null : formatNumber(times.onset_s - window.switchOff_s, "s", 3);
  const strength = Math.round(traits.misfit);
  const reasons: Reason[] = [];
  const say = (text: string, place_s: number | null) => reasons.push({ text, place_s });
  const spark = likelihood.probability > 0.5;
  switch (likelihood.because) {
    case "one-ring":
      say(
        `one ring explains the trace from switch-off to its end (what is left: strength ${strength}, noise stays below 12)`,
        at(0),
      );
      break;
    case "spent":
      say(
        "a disturbance where the ring had already sunk into the noise: too little is left for a spark",
        at(traits.a),
      );
      break;
    case "ring-goes-on":
      say(
        `a disturbance of strength ${Math.round(Math.sqrt(Math.max(0, traits.split.gain)))}, but the same ring goes on after it`,
        at(traits.a),
      );
      break;
    case "loss":
    case "course":
      if (after) say(`the ring leaves its course ${after} after switch-off`, times.onset_s);
      say(`one ring does not explain the trace: strength ${strength}, noise stays below 12`, at(traits.a));
      break;
    case "turned":
      say(
        "the ring after does not begin where a ring free from switch-off would: its phase is turned",
        at(traits.b),
      );
      say(`one ring does not explain the trace: strength ${strength}, noise stays below 12`, at(traits.a));
      break;
    case "missing":
      say("the ring is weaker than the quiet ones from its start", at(traits.kickBlock));
      break;
    case "kick":
      say(
        `its kick is ${percent(1 - (likelihood.loss ?? 0))} of what pulses of the same conduction reach`,
        at(traits.kickBlock),
      );
      say(`one ring does not explain the trace: strength ${strength}, noise stays below 12`, at(traits.a));
      return reasons;
    case "volt-seconds":
      say(
        `the first half-wave holds ${percent(Math.max(0, 1 - (likelihood.loss ?? 0)))} of a quiet one's volt-seconds; a ring that a diode cuts shows no more`,
        at(0),
      );
      if (spark && after) say(`the ring leaves its course ${after} after switch-off`, times.onset_s);
      return reasons;
    case "burn-line":
      say(
        `the kick breaks down to a plateau ${formatNumber(burn!.height, "V", 2)} above where the ring settles and stays on it for ${formatNumber(burn!.length_s, "s", 3)}: the arc's own voltage, through the ratio`,
        at(burn!.from),
      );
      return reasons;
    case "like-quiet":
      say(
        `laid on the run's quiet pulses it differs by no more than they do (${percent(Math.abs(likelihood.loss ?? 0))} of size apart)`,
        at(0),
      );
      return reasons;
    case "unlike-quiet":
      if (after)
        say(`the trace leaves that of the run's quiet pulses ${after} after switch-off`, times.onset_s);
      say(
        `from its third period on ${percent(Math.max(0, 1 - (likelihood.loss ?? 0)))} of the quiet pulses' course is left`,
        at(2 * window.period),
      );
      return reasons;
    case "doubt":
      say(`a disturbance of strength ${strength} that could be a spark or something else`, at(traits.a));
      break;
  }
  if (likelihood.loss !== null && spark && traits.ringAfter && likelihood.loss > 0.02) {
    const against = reference ? `what the run's ${reference.from} have` : "what it would have kept";
    say(
      `after it ${percent(Math.max(0, 1 - likelihood.loss))} of the ring's amplitude is left, against ${against}`,
      at(traits.b),
    );
  }
  if (spark && likelihood.loss !== null && likelihood.loss <= 0.02 && likelihood.away !== null)
    say(
      `after it the ring is shifted by ${percent(likelihood.away)} against the run's ${reference!.from}`,
      at(traits.b),
    );
  if (spark && !traits.ringAfter) say("no free ring is seen after it", at(traits.b));
  if (!spark && reference && likelihood.away !== null)
    say(
      `its ring agrees with the run's ${reference.from} within ${percent(Math.max(0.01, likelihood.away))}`,
      at(traits.b),
    );
  return reasons;
}
