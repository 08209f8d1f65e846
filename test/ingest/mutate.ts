/** Damage as files suffer it: flipped and lost bytes, lost and doubled lines, cuts, other separators. */
import type { Random } from "../reference/random.ts";

type Mutation = (bytes: Uint8Array, random: Random) => Uint8Array;

const at = (bytes: Uint8Array, random: Random) => Math.floor(random.uniform() * bytes.length);
const splice = (bytes: Uint8Array, from: number, to: number, between: ArrayLike<number> = []) => {
  const result = new Uint8Array(bytes.length - (to - from) + between.length);
  result.set(bytes.subarray(0, from));
  result.set(between, from);
  result.set(bytes.subarray(to), from + between.length);
  return result;
};
const bytesOf = (text: string) => new TextEncoder().encode(text);

function lineAt(bytes: Uint8Array, place: number): [number, number] {
  const from = bytes.lastIndexOf(10, Math.max(0, place - 1)) + 1;
  const end = bytes.indexOf(10, place);
  return [Math.min(from, place), end < 0 ? bytes.length : end + 1];
}

export const mutations: Record<string, Mutation> = {
  flipByte: (bytes, random) => {
    const place = at(bytes, random);
    return splice(bytes, place, place + 1, [Math.floor(random.uniform() * 256)]);
  },
  otherPrintable: (bytes, random) => {
    const place = at(bytes, random);
    return splice(bytes, place, place + 1, bytesOf(random.pick([..."0123456789.,;-+eE \tx\"'#"])));
  },
  loseByte: (bytes, random) => {
    const place = at(bytes, random);
    return splice(bytes, place, Math.min(bytes.length, place + 1));
  },
  addPrintable: (bytes, random) => {
    const place = at(bytes, random);
    return splice(bytes, place, place, bytesOf(random.pick([...'0123456789.,;-+e \n"a'])));
  },
  loseLine: (bytes, random) => splice(bytes, ...lineAt(bytes, at(bytes, random))),
  doubleLine: (bytes, random) => {
    const [from, to] = lineAt(bytes, at(bytes, random));
    return splice(bytes, from, from, bytes.slice(from, to));
  },
  loseLines: (bytes, random) => {
    const [from] = lineAt(bytes, at(bytes, random));
    const [, to] = lineAt(bytes, Math.min(bytes.length - 1, from + Math.floor(random.uniform() * 400)));
    return splice(bytes, from, Math.max(from, to));
  },
  cut: (bytes, random) => bytes.slice(0, at(bytes, random)),
  beginLate: (bytes, random) => bytes.slice(Math.floor(random.uniform() * 200)),
  blankLine: (bytes, random) => {
    const [from] = lineAt(bytes, at(bytes, random));
    return splice(bytes, from, from, bytesOf(random.pick(["\n", ",,,\n", "  \n", "\r\n"])));
  },
  textLine: (bytes, random) => {
    const [from] = lineAt(bytes, at(bytes, random));
    return splice(
      bytes,
      from,
      from,
      bytesOf(random.pick(["end of record\n", "# remark, with, commas\n", "Event 7\n"])),
    );
  },
  nul: (bytes, random) =>
    splice(bytes, at(bytes, random), at(bytes, random) >= 0 ? bytes.length : 0, [0, 0, 0]),
  wordForNumber: (bytes, random) => {
    const place = bytes.indexOf(44, at(bytes, random));
    return place < 0
      ? bytes
      : splice(bytes, place + 1, place + 1, bytesOf(random.pick(["nan", "OVER", "x", "1e", "--", "inf"])));
  },
};

/** The same file for the same seed: one to three kinds of damage, named. */
export function mutate(bytes: Uint8Array, random: Random): { bytes: Uint8Array; how: string[] } {
  const how: string[] = [];
  let damaged = bytes;
  for (let left = 1 + Math.floor(random.uniform() * 3); left > 0; left--) {
    const name = random.pick(Object.keys(mutations));
    how.push(name);
    if (damaged.length > 0) damaged = mutations[name](damaged, random);
  }
  return { bytes: damaged, how };
}
