/** Where everything of the pulse's figure stands: panels under each other, notes in the margin. */
import type { TraceWindow } from "../../app/bridge.ts";
import { skyline, type Skyline } from "../draw/ink.ts";
import { laneOrder, makeRoom, type Lane, type Place } from "../draw/leaders.ts";
import { wrap, type Face } from "../draw/lines.ts";
import type { Scale } from "../draw/scale.ts";
import type { MarginNote } from "./notes.ts";
import type { Span } from "./window.ts";

export const faces: { title: Face; text: Face } = {
  title: {
    font: "600 15px 'Iowan Old Style', 'Palatino Linotype', Palatino, 'DejaVu Serif', serif",
    lineHeight: 19,
  },
  text: {
    font: "13px 'Iowan Old Style', 'Palatino Linotype', Palatino, 'DejaVu Serif', serif",
    lineHeight: 17,
  },
};

export interface Frame {
  width: number;
  plotWidth: number;
  /** Left edge of the notes; null where they stand below instead. */
  notesX: number | null;
  notesWidth: number;
}

const narrowBelow = 860;
const gutter = 44;

export function frameFor(width: number): Frame {
  if (width < narrowBelow) return { width, plotWidth: width, notesX: null, notesWidth: width };
  const notesWidth = Math.min(Math.max(width * 0.26, 250), 340);
  return { width, plotWidth: width - notesWidth - gutter, notesX: width - notesWidth, notesWidth };
}

export interface PlacedNote {
  note: MarginNote;
  number: number;
  title: string[];
  text: string[];
  /** Top of its first line, in the figure; 0 where notes stand below. */
  top: number;
  /** null: its place is not in view. */
  lane: Lane | null;
}

export interface PanelBand {
  top: number;
  bottom: number;
}

/** The instant's ink: upper and lower end of the trace in its slot, in pixels. */
export interface Ink {
  time_s: number;
  top: number;
  bottom: number;
}

const searchPeriods = 0.6;

/** Near `at`, the slot whose ink reaches farthest to that side (a trough for "below"). */
function extreme(trace: TraceWindow, at: number, reach: number, y: Scale, side: Place["side"]): Ink | null {
  let found: Ink | null = null;
  trace.time_s.forEach((time_s, index) => {
    const [low, high] = [trace.low[index], trace.high[index]];
    if (low === null || high === null || Math.abs(time_s - at) > reach) return;
    const ink = { time_s, top: Math.min(y(low), y(high)), bottom: Math.max(y(low), y(high)) };
    if (!found || (side === "above" ? ink.top < found.top : ink.bottom > found.bottom)) found = ink;
  });
  return found;
}

interface Scene {
  trace: TraceWindow;
  /** More curves the leaders keep clear of. */
  others: Pick<TraceWindow, "time_s" | "low" | "high">[];
  span: Span;
  x: Scale;
  y: Scale;
  band: PanelBand;
  period_s: number | null;
}

/** Kinds of notes whose place suggests the side; the others go where the way out is shorter. */
function wishedSide(note: MarginNote, ink: Ink, { band }: Scene): Place["side"] | null {
  if (note.id === "ring" || note.id === "switch-off") return "below";
  const middle = (band.top + band.bottom) / 2;
  if (note.id === "kick" || note.id === "spark")
    return (ink.top + ink.bottom) / 2 > middle ? "below" : "above";
  return null;
}

/** A leader already on a side makes the way out there this much longer. */
const crowding = 26;

function placeAll(notes: MarginNote[], scene: Scene, sky: Skyline): Place[] {
  const places: Place[] = [];
  for (const note of notes.toSorted((a, b) => (a.place_s ?? 0) - (b.place_s ?? 0))) {
    const place = placeOf(note, scene, sky, places);
    if (place) places.push(place);
  }
  return places;
}

function placeOf(note: MarginNote, scene: Scene, sky: Skyline, others: Place[]): Place | null {
  const { trace, span, x, y, period_s } = scene;
  if (note.place_s === null || note.place_s < span.from || note.place_s > span.to) return null;
  const here = extreme(trace, note.place_s, ((span.to - span.from) / 400) * 1.5, y, "above");
  if (!here) return null;
  const side = wishedSide(note, here, scene) ?? shorterWay(x(note.place_s), here, sky, others);
  const wanders = note.id === "ring" && period_s !== null;
  const ink = wanders ? extreme(trace, note.place_s, period_s * searchPeriods, y, side) : here;
  if (!ink) return null;
  const at = wanders ? ink.time_s : note.place_s;
  return { id: note.id, x: x(at), y: side === "above" ? ink.top : ink.bottom, side };
}

function shorterWay(at: number, ink: Ink, sky: Skyline, others: Place[]): Place["side"] {
  const from = Math.max(Math.floor(at), 0);
  const up = ink.top - Math.min(ink.top, ...sky.top.subarray(from));
  const down = Math.max(ink.bottom, ...sky.bottom.subarray(from)) - ink.bottom;
  const on = (side: Place["side"]) => others.filter((place) => place.side === side).length * crowding;
  return up + on("above") <= down + on("below") ? "above" : "below";
}

/** All notes with their leaders, inside [from, to] of the figure's height. */
export function placeNotes(
  notes: MarginNote[],
  scene: Scene,
  frame: Frame,
  from: number,
  to: number,
): PlacedNote[] {
  const sky = skyline(frame.plotWidth, [scene.trace, ...scene.others], scene.x, scene.y);
  const lanes = laneOrder(placeAll(notes, scene, sky), sky, {
    top: scene.band.top,
    bottom: scene.band.bottom,
    gap: 11,
  });
  const rank = new Map(lanes.map((lane, at) => [lane.id, at]));
  const ordered = notes.toSorted((a, b) => (rank.get(a.id) ?? Infinity) - (rank.get(b.id) ?? Infinity) || 0);
  const written = ordered.map((note, at) => ({
    note,
    number: at + 1,
    title: wrap(note.title, frame.notesWidth, faces.title),
    text: wrap(note.text, frame.notesWidth, faces.text),
    lane: lanes.find((lane) => lane.id === note.id) ?? null,
  }));
  const blocks = written.map(({ title, text, lane }) => ({
    wish: lane ? lane.lane - 8 : scene.band.bottom + 60,
    height: title.length * faces.title.lineHeight + text.length * faces.text.lineHeight,
  }));
  const tops = makeRoom(blocks, from, to, 13);
  return written.map((note, at) => ({ ...note, top: tops[at] }));
}
