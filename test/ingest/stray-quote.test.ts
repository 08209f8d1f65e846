import { expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";

const rows = Array.from(
  { length: 200 },
  (_, k) => ` ${((k - 20) * 4e-6).toExponential(3)}, ${(k % 17) / 4},`,
);
const read = (lines: string[]) => ingestBytes(new TextEncoder().encode(lines.join("\n")), {});

it("a quote that is left over in the header and one among the samples swallow no lines between them", () => {
  const damaged = rows.with(14, rows[14].replace(", ", ', "'));
  const [{ timebase, channels }] = read(['switch","coil",', '"Time [s]","1-1[V]",', ...damaged]);
  expect(timebase.samples).toBe(200);
  expect(timebase.start_s).toBeCloseTo(-20 * 4e-6, 12);
  expect(channels).toHaveLength(1);
});

it("two stray quotes among the samples swallow no lines between them", () => {
  const damaged = rows.with(3, rows[3].replace(" ", '"')).with(9, rows[9].replace(" ", '"'));
  const [{ timebase, channels }] = read(["Time [s],Node [V],", ...damaged]);
  expect(timebase.samples).toBe(200);
  expect(timebase.step_s).toBeCloseTo(4e-6, 12);
  expect(channels[0].samples[6]).toBe(6 / 4);
});

it("a quoted name may run over lines (RFC 4180, section 2.6)", () => {
  const [{ channels }] = read(['Time [s],"Node', 'at the switch [V]",', ...rows]);
  expect(channels.map(({ name, unit }) => [name, unit])).toEqual([["Node at the switch", "V"]]);
});
