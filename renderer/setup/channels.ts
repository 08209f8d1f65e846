/** A statement about one column goes into the setup's list of channels, beside what is stated already. */
import type { Setup, SetupChannel } from "../../analysis/setup/schema.ts";

export function withChannel(
  setup: Setup,
  name: string,
  position: number | null,
  part: Partial<SetupChannel>,
): SetupChannel[] {
  const channels = setup.channels ?? [];
  const at = channels.findIndex(
    (channel) => channel.name === name || (position !== null && channel.position === position),
  );
  if (at < 0) return [...channels, { name, ...part }];
  return channels.map((channel, index) => (index === at ? { ...channel, ...part } : channel));
}

/** "mV" as a file means it: the unit is volt, and the file's numbers are thousandths of it. */
export const unitPart = (unit: string): Partial<SetupChannel> =>
  /^[mkµu][VA]$/.test(unit)
    ? { unit: unit.slice(1), scale: { m: 1e-3, k: 1e3, µ: 1e-6, u: 1e-6 }[unit[0]] }
    : { unit };
