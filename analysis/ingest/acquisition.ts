/** How the record was taken, where that can fool quietly: from the header's words and from the data. */
import type { AcquisitionCode, Capture, Channel, Note } from "../capture.ts";
import type { Steps } from "../steps.ts";
import type { Layout } from "./layout.ts";
import type { Outline } from "./outline.ts";
import { ringStart, type RingStart } from "./ring-start.ts";

interface Acquired {
  codes: AcquisitionCode[];
  notes: Note[];
}

const texts: Record<AcquisitionCode, string> = {
  "ac-coupled": "AC coupling: levels are not absolute, so absolute peaks and margins are not given.",
  averaged:
    "Averaged over several shots: a spark in some of them blurs, so verdicts stay unclear and the resolution is not trusted.",
  "peak-detect":
    "Peak detection: each interval keeps only its extremes; switch-offs can be used, a ring only roughly.",
  "roll-mode": "Roll mode: the record was still filling when it was saved.",
  undersampled:
    "Sampled too coarsely for the kick: it rises within two samples, or the ring has fewer than six samples a cycle; frequencies may be aliases.",
  "starts-in-ring": "The record begins inside a ring: its switch-off lies before the first sample.",
};

/** What header words say: the code, a setting's key, its value. */
const words: [AcquisitionCode, RegExp, RegExp][] = [
  ["ac-coupled", /coupl|kopplung/i, /(^|\W)ac(\W|$)/i],
  ["averaged", /acq|mode|averag|mittel|process/i, /averag|mittel|\bavg\b|\bmean\b/i],
  ["peak-detect", /acq|mode|sampl|detect/i, /peak[ -]?det|envelope|hüllkurve|min[ /-]?max/i],
  ["roll-mode", /acq|mode|horiz|time ?base/i, /\broll\b/i],
];

export function* acquisitionOf(
  capture: Capture,
  outlines: Map<Channel, Outline>,
  layout: Layout,
  pairs: boolean,
): Steps<Acquired> {
  const found = new Set<AcquisitionCode>();
  for (const [code, key, value] of words)
    if (layout.header.settings.some((setting) => says(setting, key, value))) found.add(code);
  if (pairs || twins(capture)) found.add("peak-detect");
  if (capture.channels.some(leadingBlank)) found.add("roll-mode");
  for (const channel of capture.channels.filter(isRinging))
    addFromRing(yield* ringStart(channel.samples, outlines.get(channel)!), found);
  return {
    codes: [...found],
    notes: [...found].map((code) => ({ code, text: texts[code] })),
  };
}

function says(
  { key, values }: { key: string; values: { text: string }[] },
  keyed: RegExp,
  valued: RegExp,
): boolean {
  const said = values.map(({ text }) => text);
  return said.some((text) => valued.test(text)) && (keyed.test(key) || said.some((text) => keyed.test(text)));
}

/** "A" and "A peak", "A min" and "A max": lowest and highest of each interval in two columns. */
const twins = ({ channels }: Capture) =>
  channels.some(({ name }, i) => {
    const before = channels[i - 1]?.name;
    return before !== undefined && name !== before && extremeWord.test(name) && stem(name) === stem(before);
  });

const extremeWord = /[\s_.-]*\(?\b_?(peak|max|min|env)\w*(\s+det\w*)?\)?\s*$/i;
const stem = (name: string) => name.replace(extremeWord, "").toLowerCase();

const leadingBlank = ({ unusable, samples, overrange }: Channel) =>
  unusable[0] === 0 && unusable[1] >= 3 && unusable[1] < samples.length && overrange < unusable[1];

const isRinging = ({ role }: Channel) => role === "switch-node" || role === "coil-voltage";

function addFromRing(ring: RingStart | null, found: Set<AcquisitionCode>): void {
  if (!ring) return;
  if (ring.fromFirstSample) found.add("starts-in-ring");
  else if (ring.samplesACycle !== null && ring.riseSamples <= 2) found.add("undersampled");
  if (ring.samplesACycle !== null && ring.samplesACycle < 6) found.add("undersampled");
  if (ring.sagShare !== null && ring.sagShare > 0.12) found.add("ac-coupled");
}
