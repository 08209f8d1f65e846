import { closeSync, openSync, writeSync } from "node:fs";

/** Writes a capture of at least `bytes`: time, switch node and coil current, invented; answers its rows. */
export function writeCapture(path: string, bytes: number): number {
  const file = openSync(path, "w");
  let written = writeSync(file, "Time [s],Node [V],Coil [A]\n");
  let rows = 0;
  // Values repeat every pulse: computed once, only the times go on.
  const values = Array.from({ length: 20_000 }, (_, i) => {
    const ring = 300 * Math.exp(-i / 4000) * Math.sin(i / 50);
    return `,${(12 + ring).toFixed(4)},${(3 * Math.sin(i / 77)).toFixed(5)}\n`;
  });
  while (written < bytes) {
    const block = values.map((value, i) => ((rows + i - 500_000) * 1e-7).toExponential(6) + value);
    written += writeSync(file, block.join(""));
    rows += block.length;
  }
  closeSync(file);
  return rows;
}
