/** S1, S2, S10, S12, S14: a block of numbers with at most names and units above it. */
import { current, ends, grid, lines, node, utf8, written, type ShapeFile } from "./shape.ts";

const count = 600;
const time = grid(-500, 2, count, 1e-6);
const a = written(time.map(node));
const b = written(time.map(current), 4);
const exponent = (value: number) => value.toExponential(6).toUpperCase();
const base = { outcome: "read" as const, shape: "", setup: undefined };
const two = { step_s: 2e-6, start_s: -5e-4, samples: count, ...ends(a.value, b.value) };
const rows = (join: (t: number, i: number) => string) => time.map(join);
const assumed = ["time-unit-assumed"];

export const plain: ShapeFile[] = [
  {
    ...base,
    shape: "S1",
    file: "s01-names.csv",
    what: "one names row, units in square brackets",
    bytes: utf8(
      lines(["Time [s],Node [V],Coil [A]", ...rows((t, i) => `${exponent(t)},${a.text[i]},${b.text[i]}`)]),
    ),
    records: [{ names: ["Node", "Coil"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S1",
    file: "s01-names-in.csv",
    what: "units as words behind the names, CR LF, milliseconds",
    bytes: utf8(
      lines(
        [
          "in ms,Node in kV,Coil in A",
          ...rows((t, i) => `${(t * 1e3).toFixed(4)},${(a.value[i] / 1000).toFixed(5)},${b.text[i]}`),
        ],
        "\r\n",
      ),
    ),
    records: [{ names: ["Node", "Coil"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S1",
    file: "s01-running-number.csv",
    what: "a running number before the time, S for seconds",
    bytes: utf8(lines(["Sample,Time(S),Node(V)", ...rows((t, i) => `${i},${exponent(t)},${a.text[i]}`)])),
    records: [{ names: ["Node"], units: ["V"], ...two, ...ends(a.value) }],
  },
  {
    ...base,
    shape: "S1",
    file: "s01-number-unnamed.csv",
    what: "a running number that the names row leaves out",
    bytes: utf8(lines(["Time(S),Node(V)", ...rows((t, i) => `${i},${exponent(t)},${a.text[i]}`)])),
    records: [{ names: ["Node"], units: ["V"], ...two, ...ends(a.value) }],
  },
  {
    ...base,
    shape: "S1",
    file: "s01-no-units.csv",
    what: "names without units",
    bytes: utf8(lines(["Time,A,B", ...rows((t, i) => `${exponent(t)},${a.text[i]},${b.text[i]}`)])),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two }],
    notes: [...assumed, "unit-guessed", "role-guessed"],
  },
  {
    ...base,
    shape: "S2",
    file: "s02-units-row.csv",
    what: "names row with an empty time name, units row, trailing separators",
    bytes: utf8(
      lines([",A,B", "Second,Volt,Ampere,", ...rows((t, i) => `${exponent(t)},${a.text[i]},${b.text[i]},`)]),
    ),
    records: [{ names: ["A", "B"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S2",
    file: "s02-numbers-as-names.csv",
    what: "channel numbers as names, a name of the axis that means something else",
    bytes: utf8(
      lines(["Source,1,4", "s,V,A", ...rows((t, i) => `${exponent(t)}, ${a.text[i]}, ${b.text[i]}, `)]),
    ),
    records: [{ names: ["1", "4"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S10",
    file: "s10-comments.csv",
    what: "comment lines that hold separators, a blank line, rate in the comments",
    bytes: utf8(
      lines([
        "#Rate: 500000 Hz",
        "#Input 1: range 50 V/div, offset 0 V, mode normal",
        "#Input 2: range 0.5 A/div, offset 0 A, mode normal",
        "",
        "Time (s),Input 1 (V),Input 2 (A)",
        ...rows((t, i) => `${t.toFixed(4)},${a.text[i]},${b.text[i]}`),
      ]),
    ),
    records: [{ names: ["Input 1", "Input 2"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S10",
    file: "s10-commented-names.dat",
    what: "names row behind a comment mark, blanks between the numbers",
    bytes: utf8(
      lines([
        "# t [s]  node [V]",
        ...rows((t, i) => `${exponent(t).padStart(14)}  ${a.text[i].padStart(9)}`),
      ]),
    ),
    records: [{ names: ["node"], units: ["V"], ...two, ...ends(a.value) }],
  },
  {
    ...base,
    shape: "S12",
    file: "s12-no-header.csv",
    what: "no header at all, semicolons",
    bytes: utf8(lines(rows((t, i) => `${exponent(t)};${a.text[i]}`))),
    records: [{ names: ["1"], units: ["V"], ...two, ...ends(a.value) }],
    notes: [...assumed, "unit-guessed"],
  },
  {
    ...base,
    shape: "S14",
    file: "s14-decimal-comma.csv",
    what: "decimal comma, units row in brackets with prefixes, blank line",
    bytes: utf8(
      lines([
        "Zeit;Kanal 1;Kanal 2",
        "(ms);(mV);(A)",
        "",
        ...rows((t, i) =>
          `${(t * 1e3).toFixed(5)};${(a.value[i] * 1000).toFixed(2)};${b.text[i]}`.replaceAll(".", ","),
        ),
      ]),
    ),
    records: [{ names: ["Kanal 1", "Kanal 2"], units: ["V", "A"], ...two }],
  },
  {
    ...base,
    shape: "S14",
    file: "s14-decimal-comma-tabs.txt",
    what: "decimal comma between tabs, names with units in another language",
    bytes: utf8(
      lines(
        [
          "Temps (µs)\tVoie A (V)",
          ...rows((t, i) => `${(t * 1e6).toFixed(1)}\t${a.text[i]}`.replaceAll(".", ",")),
        ],
        "\r\n",
      ),
    ),
    records: [{ names: ["Voie A"], units: ["V"], ...two, ...ends(a.value) }],
  },
];
