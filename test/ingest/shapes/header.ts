/** S3–S6, S13, S16, S20: what the numbers mean stands in a header, or nowhere. */
import { current, ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 500;
const time = grid(-500, 4, count, 1e-6);
const a = written(time.map(node));
const b = written(time.map(current), 3);
const exponent = (value: number) => value.toExponential(3);
const codes = time.map((t) => Math.round(node(t) / 4));
const rows = (join: (t: number, i: number) => string) => time.map(join);
const two = { step_s: 4e-6, start_s: -5e-4, samples: count, ...ends(a.value, b.value) };
const one = { ...two, ...ends(a.value) };

export const header: ShapeFile[] = [
  {
    shape: "S3",
    file: "s03-start-and-step.csv",
    what: "running number; start and step behind the units row",
    outcome: "read",
    bytes: utf8(
      lines([
        "N,A,B,Origin,Step,",
        "Count,Volt,Ampere,-5.0e-04,4.0e-06",
        ...rows((_, i) => `${i},${a.text[i]},${b.text[i]},`),
      ]),
    ),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two }],
  },
  {
    shape: "S4",
    file: "s04-values-only.csv",
    what: "values only; start and step behind the units row",
    outcome: "read",
    bytes: utf8(
      lines([
        "A,B,Origin,Step,",
        "Volt,Ampere,-0.0005,4.0e-06",
        ...rows((_, i) => `${a.text[i]},${b.text[i]},`),
      ]),
    ),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two }],
  },
  {
    shape: "S4",
    file: "s04-numbers-gone.csv",
    what: "as above, the row with the numbers gone: the interval is asked",
    outcome: "asked",
    bytes: utf8(lines(["A,B,Origin,Step,", ...rows((_, i) => `${a.text[i]},${b.text[i]},`)])),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two, step_s: null, start_s: undefined }],
    notes: ["interval-unknown"],
  },
  {
    shape: "S5",
    file: "s05-settings-and-marker.csv",
    what: "key,value lines, a marker line, unnamed data",
    outcome: "read",
    bytes: utf8(
      lines([
        `Points,${count},`,
        "Input,Node,",
        "Unit,V,",
        "Volts per division,50,",
        "Sample Interval,4.0e-06,",
        "Samples follow,",
        ...rows((t, i) => `${exponent(t)},${a.text[i]},`),
      ]),
    ),
    records: [{ names: ["Node"], units: ["V"], ...one }],
  },
  {
    shape: "S6",
    file: "s06-settings-by-column.csv",
    what: "key,value lines with a value per channel in its column, then names",
    outcome: "read",
    bytes: utf8(
      lines([
        "Recorder,abc",
        "",
        "Sample Interval,4.0E-06,,",
        `Record Length,${count},,`,
        "Vertical Units,V,,A",
        ",,,",
        "Probe factor,10,,1",
        "TIME,A,,B",
        ...rows((t, i) => `${exponent(t)},${a.text[i]},,${b.text[i]}`),
      ]),
    ),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two }],
  },
  {
    shape: "S13",
    file: "s13-integer-codes.csv",
    what: "bare converter codes: the interval is in the header, what a count is worth is asked",
    outcome: "asked",
    bytes: utf8(
      lines([
        "Vertical Scale,50,",
        "Sample Interval,4.0e-06,",
        "Samples follow,",
        ...codes.map((code) => `${code},`),
      ]),
    ),
    records: [{ names: ["1"], units: ["counts"], ...two, start_s: 0, ...ends(codes) }],
    notes: ["scale-unknown"],
  },
  {
    shape: "S13",
    file: "s13-integer-codes-answered.csv",
    what: "the same with the answer in the setup",
    outcome: "read",
    setup: { channels: [{ position: 0, scale: 4, unit: "V", role: "switch-node" }] },
    bytes: utf8(
      lines([
        "Vertical Scale,50,",
        "Sample Interval,4.0e-06,",
        "Samples follow,",
        ...codes.map((code) => `${code},`),
      ]),
    ),
    records: [{ names: ["1"], units: ["V"], ...two, start_s: 0, ...ends(codes.map((code) => code * 4)) }],
  },
  {
    shape: "S16",
    file: "s16-quoted-preamble.csv",
    what: "quoted ragged preamble, one row per setting and one cell per channel, event counter",
    outcome: "read",
    bytes: utf8(
      lines([
        `"Start","'24-03-01 07:00:00"`,
        `"Ch","1-1","1-2",`,
        `"Range","500V","2 A",`,
        `"Note","node, at the switch","coil",`,
        `"Time","1-1[V]","1-2[A]","Event",`,
        ...rows((t, i) => ` ${exponent(t)}, ${a.text[i]}, ${b.text[i]},0,`),
      ]),
    ),
    records: [
      { names: ["1-1", "1-2", "Event"], units: ["V", "A", ""], ...two, ...ends(a.value, b.value, [0, 0]) },
    ],
    notes: ["time-unit-assumed"],
  },
  {
    shape: "S20",
    file: "s20-sample-numbers.csv",
    what: "only sample numbers: the interval is asked, never a second a sample",
    outcome: "asked",
    bytes: utf8(lines(["Sample,Node (V)", ...rows((_, i) => `${i},${a.text[i]}`)])),
    records: [{ names: ["Node"], units: ["V"], ...one, step_s: null, start_s: undefined }],
    notes: ["interval-unknown"],
  },
  {
    shape: "S20",
    file: "s20-answered.csv",
    what: "the same with the interval in the setup",
    outcome: "read",
    setup: { sampleInterval_s: 4e-6 },
    bytes: utf8(lines(["Sample,Node (V)", ...rows((_, i) => `${i},${a.text[i]}`)])),
    records: [{ names: ["Node"], units: ["V"], ...one, start_s: 0 }],
  },
];
