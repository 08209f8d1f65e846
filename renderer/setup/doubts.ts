/** Entries that can be right but rarely are: asked about, never refused. */
import type { CaptureReading } from "../../analysis/reading-format.ts";
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
 * A probe's attenuation stated on the card although the scope had it in the file already: the scaled
 * trace passes a stated rating (or far exceeds what the drive suggests), the unscaled does not.
 */
function probeDoubts(setup: Setup, reading: CaptureReading): Doubt[] {
  const limit = setup.switchRating_V ?? null;
  return reading.channels.flatMap((channel, position) => {
    const { scale, maximum, minimum, role, name } = channel;
    if (role !== "switch-node" || Math.abs(scale) < 5 || maximum === null || minimum === null) return [];
    const reach = Math.max(maximum, -minimum);
    if (limit === null || reach <= limit) return [];
    return [
      {
        key: `channel-${position}`,
        text: `With the probe’s ${stated(scale, "")}× “${name}” reaches ${plain(reach, "V")}, above the switch’s ${stated(limit, "V")}; without it ${plain(reach / Math.abs(scale), "V")}. Had the scope multiplied already?`,
        offers: [
          {
            words: "Yes, it is in the file already",
            change: { channels: withChannel(setup, name, position, { scale: 1 }) },
          },
        ],
      },
    ];
  });
}

const capital = (text: string) => text[0].toUpperCase() + text.slice(1);
