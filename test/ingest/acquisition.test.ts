/** How a record was taken, told from simulated waveforms (closed-form ring, the scope model of test/reference). */
import { describe, expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { seeded } from "../reference/random.ts";
import { digitise, type ScopeInput } from "../reference/simulate-scope.ts";

interface Take {
  step_s: number;
  from_s: number;
  to_s: number;
  scope?: Partial<ScopeInput>;
  header?: string;
}

const dwell_s = 4e-3;

function take({ step_s, from_s, to_s, scope, header = "" }: Take): Uint8Array {
  const count = Math.round((to_s - from_s) / step_s);
  const signal = Float64Array.from({ length: count }, (_, i) => {
    const t = from_s + i * step_s;
    if (t < -dwell_s) return 12;
    if (t < 0) return 0.4 + 0.1 * (t / dwell_s + 1);
    return 12 + 60 * Math.exp(-500 * t) * Math.sin(2 * Math.PI * 3400 * t);
  });
  const seen = digitise(signal, step_s, { screen: 160, centre: 0, noise: 0.4, ...scope }, seeded(7));
  const rows = [...seen].map((value, i) => `${(from_s + i * step_s).toFixed(8)},${value.toFixed(3)}`);
  return new TextEncoder().encode(`${header}Time (s),Switch node (V)\n${rows.join("\n")}\n`);
}

const whole = { step_s: 5e-6, from_s: -6e-3, to_s: 12e-3 };
const codes = (settings: Take) => ingestBytes(take(settings), {})[0].acquisition;

describe("acquisition codes", () => {
  it.each<[string, Take, string[]]>([
    ["directly coupled, well sampled: nothing to say", whole, []],
    [
      "AC coupled, 10 Hz corner: the conduction's level sags",
      { ...whole, scope: { acCoupling_s: 0.016 } },
      ["ac-coupled"],
    ],
    ["AC coupling named in the header", { ...whole, header: "#Coupling: AC\n" }, ["ac-coupled"]],
    ["DC coupling named in the header", { ...whole, header: "#Coupling: DC\n" }, []],
    ["averaging named in the header", { ...whole, header: "#Acquire mode: Average 16\n" }, ["averaged"]],
    [
      "peak detection named in the header",
      { ...whole, header: "#Acquisition: Peak Detect\n" },
      ["peak-detect"],
    ],
    ["four samples a cycle", { ...whole, step_s: 7e-5, from_s: -8e-3, to_s: 16e-3 }, ["undersampled"]],
    ["the trigger came late: the record begins in the ring", { ...whole, from_s: 1e-4 }, ["starts-in-ring"]],
  ])("%s", (_, settings, expected) => {
    expect(codes(settings)).toEqual(expected);
  });

  it("says each code in a note", () => {
    const [capture] = ingestBytes(take({ ...whole, from_s: 1e-4 }), {});
    expect(capture.notes.map(({ code }) => code)).toContain("starts-in-ring");
  });
});
