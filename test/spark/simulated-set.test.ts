import { beforeAll, describe, expect, it } from "vitest";
import { scoreRun, sparkSet, tally, type Scored } from "../reference/spark-score.ts";
import { simulateRun } from "../reference/spark-set.ts";

/** A small part of the simulated set; the full one is in the slow suite and the bench. */
let scored: Scored[];
beforeAll(() => {
  scored = [...sparkSet(2, { seed: 40_000 })].flatMap(scoreRun);
}, 120_000);

describe("verdicts on a small simulated set, every trouble in it", () => {
  it("calls no quiet pulse a spark more than once in a hundred", () => {
    const { alarms, quiet } = tally(scored);
    expect(quiet).toBeGreaterThan(250);
    expect(alarms / quiet).toBeLessThanOrEqual(0.01);
  });

  it("finds the switch-offs there are, in every trouble", () => {
    const { missing, invented } = tally(scored);
    expect(missing / scored.length).toBeLessThanOrEqual(0.005);
    expect(invented / scored.length).toBeLessThanOrEqual(0.005);
  });

  it("trains with half of the pulses sparking: at least 95 % of strong sparks called", () => {
    const runs = (["plain", "coloured", "ac-coupled", "inverted"] as const).map((trouble) =>
      simulateRun(123, { trouble, pulses: 16, sparkShare: 0.5, kinds: ["first-rise", "late"], train: true }),
    );
    const { sparks, called, alarms } = tally(runs.flatMap(scoreRun));
    expect(sparks).toBeGreaterThan(20);
    expect(called / sparks).toBeGreaterThanOrEqual(0.95);
    expect(alarms).toBe(0);
  });

  it("all pulses sparking, or all but one: still called, and none of the one", () => {
    const run = simulateRun(321, {
      trouble: "plain",
      pulses: 16,
      sparkShare: 1,
      kinds: ["first-rise"],
      train: true,
    });
    const { sparks, called } = tally(scoreRun(run));
    expect(sparks).toBe(16);
    expect(called / sparks).toBeGreaterThanOrEqual(0.8);
  });

  it("all pulses sparking, some of them late: the rings before these are the quiet ones", () => {
    const runs = (["plain", "hum", "clipped"] as const).map((trouble) =>
      simulateRun(1 + 7919 * 22, {
        trouble,
        pulses: 12,
        sparkShare: 1,
        kinds: ["first-rise", "first-rise", "late", "low", "glow"],
        train: true,
      }),
    );
    const { sparks, called, invented } = tally(runs.flatMap(scoreRun));
    expect(sparks).toBeGreaterThan(30);
    expect(called).toBe(sparks);
    expect(invented).toBe(0);
  });

  it("a lull between the beats of two modes is no switch-off", () => {
    const run = simulateRun(1 + 7919 * 8, {
      trouble: "beating",
      pulses: 12,
      sparkShare: 0.5,
      kinds: ["late"],
      train: true,
    });
    const { missing, invented } = tally(scoreRun(run));
    expect([missing, invented]).toEqual([0, 0]);
  });
});
