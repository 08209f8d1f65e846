/**
 * Notes in the margin and their leader lines. A leader leaves its place straight up or down, runs
 * along a lane clear of everything drawn to its right, and slants in the gutter to its note. Lanes
 * nest (the place farther left has the outer lane) and notes keep the lanes' order, so no leader
 * crosses the trace or another leader.
 */
import type { Skyline } from "./ink.ts";
import { clamp } from "./scale.ts";

export interface Place {
  id: string;
  x: number;
  y: number;
  side: "above" | "below";
}

export interface Lane extends Place {
  lane: number;
}

export interface LaneRoom {
  /** Pixels of the band the lanes may use. */
  top: number;
  bottom: number;
  /** Between lanes, and between a lane and the ink. */
  gap: number;
}

/** Lanes in the order their notes must stand, top to bottom. */
export function laneOrder(places: Place[], sky: Skyline, room: LaneRoom): Lane[] {
  const fromRight = places.toSorted((a, b) => b.x - a.x);
  const above = stack(fromRight, "above", sky, room).toReversed();
  const below = stack(fromRight, "below", sky, room);
  return [...above, ...below];
}

function stack(fromRight: Place[], side: Place["side"], sky: Skyline, { gap, ...room }: LaneRoom): Lane[] {
  const sign = side === "above" ? -1 : 1;
  const edge = side === "above" ? sky.top : sky.bottom;
  let outermost = side === "above" ? Infinity : -Infinity;
  const further = (a: number, b: number) => (side === "above" ? Math.min(a, b) : Math.max(a, b));
  const lanes: Lane[] = [];
  let column = edge.length - 1;
  let ink = outermost;
  let previous: number | null = null;
  for (const place of fromRight) {
    if (place.side !== side) continue;
    const stop = clamp(Math.floor(place.x) - 1, 0, edge.length - 1);
    for (; column >= stop; column--) ink = further(ink, edge[column]);
    outermost = further(ink, place.y) + sign * gap;
    if (previous !== null) outermost = further(outermost, previous + sign * gap);
    previous = clamp(outermost, room.top, room.bottom);
    lanes.push({ ...place, lane: previous });
  }
  return lanes;
}

/** Corners of a leader: up or down to its lane, along it to `turn`, slanting to its note at `stop`. */
export function leaderCorners(place: Lane, note_y: number, turn: number, stop: number): [number, number][] {
  return [
    [place.x, place.y],
    [place.x, place.lane],
    [turn, place.lane],
    [stop, note_y],
  ];
}

export interface Block {
  /** Where its first line would like to be. */
  wish: number;
  height: number;
}

/**
 * Tops of blocks stacked in their order without overlap inside [from, to], each as near its wish as
 * the others allow (least squares: neighbours that collide move as one). If all together are too
 * tall they run over the lower end.
 */
export function makeRoom(blocks: Block[], from: number, to: number, gap: number): number[] {
  const groups: { top: number; height: number; sum: number; members: number[] }[] = [];
  const total = blocks.reduce((sum, block) => sum + block.height, 0) + gap * Math.max(blocks.length - 1, 0);
  const place = (sum: number, count: number, height: number) =>
    clamp(sum / count, from, Math.max(to - height, from));
  blocks.forEach((block, index) => {
    let group = { top: 0, height: block.height, sum: block.wish, members: [index] };
    group.top = place(group.sum, 1, group.height);
    for (let last = groups.at(-1); last && last.top + last.height + gap > group.top; last = groups.at(-1)) {
      groups.pop();
      // A member's wish, seen from the group's top.
      const shift = last.height + gap;
      const members = [...last.members, ...group.members];
      const sum = last.sum + group.sum - group.members.length * shift;
      const height = shift + group.height;
      group = { top: place(sum, members.length, height), height, sum, members };
    }
    groups.push(group);
  });
  const tops: number[] = Array.from({ length: blocks.length });
  const overflow = total > to - from;
  let next = from;
  for (const group of groups) {
    let y = overflow ? next : group.top;
    for (const member of group.members) {
      tops[member] = y;
      y += blocks[member].height + gap;
    }
    next = y;
  }
  return tops;
}
