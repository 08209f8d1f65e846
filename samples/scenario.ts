/** What was done at the invented bench: ten single captures and one train. */
import { seeded } from "../test/reference/random.ts";
import type { Drive } from "../test/reference/simulate.ts";
import { decimalComma, keyLines, namesWithUnits, numbered, unitsRow, type Shape } from "./shapes.ts";

export interface Shot {
  file: string;
  shape: Shape;
  channels: ("node" | "current" | "secondary")[];
  drives: Drive[];
  end_s: number;
  step_s: number;
  /** Record time of the trigger: the file's zero. */
  trigger_s: number;
  seed: number;
  nodeScreen_V?: number;
  nodeCentre_V?: number;
}

const dwell_s = 1.5e-3;

function single(
  number: number,
  breakdown_V: number | null,
  shape: Shape,
  channels: Shot["channels"],
  { lag_s, ...extra }: Partial<Shot> & { lag_s?: number } = {},
): Shot {
  const on_s = 0.4e-3;
  return {
    file: `pulse-${String(number).padStart(2, "0")}.csv`,
    shape,
    channels,
    drives: [{ on_s, off_s: on_s + dwell_s, breakdown_V, lag_s }],
    end_s: 9e-3,
    step_s: 1e-6,
    trigger_s: on_s + dwell_s,
    seed: number,
    ...extra,
  };
}

/** 44 pulses, 6 ms apart: the gap's strength wanders, and now and then it does not strike at all. */
function train(): Shot {
  const random = seeded(47);
  const period_s = 6e-3;
  const drives = Array.from({ length: 44 }, (_, i) => {
    const on_s = 0.5e-3 + i * period_s;
    const misfires = random.uniform() < 0.22;
    return {
      on_s,
      off_s: on_s + dwell_s,
      breakdown_V: misfires ? null : 9500 + 60 * i + 900 * random.normal(),
    };
  });
  return {
    file: "train.csv",
    shape: namesWithUnits(4),
    channels: ["node", "current"],
    drives,
    end_s: 44 * period_s + 1e-3,
    step_s: 4e-6,
    trigger_s: drives[0].off_s,
    seed: 45,
  };
}

export const scenario: Shot[] = [
  single(1, 11_200, namesWithUnits(), ["node", "current"]),
  single(2, 12_900, namesWithUnits(), ["node", "current"]),
  single(3, null, namesWithUnits(), ["node", "current"]),
  single(4, 10_400, unitsRow, ["node", "secondary"]),
  single(5, 8_600, decimalComma, ["node"]),
  single(6, null, unitsRow, ["node", "secondary"]),
  single(7, null, keyLines, ["node"], { nodeScreen_V: 400, nodeCentre_V: 0 }),
  single(8, 9_000, namesWithUnits(), ["node", "current"], { lag_s: 1.31e-3 }),
  single(9, null, numbered, ["node", "current"]),
  single(10, 13_800, unitsRow, ["node", "current", "secondary"]),
  train(),
];
