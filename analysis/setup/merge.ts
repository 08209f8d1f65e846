import type { Setup, SetupChannel } from "./schema.ts";

/** Key by key, the first setup that states a key wins; null states nothing. Channels merge by identity. */
export function mergeSetups(strongestFirst: Setup[]): Setup {
  const merged: Record<string, unknown> = { format: "ringbook.setup/1" };
  for (const setup of strongestFirst)
    for (const [key, value] of Object.entries(setup)) {
      if (value === null || value === undefined || key === "channels") continue;
      merged[key] ??= value;
    }
  const channels = mergeChannels(strongestFirst.map((setup) => setup.channels ?? []));
  return (channels.length > 0 ? { ...merged, channels } : merged) as Setup;
}

function mergeChannels(strongestFirst: SetupChannel[][]): SetupChannel[] {
  const merged: SetupChannel[] = [];
  for (const channel of strongestFirst.flat()) {
    const twin = merged.find((other) => sameChannel(other, channel));
    if (!twin) merged.push({ ...channel });
    else for (const [key, value] of Object.entries(channel)) (twin as Record<string, unknown>)[key] ??= value;
  }
  return merged;
}

const stated = (value: unknown) => value !== null && value !== undefined;

export function sameChannel(a: SetupChannel, b: SetupChannel): boolean {
  // Position and name are those within its own file, where a shot lies in several.
  if (stated(a.file) && stated(b.file) && a.file !== b.file) return false;
  if (stated(a.position) && stated(b.position)) return a.position === b.position;
  return stated(a.name) && a.name === b.name;
}
