/** Numbers and rows as people and programs write them beside the plain way. */
import { ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 600;
const time = grid(-400, 2, count, 1e-6);
const a = written(time.map(node));
const milli = a.value.map((value) => Math.round(value * 1000));
const rows = (join: (t: number, i: number) => string) => time.map(join);
const exponent = (value: number) => value.toExponential(6);
const comma = (text: string) => text.replace(".", ",");
const one = { names: ["A"], units: ["V"], step_s: 2e-6, start_s: -4e-4, samples: count, ...ends(a.value) };

const spelt = (file: string, what: string, rowsOf: string[], more: Partial<ShapeFile> = {}): ShapeFile => ({
  shape: "spelling",
  file,
  what,
  outcome: "read",
  bytes: utf8(lines(rowsOf)),
  records: [one],
  ...more,
});

const grouped = (value: number, mark: string) =>
  (value < 0 ? "-" : "") + String(Math.abs(value)).replace(/\B(?=(\d{3})+$)/g, mark);
const micro = (t: number) => (t * 1e6).toFixed(0);
const plain = rows((t, i) => `${exponent(t)},${a.text[i]}`);
const low = a.value.map((value) => (value - 0.2).toFixed(2));
const pairs = rows((t, i) => `${exponent(t)},${low[i]}\n${exponent(t)},${a.text[i]}`);

export const spelling: ShapeFile[] = [
  spelt("n-grouped-comma.csv", "whole numbers grouped by commas: no decimal commas", [
    "t (µs);A (mV)",
    ...rows((t, i) => `${micro(t)};${grouped(milli[i], ",")}`),
  ]),
  spelt("n-grouped-point.csv", "whole numbers grouped by points", [
    "t (µs);A (mV)",
    ...rows((t, i) => `${micro(t)};${grouped(milli[i], ".")}`),
  ]),
  spelt("n-grouped-apostrophe.csv", "digits grouped by apostrophes", [
    "t (µs);A (mV)",
    ...rows((t, i) => `${micro(t)};${grouped(milli[i], "'")}`),
  ]),
  spelt("n-quoted-comma.csv", "decimal comma in quotes between commas", [
    `"t (s)","A (V)"`,
    ...rows((t, i) => `"${comma(exponent(t))}","${comma(a.text[i])}"`),
  ]),
  spelt("n-minus-sign.csv", "the minus sign of print, in exponents too", [
    "t (s);A (V)",
    ...rows((t, i) => `${exponent(t)};${a.text[i]}`.replaceAll("-", "−")),
  ]),
  spelt("n-upright-bars.csv", "upright bars between the cells", [
    "t (s)|A (V)",
    ...plain.map((row) => row.replace(",", "|")),
  ]),
  spelt("n-remark-after-names.csv", "a remark with as many cells between names and data", [
    "t (s),A (V)",
    "# probe x10, filter 20 MHz",
    ...plain,
  ]),
  spelt("n-statistics-below.csv", "words with numbers below the data leave the interval alone", [
    "t (s),A (V)",
    ...plain,
    "End of record",
    "Minimum,-3.1",
    "Maximum,290.2",
  ]),
  spelt(
    "n-envelope-cut.csv",
    "envelope pairs, the last one cut in two",
    ["t (s),A (V)", ...pairs.join("\n").split("\n").slice(0, -1)],
    {
      records: [
        {
          ...one,
          names: ["A low", "A high"],
          units: ["V", "V"],
          samples: count - 1,
          ...ends(low.slice(0, -1).map(Number), a.value.slice(0, -1)),
        },
      ],
      acquisition: ["peak-detect"],
    },
  ),
  spelt(
    "n-envelope-damaged.csv",
    "envelope pairs with a row lost: the rows no longer tell the interval",
    ["t (s),A (V)", ...pairs.join("\n").split("\n").toSpliced(301, 1)],
    {
      outcome: "asked",
      records: [
        { ...one, step_s: null, start_s: undefined, samples: 2 * count - 1, first: [Number(low[0])] },
      ],
    },
  ),
];
