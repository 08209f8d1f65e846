/** The catalogue's pitfalls: line ends, encodings, rounded, descending and unit-switching times, and more. */
import { current, ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 1000;
const time = grid(-2000, 4, count, 1e-6);
const a = written(time.map(node));
const b = written(time.map(current), 3);
const rows = (join: (t: number, i: number) => string) => time.map(join);
const exponent = (value: number) => value.toExponential(6);
const one = { names: ["A"], units: ["V"], step_s: 4e-6, start_s: -2e-3, samples: count, ...ends(a.value) };
const simple = ["t (s),A (V)", ...rows((t, i) => `${exponent(t)},${a.text[i]}`)];
const pitfall = (
  file: string,
  what: string,
  bytes: Uint8Array | string,
  more: Partial<ShapeFile> = {},
): ShapeFile => ({
  shape: "pitfall",
  file,
  what,
  outcome: "read",
  bytes: typeof bytes === "string" ? utf8(bytes) : bytes,
  records: [one],
  ...more,
});

function utf16(text: string, little: boolean): Uint8Array {
  const bytes = new Uint8Array(2 * text.length + 2);
  const view = new DataView(bytes.buffer);
  [...`\uFEFF${text}`].forEach((c, i) => view.setUint16(2 * i, c.charCodeAt(0), little));
  return bytes;
}

const latin1 = (text: string) => Uint8Array.from(text, (c) => c.charCodeAt(0));
const engineering = (value: number) => {
  const power = value === 0 ? 0 : Math.floor(Math.log10(Math.abs(value)) / 3) * 3;
  return `${value < 0 ? "-" : "+"}${Math.abs(value / 10 ** power).toFixed(3)}E${power < 0 ? "-" : "+"}${String(Math.abs(power)).padStart(3, "0")}`;
};
const rounded = (digits: number) =>
  lines(["t (s),A (V)", ...rows((t, i) => `${(t + 0.056).toExponential(digits)},${a.text[i]}`)]);
const descending = [...time].toReversed();
// Read out as "1.016, 1.006, 996.094": numbers below 1 in the next smaller unit, the unit left out.
const autoRanged = grid(200, -1, 401, 0.01);
const autoText = autoRanged.map((t) =>
  Math.abs(t) >= 1 ? t.toFixed(3) : (t * 1000).toFixed(3).replace(/\.?0+$/, "") || "0",
);
const auto = written(autoRanged.map((_, i) => node((200 - i) * 4e-6)));
const clipped = written(time.map((t) => Math.min(250, node(t))));
const marked = clipped.text.map((text) => (text === "250.00" ? "inf" : text));
const roll = a.text.map((text, i) => (i < 60 ? "" : text));

export const pitfalls: ShapeFile[] = [
  pitfall("p-crlf.csv", "CR LF", lines(simple, "\r\n")),
  pitfall("p-cr.csv", "bare CR", lines(simple, "\r")),
  pitfall("p-crcrlf.csv", "CR CR LF", lines(simple, "\r\r\n")),
  pitfall("p-bom.csv", "byte order mark", `\uFEFF${lines(simple)}`),
  pitfall("p-utf16le.csv", "UTF-16, low byte first", utf16(lines(simple, "\r\n"), true)),
  pitfall("p-utf16be.csv", "UTF-16, high byte first", utf16(lines(simple), false)),
  pitfall(
    "p-single-byte.csv",
    "a single-byte page: µs",
    latin1(lines(["Zeit (µs);A (V)", ...rows((t, i) => `${(t * 1e6).toFixed(0)};${a.text[i]}`)])),
  ),
  pitfall(
    "p-plus-signs.csv",
    "plus signs, engineering exponents of three digits",
    lines([
      "t (s),A (V)",
      ...rows((t, i) => `${engineering(t)},${Number(a.text[i]) < 0 ? "" : "+"}${a.text[i]}`),
    ]),
    {
      records: [{ ...one, stepTolerance: 1e-6 }],
    },
  ),
  pitfall(
    "p-float-noise.csv",
    "times with float noise",
    lines(["t (s),A (V)", ...rows((_, i) => `${-0.002 + i * 4e-6},${a.text[i]}`)]),
  ),
  pitfall(
    "p-padded-zeros.csv",
    "times with leading zeros",
    lines(["t (s),A (V)", ...rows((t, i) => `0${(t + 0.002).toFixed(7)},${a.text[i]}`)]),
    {
      records: [{ ...one, start_s: 0 }],
    },
  ),
  pitfall("p-rounded.csv", "times rounded until they repeat: span/(n − 1) and its uncertainty", rounded(2), {
    records: [{ ...one, start_s: 0.054, stepTolerance: 0.03 }],
    notes: ["time-rounded"],
  }),
  pitfall(
    "p-rounded-header.csv",
    "the same with the interval in the header, which wins",
    `Sample Interval,4.0e-06\n${rounded(2)}`,
    {
      records: [{ ...one, start_s: 0.054 }],
    },
  ),
  pitfall(
    "p-rounded-plausible.csv",
    "true step 1.6 µs written as steps of 1 and 2 µs",
    lines(["t (s),A (V)", ...rows((_, i) => `${(i * 1.6e-6).toFixed(6)},${a.text[i]}`)]),
    {
      records: [{ ...one, step_s: 1.6e-6, start_s: 0, stepTolerance: 1e-3 }],
      notes: ["time-rounded"],
    },
  ),
  pitfall(
    "p-rounding-begins.csv",
    "four significant digits: rounding begins mid-file",
    lines(["t (s),A (V)", ...rows((_, i) => `${(i * 4e-6).toPrecision(4)},${a.text[i]}`)]),
    {
      records: [{ ...one, start_s: 0, stepTolerance: 1e-3 }],
    },
  ),
  pitfall(
    "p-descending.csv",
    "time runs backwards",
    lines(["t (s),A (V)", ...descending.map((t, i) => `${exponent(t)},${a.text[count - 1 - i]}`)]),
    {
      notes: ["time-descending"],
    },
  ),
  pitfall(
    "p-auto-ranged.csv",
    "the unit changes inside the time column",
    lines(["t,A (V)", ...autoText.map((t, i) => `${t},${auto.text[i]}`)]),
    {
      outcome: "asked",
      records: [
        {
          ...one,
          samples: 401,
          step_s: null,
          start_s: undefined,
          first: [auto.value[400]],
          last: [auto.value[0]],
        },
      ],
      notes: ["time-unit-unknown"],
    },
  ),
  pitfall(
    "p-auto-ranged-answered.csv",
    "the same with the unit in the setup",
    lines(["t,A (V)", ...autoText.map((t, i) => `${t},${auto.text[i]}`)]),
    {
      setup: { timeUnit: "ms" },
      records: [
        {
          ...one,
          samples: 401,
          step_s: 0.01,
          start_s: -2,
          stepTolerance: 1e-6,
          first: [auto.value[400]],
          last: [auto.value[0]],
        },
      ],
    },
  ),
  pitfall(
    "p-overrange-inf.csv",
    "infinity where the kick leaves the screen",
    lines(["t (s),A (V)", ...rows((t, i) => `${exponent(t)},${marked[i]}`)]),
    { notes: ["overrange"] },
  ),
  pitfall(
    "p-pinned.csv",
    "the kick pinned at the screen's edge",
    lines(["t (s),A (V)", ...rows((t, i) => `${exponent(t)},${clipped.text[i]}`)]),
    { notes: ["overrange"] },
  ),
  pitfall(
    "p-roll.csv",
    "blank cells at the start of a slow roll",
    lines(["t (s),A (V)", ...rows((t, i) => `${exponent(t)},${roll[i]}`)]),
    {
      records: [{ ...one, first: [NaN] }],
      acquisition: ["roll-mode"],
    },
  ),
  pitfall(
    "p-thousands.csv",
    "digits grouped by points beside a decimal comma",
    lines(["Zeit (µs);A (mV)", ...rows((t, i) => `${(t * 1e6).toFixed(0)};${grouped(a.value[i] * 1000)}`)]),
  ),
  pitfall(
    "p-quoted.csv",
    "every cell quoted, the separator inside a name",
    lines([`"t (s)","A, upper (V)"`, ...rows((t, i) => `"${exponent(t)}","${a.text[i]}"`)]),
    {
      records: [{ ...one, names: ["A, upper"] }],
    },
  ),
  pitfall(
    "p-comma-comma.csv",
    "decimal comma between commas is ambiguous: asked",
    lines(
      rows(
        (t, i) =>
          `${i},${String(Math.round((t + 0.002) * 1e7)).padStart(5, "0")},${Math.trunc(a.value[i] + 500)},${String(i % 100).padStart(2, "0")}`,
      ),
    ),
    {
      outcome: "asked",
      records: [
        {
          ...one,
          names: ["1", "2", "3", "4"],
          units: ["counts", "counts", "counts", "counts"],
          step_s: null,
          start_s: undefined,
          first: [0, 0, 512, 0],
          last: [999, 39960, Math.trunc(a.value[count - 1] + 500), 99],
        },
      ],
      notes: ["decimal-comma-ambiguous"],
    },
  ),
  pitfall(
    "p-deleted-rows.csv",
    "rows deleted by hand leave a gap, not a shift",
    lines(simple.filter((_, i) => i < 300 || i > 304)),
    { notes: ["rows-missing"] },
  ),
  pitfall(
    "p-two-channels-comments-after.csv",
    "text behind the data",
    `${lines(["t (s),A (V),B (A)", ...rows((t, i) => `${exponent(t)},${a.text[i]},${b.text[i]}`)])}\nend of record\n`,
    {
      records: [{ ...one, names: ["A", "B"], units: ["V", "A"], ...ends(a.value, b.value) }],
    },
  ),
];

function grouped(value: number): string {
  const [whole, fraction] = Math.abs(value).toFixed(2).split(".");
  return `${value < 0 ? "-" : ""}${whole.replace(/\B(?=(\d{3})+$)/g, ".")},${fraction}`;
}
