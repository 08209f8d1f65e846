/** All evidence of a capture's switch-offs brought together: gate, else voltage, else current. */
import type { Capture } from "../capture.ts";
import type { ChannelMap } from "../evidence.ts";
import { currentConductions } from "./current.ts";
import type { SwitchOff } from "./event-format.ts";
import { gateConductions, type Conduction } from "./gate.ts";
import { isVoltage } from "./channels.ts";
import { voltageSwitchOffs } from "./voltage.ts";

export interface Events {
  offs: SwitchOff[];
  /** One ring period in samples, rough; 0 where unknown. */
  period: number;
  source: "gate" | "voltage" | "current";
}

export function findSwitchOffs(capture: Capture, map: ChannelMap): Events {
  const channel = map.ring === null ? null : capture.channels[map.ring];
  const seen =
    channel && isVoltage(map, map.ring)
      ? voltageSwitchOffs(channel.samples, channel.lsb)
      : { offs: [], period: 0 };
  if (map.gate !== null) {
    const conductions = bestGate(capture.channels[map.gate].samples, seen.offs, seen.period);
    if (conductions.some(({ off }) => off !== null))
      return {
        offs: fromConductions(capture, conductions, seen.offs, seen.period),
        period: seen.period,
        source: "gate",
      };
  }
  if (map.current !== null) {
    const current = capture.channels[map.current];
    const pulses = currentConductions(current.samples, current.lsb);
    if (seen.offs.length === 0 && pulses.length > 0) {
      const offs = fromConductions(capture, pulses, [], seen.period);
      offs.forEach(
        (off, k) => (off.polarity = map.ring === map.current ? (-pulses[k].polarity as 1 | -1) : 1),
      );
      return { offs, period: seen.period, source: "current" };
    }
    for (const off of seen.offs) off.on ??= nearestOn(pulses, off.at!, seen.period);
  }
  return { ...seen, source: "voltage" };
}

function nearestOn(conductions: Conduction[], at: number, reach: number): number | null {
  const near = conductions.find(({ off }) => off !== null && Math.abs(off - at) < reach);
  return near?.on ?? null;
}

/** A gate may be inverted: whichever polarity ends where the kicks begin; high conducts if neither tells. */
function bestGate(samples: Float64Array, seen: SwitchOff[], period: number): Conduction[] {
  const straight = gateConductions(samples, true);
  if (seen.length === 0) return straight;
  const inverted = gateConductions(samples, false);
  const hits = (conductions: Conduction[]) =>
    conductions.filter(({ off }) => off !== null && kickAfter(seen, off, period)).length;
  return hits(inverted) > hits(straight) ? inverted : straight;
}

/** The switch opens after its gate falls, by a delay that is short against the ring. */
const kickAfter = (seen: SwitchOff[], off: number, period: number) =>
  seen.find(({ at }) => at !== null && at > off - 0.25 * period - 2 && at < off + 2 * period);

function fromConductions(
  capture: Capture,
  conductions: Conduction[],
  seen: SwitchOff[],
  period: number,
): SwitchOff[] {
  const offs: SwitchOff[] = [];
  conductions.forEach(({ on, off }, k) => {
    if (off === null) return;
    const kick = kickAfter(seen, off, period);
    const at = kick?.at ?? off;
    const next = conductions[k + 1]?.on ?? capture.timebase.samples;
    offs.push({
      at,
      u: kick?.u ?? 0.29,
      on,
      freeFrom: Math.ceil(at),
      freeTo: Math.floor(next),
      polarity: kick?.polarity ?? 1,
      levelOn: kick?.levelOn ?? null,
      scatter: kick?.scatter ?? null,
    });
  });
  return offs;
}
