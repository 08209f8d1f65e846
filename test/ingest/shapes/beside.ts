/** S7–S9: metadata left or right of the data, blocks side by side. */
import { current, ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 400;
const time = grid(-400, 4, count, 1e-6);
const a = written(time.map(node));
const b = written(time.map(current), 3);
const rows = (join: (t: number, i: number) => string) => time.map(join);
const fixed = (value: number) => value.toFixed(7);
const meta = [
  `Record Length,${count}`,
  "Sample Interval,4.0E-06",
  ",",
  "Source,Node",
  "Vertical Units,V",
  "Vertical Scale,50",
  "Vertical Offset,0",
  "Horizontal Units,us",
  "Probe,10",
];
const metaB = meta.map((line) => line.replace("Source,Node", "Source,Coil").replace("Units,V", "Units,A"));
const three = (line: string) => `${line},`;
const one = { step_s: 4e-6, start_s: -4e-4, samples: count, ...ends(a.value) };
const shifted = grid(-200, 4, count, 1e-6);
const late = written(shifted.map(current), 3);

export const beside: ShapeFile[] = [
  {
    shape: "S7",
    file: "s07-metadata-left.csv",
    what: "metadata in left columns, data from the first line",
    outcome: "read",
    bytes: utf8(lines(rows((t, i) => `${meta[i] ?? ","},,${fixed(t)},${a.text[i]},`))),
    records: [{ names: ["Node"], units: ["V"], ...one }],
  },
  {
    shape: "S8",
    file: "s08-metadata-right.csv",
    what: "metadata in right columns",
    outcome: "read",
    bytes: utf8(
      lines([
        `t,c2,,,Points,${count}`,
        ...rows(
          (t, i) =>
            `${fixed(t)},${a.text[i]},,,${["Input,Node", "Unit,V", "Sample Interval,4.0e-06"][i] ?? ","}`,
        ),
      ]),
    ),
    records: [{ names: ["c2"], units: ["V"], ...one }],
  },
  {
    shape: "S9",
    file: "s09-blocks-equal.csv",
    what: "blocks side by side with metadata each and equal times: one record",
    outcome: "read",
    bytes: utf8(
      lines(
        rows(
          (t, i) =>
            `${three(meta[i] ?? ",")}${fixed(t)},${a.text[i]},,${three(metaB[i] ?? ",")}${fixed(t)},${b.text[i]},`,
        ),
      ),
    ),
    records: [{ names: ["Node", "Coil"], units: ["V", "A"], ...one, ...ends(a.value, b.value) }],
  },
  {
    shape: "S9",
    file: "s09-own-axes.csv",
    what: "two blocks with times of their own: two records",
    outcome: "read",
    bytes: utf8(
      lines([
        "xa,node,xb,current",
        ...rows((t, i) => `${fixed(t)},${a.text[i]},${fixed(shifted[i])},${late.text[i]}`),
      ]),
    ),
    records: [
      { names: ["node"], units: ["V"], ...one },
      { names: ["current"], units: ["A"], positions: [1], ...one, start_s: -2e-4, ...ends(late.value) },
    ],
    notes: ["time-unit-assumed", "unit-guessed"],
  },
];
