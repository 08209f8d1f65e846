/** What the setup card asks about, and what it makes of an entry. */
import { describe, expect, it } from "vitest";
import type { CaptureReading, ChannelReading } from "../../analysis/reading-format.ts";
import { parseSetup } from "../../analysis/setup/parse.ts";
import { setupSchema } from "../../analysis/setup/schema.ts";
import { unitPart, withChannel } from "../../renderer/setup/channels.ts";
import { doubts } from "../../renderer/setup/doubts.ts";
import { allFields } from "../../renderer/setup/fields.ts";
import { draftOf, readDraft, shownValue } from "../../renderer/setup/value.ts";

const field = (key: string) => allFields.find((field) => field.key === key)!;
const channel = (part: Partial<ChannelReading>) =>
  ({
    name: "CH1",
    role: "switch-node",
    unit: "V",
    scale: 1,
    maximum: 310,
    minimum: -290,
    ...part,
  }) as ChannelReading;
const reading = (...channels: ChannelReading[]) => ({ channels, pulses: [] as unknown }) as CaptureReading;

describe("implausible entries", () => {
  it("a capacitor of 330 mF is questioned, with the prefixes that may have been meant", () => {
    const [doubt] = doubts({ capacitor_F: { value: 0.33e-3, tolerance: 0.05 } }, null);
    expect(doubt.text).toContain("330\u00a0µF");
    expect(doubt.offers.map((offer) => offer.words)).toContain("I meant 330\u00a0nF");
    const [offer] = doubt.offers;
    expect(offer.change).toEqual({ capacitor_F: { value: 3.3e-7, tolerance: 0.05 } });
  });

  it("a usual entry is not", () => {
    expect(doubts({ capacitor_F: 3.3e-7, supply_V: 12, switchRating_V: 600 }, null)).toEqual([]);
  });

  it("a 10× probe stated on top of the scope's own factor is questioned where it passes the rating", () => {
    const setup = { switchRating_V: 600, channels: [{ name: "CH1", scale: 10 }] };
    const [doubt] = doubts(setup, reading(channel({ scale: 10, maximum: 3100, minimum: -2900 })));
    expect(doubt.text).toContain("3.10\u00a0kV");
    expect(doubt.text).toContain("310\u00a0V");
    expect(doubt.offers[0].change).toEqual({ channels: [{ name: "CH1", scale: 1 }] });
    expect(doubts(setup, reading(channel({ scale: 10 })))).toEqual([]);
  });
});

describe("a probe's factor", () => {
  /** A ring that settles to this level: at the switch node that is the supply. */
  const resting = (offset: number, part: Partial<ChannelReading>) =>
    ({
      channels: [channel(part)],
      pulses: [{ ring: { channel: "CH1", quality: "good", offset } }],
    }) as CaptureReading;

  it("counted twice is questioned by the level the ring settles to, without any rating", () => {
    const [doubt] = doubts({ supply_V: 12 }, resting(121, { scale: 10, maximum: 3100 }));
    expect(doubt.text).toContain("121\u00a0V");
    expect(doubt.offers[0].change).toEqual({ channels: [{ name: "CH1", scale: 1 }] });
    expect(doubts({ supply_V: 12 }, resting(11.6, { scale: 10 }))).toEqual([]);
  });

  it.each([
    [1.21, 10],
    [0.118, 100],
  ])("that is missing (%d V at rest) is offered", (level, factor) => {
    const [doubt] = doubts({ supply_V: 12 }, resting(level, { maximum: 31 }));
    expect(doubt.offers[0].change).toEqual({ channels: [{ name: "CH1", scale: factor }] });
  });

  it("is not doubted where the supply is at rest, or nothing is known of it", () => {
    expect(doubts({ supply_V: 12 }, resting(12.2, {}))).toEqual([]);
    expect(doubts({}, resting(1.2, {}))).toEqual([]);
  });
});

describe("fields", () => {
  it("are the schema's own, all but those with a row of their own", () => {
    const ownRow = ["format", "run", "gap", "channels"];
    const known = Object.keys(setupSchema.entries).filter((key) => !ownRow.includes(key));
    expect(allFields.map((field) => field.key).toSorted()).toEqual(known.toSorted());
  });

  it("give back what they show", () => {
    const setup = parseSetup({
      capacitor_F: { value: 3.3e-7, tolerance: 0.05 },
      supply_V: 12,
      airPressure_Pa: 98_500,
      windingTemperature_C: -4,
      expected: "spark",
      coil: "A",
    });
    for (const key of [
      "capacitor_F",
      "supply_V",
      "airPressure_Pa",
      "windingTemperature_C",
      "expected",
      "coil",
    ] as const)
      expect(readDraft(field(key), draftOf(field(key), setup), setup)).toEqual({ value: setup[key] });
    expect(shownValue(field("capacitor_F"), setup)).toBe("330\u00a0nF ± 5\u00a0%");
  });

  it("take an empty entry as a statement taken back, and say what is wrong with another", () => {
    expect(readDraft(field("supply_V"), { text: " ", tolerance: "" }, {})).toEqual({ value: null });
    expect(readDraft(field("supply_V"), { text: "twelve", tolerance: "" }, {})).toHaveProperty("problem");
    expect(readDraft(field("capacitor_F"), { text: "330n", tolerance: "500" }, {})).toHaveProperty("problem");
  });

  it("question an absurd size with what may have been meant: 330 mF", () => {
    const read = readDraft(field("capacitor_F"), { text: "330 mF", tolerance: "" }, {});
    expect(read).toEqual({ problem: "330\u00a0mF can’t be meant. Did you mean 330\u00a0nF or 330\u00a0pF?" });
  });

  it("keep a stated coverage factor when the value changes", () => {
    const before = { capacitor_F: { value: 3.3e-7, tolerance: 0.02, k: 2 } };
    expect(readDraft(field("capacitor_F"), { text: "340n", tolerance: "2" }, before)).toEqual({
      value: { value: 3.4e-7, tolerance: 0.02, k: 2 },
    });
  });
});

describe("a statement about one column", () => {
  it("joins what is stated of it, and leaves the others alone", () => {
    const setup = {
      channels: [
        { name: "A", role: "gate" as const },
        { position: 1, scale: 10 },
      ],
    };
    expect(withChannel(setup, "B", 1, { unit: "V" })).toEqual([
      { name: "A", role: "gate" },
      { position: 1, scale: 10, unit: "V" },
    ]);
    expect(withChannel(setup, "C", 2, { unit: "A" })).toHaveLength(3);
    expect(withChannel({}, "C", null, { unit: "A" })).toEqual([{ name: "C", unit: "A" }]);
  });

  it("takes a prefixed unit as the plain unit and a factor", () => {
    expect(unitPart("V")).toEqual({ unit: "V" });
    expect(unitPart("mV")).toEqual({ unit: "V", scale: 1e-3 });
    expect(unitPart("mA")).toEqual({ unit: "A", scale: 1e-3 });
  });
});
