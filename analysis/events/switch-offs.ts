/** All evidence of a capture's switch-offs brought together: gate, else voltage, else current. */
import type { Capture, Channel } from "../capture.ts";
import type { ChannelMap } from "../evidence.ts";
import { currentConductions } from "./current.ts";
import type { SwitchOff } from "./event-format.ts";
import { gateConductions, type Conduction } from "./gate.ts";
import { linePeriod } from "./line-period.ts";
import { isVoltage } from "./channels.ts";
import { meanAndDeviation } from "../numeric/robust.ts";
import { voltageSwitchOffs } from "./voltage.ts";

export interface Events {
  offs: SwitchOff[];
  /** One ring period in samples, rough; 0 where unknown. */
  period: number;
  /** Noise per sample of the ring channel where it was a voltage. */
  noise: number | null;
  source: "gate" | "voltage" | "current";
}

export function findSwitchOffs(capture: Capture, map: ChannelMap): Events {
  const channel = map.ring === null ? null : capture.channels[map.ring];
  const seen =
    channel && isVoltage(map, map.ring) ? voltageSwitchOffs(channel) : { offs: [], period: 0, noise: null };
  const { period, noise } = seen;
  if (map.gate !== null) {
    const conductions = bestGate(capture.channels[map.gate].samples, seen.offs, period);
    if (conductions.some(({ off }) => off !== null))
      return {
        offs: fromConductions(capture, map, conductions, seen.offs, period),
        period,
        noise,
        source: "gate",
      };
  }
  if (map.current !== null) {
    const current = capture.channels[map.current];
    const pulses = currentConductions(current);
    if (seen.offs.length === 0 && pulses.length > 0) {
      const offs = fromConductions(capture, map, pulses, [], period);
      offs.forEach(
        (off, k) => (off.polarity = map.ring === map.current ? (-pulses[k].polarity as 1 | -1) : 1),
      );
      return { offs, period: period || periodAfter(current, offs), noise, source: "current" };
    }
    if (pulses.length > 0 && map.ring !== map.current)
      return {
        offs: withCurrent(capture, seen.offs, pulses, period),
        period,
        noise,
        source: "voltage",
      };
  }
  return { ...seen, source: "voltage" };
}

/** The ring's period on a current alone, from the first free interval. */
function periodAfter({ samples }: Channel, [first]: SwitchOff[]): number {
  const width = Math.max(1, Math.floor((first.freeTo - first.freeFrom) / 4096));
  return linePeriod(samples, first.freeFrom, first.freeTo, width, 1.5, 0) ?? 0;
}

/** Voltage and current together: the current confirms, and adds what the voltage does not show. */
function withCurrent(capture: Capture, seen: SwitchOff[], pulses: Conduction[], period: number): SwitchOff[] {
  const reach = 0.5 * period;
  const matched = seen.filter(
    ({ at }) => at === null || pulses.some(({ off }) => Math.abs(off! - at) < reach),
  );
  // Currents that do not belong to these switch-offs (another branch, a noisy clamp) have no say.
  if (2 * matched.length < seen.length) return seen;
  const offs = seen.map((off) => {
    const pulse = off.at === null ? null : pulses.find((other) => Math.abs(other.off! - off.at!) < reach);
    return {
      ...off,
      on: off.at === null ? off.on : startOf(off.on, pulse?.on ?? null, off.at),
      witnessed: off.at === null ? null : pulse !== undefined,
    };
  });
  const alone = pulses.filter(
    ({ off }) => !seen.some(({ at }) => at !== null && Math.abs(at - off!) < reach),
  );
  const known = offs.find((off) => off.at !== null);
  for (const { on, off } of alone)
    offs.push({
      at: off,
      u: 0.5,
      on,
      freeFrom: Math.ceil(off!),
      freeTo: capture.timebase.samples,
      polarity: known?.polarity ?? 1,
      levelOn: known?.levelOn ?? null,
      scatter: known?.scatter ?? null,
      witnessed: true,
    });
  offs.sort((a, b) => (a.at ?? -1) - (b.at ?? -1));
  offs.forEach((off, k) => {
    const next = offs[k + 1];
    if (next) off.freeTo = Math.min(off.freeTo, Math.floor(next.on ?? next.at!));
  });
  return offs;
}

/** Share of the dwell by which voltage and current may place its start apart. */
const STARTS_AGREE = 0.1;

/** The voltage's edge is the sharper one; where noise interrupts its conduction the current tells better. */
function startOf(voltage: number | null, current: number | null, off: number): number | null {
  if (voltage === null || current === null) return voltage ?? current;
  return Math.abs(voltage - current) > STARTS_AGREE * (off - current) ? current : voltage;
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
  map: ChannelMap,
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
      levelOn: kick?.levelOn ?? quietLevel(capture, map, on, off)?.mean ?? null,
      scatter: kick?.scatter ?? quietLevel(capture, map, on, off)?.deviation ?? null,
      witnessed: true,
    });
  });
  return offs;
}

/** Level and scatter of a voltage over the later half of a conduction that gate or current tell of. */
function quietLevel({ channels }: Capture, map: ChannelMap, on: number | null, off: number) {
  if (map.ring === null || !isVoltage(map, map.ring) || on === null) return null;
  const to = Math.floor(off) - 1;
  const level = meanAndDeviation(channels[map.ring].samples, Math.ceil((on + off) / 2), to);
  return level.count >= 4 ? level : null;
}
