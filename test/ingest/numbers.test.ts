/** Every number equals Number() of its text to the last bit: a million spelled numbers of every style. */
import { expect, it } from "vitest";
import { parseBulk, type BulkPlan } from "../../analysis/ingest/index.ts";
import { seeded } from "../reference/random.ts";

const plan: BulkPlan = {
  separator: 44,
  format: { decimal: ".", thousands: null },
  width: 4,
  cells: 4,
  filled: 4,
  columns: [0, 1, 2, 3],
  symbols: [],
  keepEmptyRows: false,
  joinCommas: false,
};

const styles: ((random: () => number) => string)[] = [
  (random) => ((random() - 0.5) * 2000).toFixed(Math.floor(random() * 8)),
  (random) =>
    ((random() - 0.5) * 10 ** Math.floor(random() * 40 - 20)).toExponential(Math.floor(random() * 17)),
  (random) => String((random() - 0.5) * 10 ** Math.floor(random() * 60 - 30)),
  (random) => String(Math.floor(random() * 2 ** 53) * (random() < 0.5 ? 1 : -1)),
  (random) =>
    `${random() < 0.5 ? "+" : "-"}${(random() * 999).toFixed(3)}E${random() < 0.5 ? "+" : "-"}${String(Math.floor(random() * 25)).padStart(3, "0")}`,
  (random) => `00.${String(Math.floor(random() * 1e7)).padStart(7, "0")}`,
  (random) => `.${Math.floor(random() * 1e9)}`,
  (random) => `${Math.floor(random() * 1e5)}.`,
  (random) => Array.from({ length: 17 + Math.floor(random() * 9) }, () => Math.floor(random() * 10)).join(""),
  (random) => `${random()}e${Math.floor(random() * 640 - 330)}`,
  () => "-0.0",
];

it("agrees with Number() for 10⁶ numbers", () => {
  const random = seeded(20261201).uniform;
  const spelled = Array.from({ length: 1_000_000 }, () =>
    styles[Math.floor(random() * styles.length)](random),
  );
  const text: string[] = [];
  for (let i = 0; i < spelled.length; i += 4) text.push(spelled.slice(i, i + 4).join());
  const { rows, values } = parseBulk(new TextEncoder().encode(`${text.join("\n")}\n`), plan);
  expect(rows).toBe(250_000);
  const differing = spelled.filter((number, i) => {
    const expected = Number(number);
    return !Object.is(values[i % 4][i >> 2], expected);
  });
  expect(differing.slice(0, 5)).toEqual([]);
});

it("gives NaN for what is no number and ±∞ for what is over range, and says which", () => {
  const cells = [
    "",
    "nan",
    "inf",
    "-INF",
    "1.#QNAN",
    "9.9E37",
    "9.91E37",
    "OL",
    "abc",
    "1.2.3",
    "--",
    "1e",
    "+",
  ];
  const { values, tallies } = parseBulk(
    new TextEncoder().encode(cells.map((cell) => `1,2,3,${cell}`).join("\n")),
    plan,
  );
  expect([...values[3]]).toEqual([
    NaN,
    NaN,
    Infinity,
    -Infinity,
    NaN,
    Infinity,
    NaN,
    Infinity,
    NaN,
    NaN,
    NaN,
    NaN,
    NaN,
  ]);
  expect(tallies[3]).toEqual({ blank: 1, missing: 4, over: 4, text: 4 });
});

it("reads the same whatever ends the lines", () => {
  const rows = ["1,2,3,4", "-5,6e-3,+7,8"];
  const read = (end: string) =>
    parseBulk(new TextEncoder().encode(rows.join(end) + end), plan).values.map((column) => [...column]);
  for (const end of ["\r\n", "\r", "\r\r\n"]) expect(read(end)).toEqual(read("\n"));
});
