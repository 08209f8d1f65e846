/** S11, S15, S17–S19: several records in a file, envelopes, and what is no waveform. */
import { ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 200;
const time = grid(-300, 10, count, 1e-6);
const shots = [1, 0.9, 0.95].map((size) => written(time.map((t) => node(t) * size)));
const exponent = (value: number) => value.toExponential(4);
const record = (i: number) => ({
  names: ["y"],
  units: ["V"],
  step_s: 1e-5,
  start_s: -3e-4,
  samples: count,
  ...ends(shots[i].value),
});
const block = (i: number) => time.map((t, k) => `${exponent(t)},${shots[i].text[k]}`);
const pairs = { low: written(time.map((t) => node(t) - 1)), high: written(time.map((t) => node(t) + 1)) };
const words = ["X", "h3A", "h3B", "h7F"];
const many = Array.from({ length: 20 }, (_, k) => written(time.map((t) => node(t) * (1 - k / 100))));
const rate = { setup: { sampleInterval_s: 1e-5 } };
const traces = lines(
  shots.map(({ text }, i) =>
    [`${["AF01", "19C4", "12E4"][i]},${["77E2", "0B3D", "E5A1"][i]}`, ...text].join(","),
  ),
);

export const records: ShapeFile[] = [
  {
    shape: "S11",
    file: "s11-segments-table.csv",
    what: "a table of segments above, time starts over: three records",
    outcome: "read",
    bytes: utf8(
      lines([
        `Segments,3,Points,${count}`,
        "Segment,When,Since first",
        "#1,04-May 10:11:12,0",
        "#2,04-May 10:11:13,0.7512",
        "#3,04-May 10:11:15,2.9044",
        "t,y",
        ...[0, 1, 2].flatMap(block),
      ]),
    ),
    records: [0, 1, 2].map(record),
    notes: ["time-unit-assumed"],
  },
  {
    shape: "S11",
    file: "s11-repeated-header.csv",
    what: "marker and names row before each event",
    outcome: "read",
    bytes: utf8(lines([0, 1, 2].flatMap((i) => [`Event ${i + 1}`, "t (s),y (V)", ...block(i)]))),
    records: [0, 1, 2].map(record),
  },
  {
    shape: "S11",
    file: "s11-time-restarts.csv",
    what: "no marker at all, time jumps back",
    outcome: "read",
    bytes: utf8(lines(["t (s),y (V)", ...[0, 1, 2].flatMap(block)])),
    records: [0, 1, 2].map(record),
  },
  {
    shape: "S11",
    file: "s11-packets.csv",
    what: "packets of two rows that restart are no record",
    outcome: "refused",
    refused: "restarting-packets",
    bytes: utf8(
      lines([
        "t (s),y (V)",
        ...time.flatMap((_, i) => [`0.0,${shots[0].text[i]}`, `1.0e-5,${shots[1].text[i]}`]),
      ]),
    ),
    records: [],
  },
  {
    shape: "S15",
    file: "s15-envelope-pairs.csv",
    what: "every time twice: lowest and highest",
    outcome: "read",
    bytes: utf8(
      lines([
        "t (s),y (V)",
        ...time.flatMap((t, i) => [
          `${exponent(t)},${pairs.low.text[i]}`,
          `${exponent(t)},${pairs.high.text[i]}`,
        ]),
      ]),
    ),
    records: [
      {
        ...record(0),
        names: ["y low", "y high"],
        units: ["V", "V"],
        ...ends(pairs.low.value, pairs.high.value),
      },
    ],
    acquisition: ["peak-detect"],
  },
  {
    shape: "S15",
    file: "s15-twin-columns.csv",
    what: "twin columns of a peak-detecting recorder",
    outcome: "read",
    bytes: utf8(
      lines([
        "TIME (s),A (V),A peak (V)",
        ...time.map((t, i) => `${exponent(t)},${pairs.low.text[i]},${pairs.high.text[i]}`),
      ]),
    ),
    records: [
      { ...record(0), names: ["A", "A peak"], units: ["V", "V"], ...ends(pairs.low.value, pairs.high.value) },
    ],
    acquisition: ["peak-detect"],
  },
  {
    shape: "S17",
    file: "s17-spectrum.csv",
    what: "a spectrum in the clothes of a capture",
    outcome: "refused",
    refused: "spectrum",
    bytes: utf8(
      lines(
        time.map(
          (_, i) =>
            `${["Source,MATH", "Sample Interval,25", "Horizontal Units,Hz"][i] ?? ","},,${i * 25},${(-40 - i / 10).toFixed(1)}`,
        ),
      ),
    ),
    records: [],
  },
  {
    shape: "S18",
    file: "s18-symbols.csv",
    what: "bus words and a logic line beside a channel",
    outcome: "read",
    bytes: utf8(
      lines([
        "Time (s),BUS,D0,y (V)",
        ...time.map((t, i) => `${exponent(t)},${words[i % 4]},${i % 2},${shots[0].text[i]}`),
      ]),
    ),
    records: [
      {
        ...record(0),
        names: ["BUS", "D0", "y"],
        units: ["", "", "V"],
        first: [NaN, 0, shots[0].value[0]],
        last: [0x7f, 1, shots[0].value[count - 1]],
      },
    ],
    notes: ["symbol-column"],
  },
  {
    shape: "S19",
    file: "s19-wide.csv",
    what: "many columns of like range: channels or shots is asked",
    outcome: "asked",
    bytes: utf8(
      lines([
        ["time (s)", ...many.map((_, k) => `c${k}`)].join(),
        ...time.map((t, i) => [exponent(t), ...many.map(({ text }) => text[i])].join()),
      ]),
    ),
    records: [
      {
        ...record(0),
        names: many.map((_, k) => `c${k}`),
        units: many.map((_, k) => (k === 0 ? "V" : "")),
        ...ends(...many.map(({ value }) => value)),
      },
    ],
    notes: ["wide-columns"],
  },
  {
    shape: "S19",
    file: "s19-wide-shots.csv",
    what: "the same, stated to be shots: a record each",
    outcome: "read",
    setup: { wide: "shots" },
    bytes: utf8(
      lines([
        ["time (s)", ...many.map((_, k) => `c${k}`)].join(),
        ...time.map((t, i) => [exponent(t), ...many.map(({ text }) => text[i])].join()),
      ]),
    ),
    records: many.map(({ value }, k) => ({ ...record(0), names: [`c${k}`], ...ends(value) })),
  },
  {
    shape: "S19",
    file: "s19-trace-per-row.csv",
    what: "one trace a row, no time: the interval is asked",
    outcome: "asked",
    bytes: utf8(traces),
    records: shots.map(({ value }, i) => ({
      ...record(i),
      names: [["AF01 77E2", "19C4 0B3D", "12E4 E5A1"][i]],
      step_s: null,
      start_s: undefined,
      ...ends(value),
    })),
    notes: ["interval-unknown"],
  },
  {
    shape: "S19",
    file: "s19-trace-per-row-answered.csv",
    what: "the same with the interval in the setup",
    outcome: "read",
    ...rate,
    bytes: utf8(traces),
    records: shots.map(({ value }, i) => ({
      ...record(i),
      names: [["AF01 77E2", "19C4 0B3D", "12E4 E5A1"][i]],
      start_s: 0,
      ...ends(value),
    })),
  },
];
