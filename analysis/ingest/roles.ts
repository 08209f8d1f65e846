/** What each channel measures, guessed from name, unit and shape where the setup does not say; always noted. */
import type { Capture, Channel, ChannelRole, Note } from "../capture.ts";
import type { Outline } from "./outline.ts";
import { shapeOf, type Shape } from "./shape.ts";

const named: [RegExp, ChannelRole][] = [
  [
    /(^|[^a-z])(sec(ondary)?|hv|ht|sek(und[äa]r)?)([^a-z]|$).*(curr|strom|\bi\b)|^i_?(sec|s2|2)\b/i,
    "secondary-current",
  ],
  [/gate|vgs|(^|[^a-z])(pwm|trig(ger)?|drive|driver|cmd|control|logic|dwell|in)([^a-z]|$)/i, "gate"],
  [
    /(^|[^a-z])(i|curr(ent)?|strom|amps?|shunt|clamp)([^a-z]|$)|^i[_ ]?(coil|prim|l|p|1)\b|coil[ _-]?current/i,
    "coil-current",
  ],
  [/(^|[^a-z])(sec(ondary)?|hv|ht|kv|spark|gap|plug|sek(und[äa]r)?)([^a-z]|$)/i, "secondary"],
  [/supply|batt(ery)?|vbat|vcc|vdd|vin\b|rail|versorgung|speisung/i, "supply"],
  [/switch|node|drain|collector|vds|vce|(^|[^a-z])(sw|kick|prim(ary)?)([^a-z]|$)/i, "switch-node"],
  [/coil|spule|winding|inductor/i, "coil-voltage"],
];

export function guessRoles(capture: Capture, outlines: Map<Channel, Outline>): Note[] {
  const notes: Note[] = [];
  const symbols = new Set(
    capture.notes.filter(({ code }) => code === "symbol-column").map(({ channel }) => channel),
  );
  const open = capture.channels.filter(({ roleGuessed, name }) => roleGuessed && !symbols.has(name));
  const shapes = new Map(
    open.map((channel) => [channel, shapeOf(channel.samples, outlines.get(channel)!)] as const),
  );
  const taken = new Set(capture.channels.filter((channel) => !channel.roleGuessed).map(({ role }) => role));
  for (const channel of open) {
    const role = byName(channel);
    if (role) settle(channel, role, "its name");
  }
  const unnamed = open.filter(({ role }) => role === "other");
  // The strongest kick first: it is the switch node, unless it stands far above another and in kilovolts.
  const secondary = farStrongest(unnamed.map((channel) => ({ channel, shape: shapes.get(channel) ?? null })));
  if (secondary) settle(secondary, "secondary", "its kilovolts beside a smaller kick");
  for (const channel of unnamed
    .filter(({ role }) => role === "other")
    .toSorted((a, b) => kick(shapes.get(b)) - kick(shapes.get(a)))) {
    const guess = byShape(channel, shapes.get(channel) ?? null, taken);
    if (guess) settle(channel, guess.role, guess.why);
  }
  guessUnits(open, shapes, notes);
  return notes;

  function settle(channel: Channel, role: ChannelRole, why: string) {
    channel.role = role;
    taken.add(role);
    notes.push({
      code: "role-guessed",
      text: `"${channel.name}" is taken as ${role}, from ${why}.`,
      channel: channel.name,
      answers: "channels",
    });
  }
}

const isCurrent = (role: ChannelRole) => role === "coil-current" || role === "secondary-current";

function byName({ name, unit }: Channel): ChannelRole | null {
  const fits = named.filter(([pattern]) => pattern.test(name)).map(([, role]) => role);
  if (unit === "A")
    return fits.find(isCurrent) ?? (fits.includes("secondary") ? "secondary-current" : "coil-current");
  if (unit === "V") return fits.find((role) => !isCurrent(role)) ?? null;
  return unit === "" || unit === "counts" ? (fits[0] ?? null) : null;
}

/** How far the waveform leaves its rest level, for how short a time. */
const kick = (shape: Shape | null | undefined) =>
  shape ? Math.max(shape.above, shape.below) * (1 - shape.busy) : 0;

/** A shape is seen in no fewer samples. */
const fewestSamples = 16;

interface Shaped {
  channel: Channel;
  shape: Shape | null;
}

function farStrongest(channels: Shaped[]): Channel | null {
  const volts = channels.filter(
    ({ channel, shape }) => shape && channel.unit !== "A" && rings(shape) && shape.rampShare < 0.8,
  );
  const [first, second] = volts.toSorted((a, b) => kick(b.shape) - kick(a.shape));
  if (!second || !first.shape || !second.shape) return null;
  const ranges = [first.shape.high - first.shape.low, second.shape.high - second.shape.low];
  return ranges[0] > 1500 && ranges[0] > 5 * ranges[1] && ranges[1] > 30 ? first.channel : null;
}

const rings = (shape: Shape) => shape.swings >= 2 || shape.busy < 0.3;

function byShape(
  channel: Channel,
  shape: Shape | null,
  taken: Set<ChannelRole>,
): { role: ChannelRole; why: string } | null {
  if (!shape || (channel.unit !== "V" && channel.unit !== "" && channel.unit !== "counts")) return null;
  if (channel.samples.length < fewestSamples) return null;
  if (shape.atExtremes > 0.9 && shape.high - shape.low < 60)
    return taken.has("gate") ? null : { role: "gate", why: "its two levels" };
  if (
    channel.unit !== "V" &&
    shape.rampShare > (taken.has("switch-node") ? 0.5 : 0.8) &&
    !taken.has("coil-current")
  )
    return { role: "coil-current", why: "its ramp" };
  const leaves = rings(shape);
  if (!taken.has("switch-node") && !taken.has("coil-voltage") && leaves)
    return { role: "switch-node", why: "its kick and ring" };
  if (!taken.has("secondary") && leaves && channel.unit === "V" && shape.high - shape.low > 2000)
    return { role: "secondary", why: "its kilovolts" };
  return null;
}

/** Zeros and ones are states, not volts. */
const isLogic = ({ low, high, atExtremes }: Shape) => low === 0 && high === 1 && atExtremes === 1;

/** A channel that kicks and rings without a unit is taken as volts, and said so. */
function guessUnits(open: Channel[], shapes: Map<Channel, Shape | null>, notes: Note[]): void {
  for (const channel of open) {
    const shape = shapes.get(channel);
    if (channel.unit !== "" || !shape || isLogic(shape)) continue;
    const unit = channel.role === "coil-current" || channel.role === "secondary-current" ? "A" : "V";
    if (channel.role === "other") continue;
    channel.unit = unit;
    notes.push({
      code: "unit-guessed",
      text: `The file gives no unit for "${channel.name}"; taken as ${unit}.`,
      channel: channel.name,
      question: `What is the unit of "${channel.name}"?`,
      choices: ["V", "mV", "A", "mA"],
      answers: "channels",
    });
  }
}
