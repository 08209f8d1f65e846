/** Which channel answers which question. */
import type { Capture, Channel, ChannelRole } from "../capture.ts";
import type { ChannelMap } from "../evidence.ts";

export function mapChannels(capture: Capture): ChannelMap {
  const first = (role: ChannelRole) => {
    const at = capture.channels.findIndex((channel) => channel.role === role && measured(channel));
    return at < 0 ? null : at;
  };
  const map = {
    switchNode: first("switch-node"),
    coilVoltage: first("coil-voltage"),
    current: first("coil-current"),
    gate: first("gate"),
    supply: first("supply"),
    secondary: first("secondary"),
    secondaryCurrent: first("secondary-current"),
  };
  const known = map.switchNode ?? map.coilVoltage ?? map.current ?? map.secondary;
  // Nothing known to look at: a trace without a role is taken for what it looks like, a voltage.
  const other = known === null && map.gate === null ? first("other") : null;
  return { ...map, ring: known ?? other };
}

const measured = (channel: Channel) => channel.samples.some((y) => Number.isFinite(y));

export function isVoltage(map: ChannelMap, channel: number | null): boolean {
  return channel !== null && channel !== map.current && channel !== map.secondaryCurrent;
}
