/** How the record was taken, where that can fool quietly: from the header's words and from the data. */
import type { AcquisitionCode, Capture, Note } from "../capture.ts";
import type { Layout } from "./layout.ts";

interface Acquired {
  codes: AcquisitionCode[];
  notes: Note[];
}

const words: [AcquisitionCode, RegExp, RegExp, string][] = [
  [
    "ac-coupled",
    /coupl|kopplung/i,
    /(^|\W)ac(\W|$)/i,
    "AC coupling: levels are not absolute, so absolute peaks and margins are not given.",
  ],
  [
    "averaged",
    /acq|mode|averag|mittel|process/i,
    /averag|mittel|\bavg\b|\bmean\b/i,
    "Averaged over several shots: a spark in some of them blurs; verdicts stay unclear and the resolution is not trusted.",
  ],
  [
    "peak-detect",
    /acq|mode|sampl|detect/i,
    /peak[ -]?det|envelope|hüllkurve|min[ /-]?max/i,
    "Peak detection: each interval keeps only its extremes; switch-offs can be used, a ring only roughly.",
  ],
  [
    "roll-mode",
    /acq|mode|horiz|time ?base/i,
    /\broll\b/i,
    "Roll mode: the record was still filling when it was saved.",
  ],
];

export function acquisitionOf(capture: Capture, layout: Layout, pairs: boolean): Acquired {
  const found = new Map<AcquisitionCode, string>();
  for (const [code, key, value, text] of words)
    if (layout.header.settings.some((setting) => says(setting, key, value))) found.set(code, text);
  if (pairs || twins(capture)) found.set("peak-detect", words[2][3]);
  if (capture.channels.some(leadingBlank)) found.set("roll-mode", words[3][3]);
  return {
    codes: [...found.keys()],
    notes: [...found].map(([code, text]) => ({ code, text })),
  };
}

function says(
  { key, values }: { key: string; values: { text: string }[] },
  keyed: RegExp,
  valued: RegExp,
): boolean {
  const texts = values.map(({ text }) => text);
  return (
    texts.some((text) => valued.test(text)) && (keyed.test(key) || texts.some((text) => keyed.test(text)))
  );
}

/** "A" and "A peak": lowest and highest of each interval in two columns. */
const twins = ({ channels }: Capture) =>
  channels.some(
    ({ name }, i) =>
      i > 0 &&
      name.startsWith(channels[i - 1].name) &&
      /(peak|max|min|env)/i.test(name.slice(channels[i - 1].name.length)),
  );

const leadingBlank = ({ unusable, samples }: Capture["channels"][number]) =>
  unusable[0] === 0 && unusable[1] >= 3 && unusable[1] < samples.length;
