import { describe, expect, it } from "vitest";
import { courseOf } from "../../app/host/view/course.ts";
import type { CaptureDetail } from "../../app/bridge.ts";

interface Shot {
  at: number | null;
  verdict?: "spark" | "no-spark";
  ruled?: "spark" | "no-spark";
  onset_s?: number;
  breakdown_V?: number;
  from?: "secondary" | "ratio";
  q?: number;
}

/** A capture as the book holds it, with what a course is made of. */
function capture(time: string | null, shots: Shot[]): CaptureDetail {
  const pulses = shots.map(
    ({ at, verdict = "no-spark", ruled, onset_s, breakdown_V, from = "secondary", q }) => ({
      switchOffTime_s: at,
      ring: q === undefined ? null : { modes: [{ q: { value: q, u: 0.1 } }] },
      ruled: ruled ? { verdict: ruled, at: "", remark: "" } : null,
      spark: {
        verdict,
        onset_s: onset_s ?? null,
        breakdown_V: breakdown_V ?? null,
        breakdownFrom: from,
      },
      u: {},
    }),
  );
  return { reading: { record: { index: 0, count: 1, time }, pulses } } as unknown as CaptureDetail;
}

describe("the course of a run", () => {
  it("counts time along one record, and between records by their clocks, past midnight too", () => {
    expect(courseOf([capture(null, [{ at: 0.5 }, { at: 0.75 }])], null).time_s).toEqual([0, 0.25]);
    const clocked = ["04-May 23:59:58", "04-May 23:59:59.5", "05-May 00:00:01"].map((time) =>
      capture(time, [{ at: 0.001 }]),
    );
    expect(courseOf(clocked, null).time_s).toEqual([0, 1.5, 3]);
  });

  it("has no time where a record has no clock or a switch-off came before its record", () => {
    const withClock = capture("10:11:12", [{ at: 0 }]);
    expect(courseOf([withClock, capture(null, [{ at: 0 }])], null).time_s).toBeNull();
    expect(courseOf([withClock, capture("7 of 9", [{ at: 0 }])], null).time_s).toBeNull();
    expect(courseOf([capture(null, [{ at: null }, { at: 1 }])], null).time_s).toBeNull();
  });

  it("gives onsets after the switch-off and breakdowns in the order of the pulses, null where none was", () => {
    const spark = { verdict: "spark" as const, onset_s: 0.0625, breakdown_V: 9000 };
    const course = courseOf([capture(null, [{ at: 0 }, { at: 0.03125, ...spark }])], null);
    expect(course).toMatchObject({ onset_s: [null, 0.03125], breakdown_V: [null, 9000] });
    expect(course.breakdownFrom).toBe("secondary");
  });

  it("never mixes measured breakdowns with referred ones: the measured where three are there, else the more", () => {
    const shots = (measured: number, referred: number) =>
      Array.from({ length: measured + referred }, (_, at): Shot => {
        const from = at < measured ? "secondary" : "ratio";
        return { at, verdict: "spark", onset_s: at, breakdown_V: 8000 + at, from };
      });
    const told = (measured: number, referred: number) => {
      const { breakdownFrom, breakdown_V } = courseOf([capture(null, shots(measured, referred))], null);
      return [breakdownFrom, breakdown_V.filter((value) => value !== null).length];
    };
    expect(told(3, 30)).toEqual(["secondary", 3]);
    expect(told(2, 30)).toEqual(["ratio", 30]);
    expect(told(2, 2)).toEqual(["secondary", 2]);
    expect(told(0, 2)).toEqual(["ratio", 2]);
    expect(told(0, 0)).toEqual([null, 0]);
  });

  it("follows the user's verdict", () => {
    const ruled = { verdict: "spark", ruled: "no-spark", onset_s: 1, breakdown_V: 9000 } as const;
    const course = courseOf([capture(null, [{ at: 0, ...ruled }])], null);
    expect(course).toMatchObject({ onset_s: [null], breakdown_V: [null], breakdownFrom: null });
  });

  it("names the pulse at which the quiet ring's Q changes, sparks between counted", () => {
    const shots: Shot[] = [];
    for (let at = 0; at < 20; at++)
      shots.push(
        at % 5 === 4
          ? { at, verdict: "spark", onset_s: at }
          : { at, q: (at < 10 ? 24 : 17) + 0.01 * (at % 3) },
      );
    const { qChange, breakdownChange } = courseOf([capture(null, shots)], null);
    expect(qChange).toMatchObject({ number: 11 });
    expect(qChange!.before).toBeCloseTo(24, 1);
    expect(qChange!.after).toBeCloseTo(17, 1);
    expect(breakdownChange).toBeNull();
  });
});
