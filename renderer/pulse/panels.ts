/** Which panels stand under the trace, and how high each is. */
import type { CaptureReading, ChannelReading, PulseReading } from "../../analysis/reading-format.ts";
import type { RingPicture } from "../../app/bridge.ts";

export interface Panel {
  id: string;
  kind: "main" | "channel" | "residuals" | "envelope";
  /** Index of the reading's channel, for traces. */
  channel: number;
  title: string;
  top: number;
  height: number;
}

const roleNames: Record<string, string> = {
  "switch-node": "switch node",
  "coil-voltage": "coil voltage",
  "coil-current": "coil current",
  gate: "gate",
  supply: "supply",
  secondary: "secondary voltage",
  "secondary-current": "secondary current",
};

export const roleName = (role: string) => roleNames[role] ?? "no stated role";

const mainOrder = ["switch-node", "coil-voltage", "secondary", "coil-current", "gate"];
const besideMain = ["secondary", "secondary-current", "coil-current", "coil-voltage", "gate"];

/** The channel the pulse is told on: the ring's, else the first of the telling roles. */
export function mainChannel(reading: CaptureReading, pulse: PulseReading): number {
  const ofRing = reading.channels.findIndex((channel) => channel.name === pulse.ring?.channel);
  if (ofRing >= 0) return ofRing;
  for (const role of mainOrder) {
    const found = reading.channels.findIndex((channel) => channel.role === role);
    if (found >= 0) return found;
  }
  return 0;
}

/** A column named for what it is needs no second name. */
function titleOf({ name, role }: ChannelReading): string {
  const words = roleName(role);
  return name.toLowerCase() === words ? name : `${name}: ${words}`;
}

const above = 34;
const between = 26;

export function panelsFor(reading: CaptureReading, pulse: PulseReading, picture: RingPicture | null) {
  const main = mainChannel(reading, pulse);
  const channels = reading.channels
    .map((channel, index) => ({ channel, index }))
    .filter(({ channel, index }) => index !== main && besideMain.includes(channel.role))
    .toSorted((a, b) => besideMain.indexOf(a.channel.role) - besideMain.indexOf(b.channel.role))
    .slice(0, 3);
  const list: Omit<Panel, "top">[] = [
    { id: "main", kind: "main", channel: main, title: reading.channels[main]?.name ?? "", height: 330 },
    ...channels.map(({ channel, index }) => ({
      id: `channel-${index}`,
      kind: "channel" as const,
      channel: index,
      title: titleOf(channel),
      height: 76,
    })),
  ];
  if (picture && picture.residuals.time_s.length > 1)
    list.push({
      id: "residuals",
      kind: "residuals",
      channel: main,
      title: "what the fit leaves over",
      height: 54,
    });
  if (picture && picture.peaks.time_s.length > 1)
    list.push({
      id: "envelope",
      kind: "envelope",
      channel: main,
      title: "peaks of the ring on a logarithmic scale: a straight line is a steady ring",
      height: 92,
    });
  let top = above;
  const panels = list.map((panel) => {
    const placed = { ...panel, top };
    top += panel.height + between + (panel.kind === "main" ? 30 : 0);
    return placed;
  });
  return { panels, height: top + 12 };
}
