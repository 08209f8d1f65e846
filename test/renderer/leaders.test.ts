/** Leader lines cross neither the trace nor each other, notes never overlap: over seeded scenes. */
import { describe, expect, it } from "vitest";
import { skyline } from "../../renderer/draw/ink.ts";
import { laneOrder, leaderCorners, makeRoom, type Place } from "../../renderer/draw/leaders.ts";
import { linear } from "../../renderer/draw/scale.ts";
import { seeded } from "../reference/random.ts";

const width = 900;
const band = { top: 6, bottom: 400, gap: 11 };

/** A damped ring drawn a slot a pixel, with places on its ink. */
function scene(seed: number) {
  const random = seeded(seed).uniform;
  const time_s = Array.from({ length: width }, (_, at) => at);
  const decay = 0.001 + random() * 0.01;
  const turn = 0.02 + random() * 0.2;
  const value = time_s.map((at) => Math.exp(-decay * at) * Math.cos(turn * at + random()) * 100);
  const x = linear(0, width, 0, width);
  const y = linear(-120, 120, 360, 60);
  const sky = skyline(width, [{ time_s, low: value, high: value }], x, y);
  const places = Array.from({ length: 2 + Math.floor(random() * 7) }, (_, id): Place => {
    const column = Math.floor(random() * (width - 20)) + 5;
    const side = random() < 0.5 ? "above" : "below";
    return { id: String(id), x: column, y: side === "above" ? sky.top[column] : sky.bottom[column], side };
  });
  return { sky, places };
}

type Point = [number, number];

function crosses([a, b]: Point[], [c, d]: Point[]): boolean {
  const turn = (p: Point, q: Point, r: Point) =>
    (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0]);
  return turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0;
}

const segments = (corners: Point[]) => corners.slice(1).map((corner, at) => [corners[at], corner]);

describe("leader lines", () => {
  it("cross neither the ink right of their place nor another leader", () => {
    for (let seed = 1; seed <= 200; seed++) {
      const { sky, places } = scene(seed);
      const apart = places.filter(
        (place, at) => !places.slice(0, at).some((other) => Math.abs(other.x - place.x) < 2),
      );
      const lanes = laneOrder(apart, sky, { ...band, top: -1e4, bottom: 1e4 });
      const clear = lanes.every(({ x, lane, side }) => {
        const ink = (side === "above" ? sky.top : sky.bottom).subarray(Math.ceil(x) + 1);
        return side === "above" ? ink.every((edge) => lane < edge) : ink.every((edge) => lane > edge);
      });
      expect(clear, `seed ${seed}: a lane crosses the trace`).toBe(true);
      const tops = makeRoom(
        lanes.map(({ lane }) => ({ wish: lane - 8, height: 40 })),
        0,
        600,
        10,
      );
      const drawn = lanes.map((lane, at) =>
        segments(leaderCorners(lane, tops[at] + 10, width + 4, width + 40)),
      );
      const pairs = drawn.flatMap((one, at) => drawn.slice(at + 1).map((other) => [one, other]));
      const tangled = pairs.some(([one, other]) => one.some((a) => other.some((b) => crosses(a, b))));
      expect(tangled, `seed ${seed}: two leaders cross`).toBe(false);
    }
  });
});

describe("notes", () => {
  it("stand in order, apart, inside the margin, whatever they wish", () => {
    for (let seed = 1; seed <= 200; seed++) {
      const random = seeded(seed).uniform;
      const wishes = Array.from({ length: 8 }, () => random() * 600).toSorted((a, b) => a - b);
      const blocks = wishes.map((wish) => ({ wish, height: 20 + random() * 40 }));
      const tops = makeRoom(blocks, 0, 700, 10);
      tops.forEach((top, at) => {
        expect(top).toBeGreaterThanOrEqual(-1e-9);
        expect(top + blocks[at].height).toBeLessThanOrEqual(700 + 1e-9);
        if (at > 0) expect(top).toBeGreaterThanOrEqual(tops[at - 1] + blocks[at - 1].height + 10 - 1e-9);
      });
    }
  });

  it("stay where they wish when there is room, and share a collision evenly", () => {
    const free = [
      { wish: 10, height: 20 },
      { wish: 100, height: 20 },
    ];
    expect(makeRoom(free, 0, 200, 10)).toEqual([10, 100]);
    // Both wish 100: 30 apart, each 15 from its wish.
    const both = [
      { wish: 100, height: 20 },
      { wish: 100, height: 20 },
    ];
    expect(makeRoom(both, 0, 200, 10)).toEqual([85, 115]);
  });

  it("run over the lower end when they are too many, still apart", () => {
    const blocks = Array.from({ length: 5 }, () => ({ wish: 50, height: 50 }));
    expect(makeRoom(blocks, 0, 100, 10)).toEqual([0, 60, 120, 180, 240]);
  });
});
