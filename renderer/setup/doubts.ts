/** Entries that can be right but rarely are: asked about, never refused. */
import type { CaptureReading, ChannelReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { plain, stated } from "../format/figure.ts";
import { withChannel } from "./channels.ts";
import { allFields, type Field } from "./fields.ts";

export interface Doubt {
  key: string;
  text: string;
  /** What could have been meant: words for the button and the change it makes. */
  offers: { words: string; change: Record<string, unknown> }[];
}

const sizeOf = (value: unknown): number | null =>
  typeof value === "number"
    ? value
    : value && typeof value === "object"
      ? ((value as { value?: number }).value ?? null)
      : null;

export function doubts(setup: Setup, reading: CaptureReading | null): Doubt[] {
  const sizes = allFields.map((field) => sizeDoubt(field, setup)).filter((doubt) => doubt !== null);
  return [...sizes, ...(reading ? probeDoubts(setup, reading) : [])];
}

/** Slips of a prefix: a step of a thousand that leads back to what is usual. */
const slips = [1e-3, 1e-6, 1e-9, 1e3, 1e6];

/** Usual sizes that a slip of the prefix could have turned into this one; none where it is usual itself. */
export function meantSizes({ usual }: Field, size: number): number[] {
  if (!usual || size === 0 || (size >= usual[0] && size <= usual[1])) return [];
  const meant = slips.map((slip) => Number((size * slip).toPrecision(12)));
  return meant.filter((guess) => guess >= usual[0] && guess <= usual[1]).slice(0, 3);
}

function sizeDoubt(field: Field, setup: Setup): Doubt | null {
  const value = setup[field.key] as unknown;
  const size = sizeOf(value);
  if (!field.usual || size === null || size === 0) return null;
  const [low, high] = field.usual;
  if (size >= low && size <= high) return null;
  return {
    key: field.key,
    text: `${capital(field.words)} ${stated(size, field.unit)}: ${stated(low, field.unit)} to ${stated(high, field.unit)} is usual. Is it meant?`,
    offers: meantSizes(field, size).map((guess) => ({
      words: `I meant ${stated(guess, field.unit)}`,
      change: { [field.key]: typeof value === "object" ? { ...(value as object), value: guess } : guess },
    })),
  };
}

/**
 * A probe's attenuation counted twice (by the scope and on the card), or not at all. The level that the ring
 * settles to is the supply: where it is that times the factor, the factor is one too many; where it is a
 * tenth or a hundredth of it, one is missing. Without a stated supply a passed rating tells.
 */
function probeDoubts(setup: Setup, reading: CaptureReading): Doubt[] {
  return reading.channels.flatMap((channel, position) => {
    if (channel.role !== "switch-node") return [];
    const put = (scale: number) => ({ channels: withChannel(setup, channel.name, position, { scale }) });
    const level = restingLevel(reading, channel.name);
    const text =
      countedTwice(channel, level, setup.supply_V ?? null) ??
      passesRating(channel, setup.switchRating_V ?? null);
    const key = `channel-${position}`;
    if (text) return [{ key, text, offers: [{ words: "Yes, it is in the file already", change: put(1) }] }];
    const missing = missingFactor(channel, level, setup.supply_V ?? null);
    if (missing === null) return [];
    return [
      {
        key,
        text: `“${channel.name}” rests at ${plain(level, "V")}, about a ${missing === 10 ? "tenth" : "hundredth"} of the stated supply of ${stated(setup.supply_V, "V")}. Is a ${missing}× probe’s factor missing?`,
        offers: [{ words: `Yes, ${missing}×`, change: put(channel.scale * missing) }],
      },
    ];
  });
}

/** What the fitted ring of the column settles to; null where none was fitted. */
function restingLevel({ pulses }: CaptureReading, channel: string): number | null {
  const ring = pulses.find((pulse) => pulse.ring?.channel === channel && pulse.ring.quality === "good")?.ring;
  return ring?.offset ?? null;
}

/** Near enough to tell factors of ten apart: a supply sags, a switch drops a volt. */
const near = (ratio: number, wanted: number) => Math.abs(ratio / wanted - 1) < 0.3;

function countedTwice({ scale, name }: ChannelReading, level: number | null, supply: number | null) {
  const factor = Math.abs(scale);
  if (level === null || !supply || factor < 5 || !near(Math.abs(level) / supply, factor)) return null;
  return `With the probe’s ${stated(scale, "")}× “${name}” rests at ${plain(level, "V")}, where the stated supply is ${stated(supply, "V")}; without it at ${plain(level / scale, "V")}. Had the scope multiplied already?`;
}

function passesRating({ scale, maximum, minimum, name }: ChannelReading, limit: number | null) {
  if (Math.abs(scale) < 5 || maximum === null || minimum === null || limit === null) return null;
  const reach = Math.max(maximum, -minimum);
  if (reach <= limit) return null;
  return `With the probe’s ${stated(scale, "")}× “${name}” reaches ${plain(reach, "V")}, above the switch’s ${stated(limit, "V")}; without it ${plain(reach / Math.abs(scale), "V")}. Had the scope multiplied already?`;
}

function missingFactor({ scale }: ChannelReading, level: number | null, supply: number | null) {
  if (level === null || !supply || scale !== 1) return null;
  return [10, 100].find((factor) => near((Math.abs(level) * factor) / supply, 1)) ?? null;
}

const capital = (text: string) => text[0].toUpperCase() + text.slice(1);
