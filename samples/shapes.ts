/** The export shapes the demo run is written in: generic ones, as text with the precision a scope prints. */

export interface Column {
  name: string;
  unit: string;
  samples: Float64Array;
  /** Digits after the point. */
  digits: number;
}

export interface Table {
  start_s: number;
  step_s: number;
  columns: Column[];
}

export type Shape = (table: Table) => string;

const length = (table: Table) => table.columns[0].samples.length;

function rows(table: Table, line: (i: number) => string): string {
  return Array.from({ length: length(table) }, (_, i) => line(i)).join("\n") + "\n";
}

const values = (table: Table, i: number) =>
  table.columns.map(({ samples, digits }) => samples[i].toFixed(digits));

/** One row of names with the units in brackets; `digits` of the time column's mantissa may be few. */
export const namesWithUnits =
  (digits = 6): Shape =>
  (table) =>
    ["Time [s]", ...table.columns.map(({ name, unit }) => `${name} [${unit}]`)].join(",") +
    "\n" +
    rows(table, (i) =>
      [(table.start_s + i * table.step_s).toExponential(digits), ...values(table, i)].join(","),
    );

/** A row of names, a row of units, a comma at the end of each line. */
export const unitsRow: Shape = (table) =>
  ["", ...table.columns.map(({ name }) => name)].join(",") +
  "\n" +
  ["Second", ...table.columns.map(({ unit }) => (unit === "A" ? "Ampere" : "Volt"))].join(",") +
  ",\n" +
  rows(
    table,
    (i) => [(table.start_s + i * table.step_s).toExponential(6), ...values(table, i)].join(",") + ",",
  );

/** Running number; start and step stand in the units row. */
export const numbered: Shape = (table) =>
  ["N", ...table.columns.map(({ name }) => name), "Origin", "Step", ""].join(",") +
  "\n" +
  [
    "Count",
    ...table.columns.map(({ unit }) => (unit === "A" ? "Ampere" : "Volt")),
    table.start_s.toExponential(3),
    table.step_s.toExponential(3),
  ].join(",") +
  "\n" +
  rows(table, (i) => [i, ...values(table, i)].join(",") + ",");

/** Lines of key and value, a marker line, then data without names (one channel). */
export const keyLines: Shape = (table) =>
  [
    `Points,${length(table)},`,
    `Input,${table.columns[0].name},`,
    `Unit,${table.columns[0].unit},`,
    `Sample Interval,${table.step_s.toExponential(3)},`,
    "Samples follow,",
  ].join("\n") +
  "\n" +
  rows(
    table,
    (i) => [(table.start_s + i * table.step_s).toExponential(6), ...values(table, i)].join(",") + ",",
  );

/** Semicolons, decimal commas, time in milliseconds, a row of units in brackets and a blank line. */
export const decimalComma: Shape = (table) =>
  ["Zeit", ...table.columns.map(({ name }) => name)].join(";") +
  "\n" +
  ["(ms)", ...table.columns.map(({ unit }) => `(${unit})`)].join(";") +
  "\n\n" +
  rows(table, (i) =>
    [((table.start_s + i * table.step_s) * 1e3).toFixed(5), ...values(table, i)]
      .join(";")
      .replaceAll(".", ","),
  );
