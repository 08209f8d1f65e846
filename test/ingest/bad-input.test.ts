/** Files that are no capture, or a broken one: each an error with a code, the place where known, and advice. */
import { appendFileSync, chmodSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { afterAll, describe, expect, it } from "vitest";
import { ReadingError } from "../../analysis/errors.ts";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { readFile } from "../../app/host/reading/index.ts";

const utf8 = (text: string) => new TextEncoder().encode(text);
const rows = (count: number) =>
  Array.from({ length: count }, (_, i) => `${(i * 1e-6).toFixed(6)},${Math.sin(i / 9).toFixed(3)}`);
const good = `t (s),A (V)\n${rows(500).join("\n")}\n`;
const png = Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13]);

function failure(bytes: Uint8Array): ReadingError {
  try {
    ingestBytes(bytes, {});
  } catch (error) {
    if (error instanceof ReadingError) return error;
    throw error;
  }
  throw new Error("it was read");
}

describe("refused with a code, a place and advice", () => {
  it.each<[string, string, Uint8Array, { line?: number; byte?: number }]>([
    ["empty", "empty-file", utf8(""), {}],
    ["blanks only", "empty-file", utf8(" \r\n\n"), {}],
    ["one line of text", "no-numbers", utf8("hello there"), { line: 1 }],
    ["one row of numbers", "too-few-rows", utf8("t (s),A (V)\n0.1,0.2\n"), { line: 2 }],
    ["all text", "no-numbers", utf8("\nDear reader,\nthis is a letter.\nYours\n"), { line: 2 }],
    ["a renamed picture", "not-text-picture", png, { byte: 0 }],
    ["a renamed workbook", "not-text-archive", Uint8Array.from([0x50, 0x4b, 3, 4, 20, 0, 6, 0]), { byte: 0 }],
    ["NUL bytes at the end", "nul-bytes", new Uint8Array([...utf8(good), 0, 0, 0, 0]), { byte: good.length }],
    ["binary numbers", "nul-bytes", new Uint8Array(new Float64Array(100).fill(1.5).buffer), { byte: 0 }],
    [
      "ten thousand columns",
      "too-many-columns",
      utf8(Array.from({ length: 1300 }, (_, i) => `${i},${"1.5,".repeat(1200)}`).join("\n")),
      { line: 1 },
    ],
    ["every other line damaged", "damaged-lines", utf8(good.replace(/(\n[^\n]*\n[^\n]*),/g, "$1,x")), {}],
  ])("%s: %s", (_, code, bytes, place) => {
    const error = failure(bytes);
    expect(error.code).toBe(code);
    expect(error.place).toMatchObject(place);
    expect(error.advice.length).toBeGreaterThan(10);
    expect(error.message).toMatch(/^[A-Z]/);
  });

  it("one endless line", () => {
    expect(failure(utf8("0.123,".repeat(6_000_000))).code).toBe("endless-line");
  });
});

const codes = (text: string) => ingestBytes(utf8(text), {})[0].notes.map(({ code }) => code);

describe("read, with what is wrong in the notes", () => {
  it("cut in mid-line: the broken last row is dropped", () => {
    const cut = good.slice(0, good.length - 4);
    const [capture] = ingestBytes(utf8(cut), {});
    expect(capture.timebase.samples).toBe(499);
    expect(codes(cut)).toContain("cut-last-line");
  });

  it("not cut when only the last line end is missing", () => {
    const [capture] = ingestBytes(utf8(good.trimEnd()), {});
    expect(capture.timebase.samples).toBe(500);
    expect(codes(good.trimEnd())).not.toContain("cut-last-line");
  });

  it("a cell that is no number is no sample, and its place is said", () => {
    const [capture] = ingestBytes(utf8(good.replace(/0\.000100,[-.\d]+/, "0.000100,oops")), {});
    expect(capture.channels[0].samples[100]).toBeNaN();
    expect([...capture.channels[0].unusable]).toEqual([100, 101]);
    expect(capture.notes.find(({ code }) => code === "unreadable-cells")?.text).toContain("line 102");
  });

  it("fewer samples than the header states", () => {
    expect(codes(`Record Length,1000\n${good}`)).toContain("fewer-samples");
  });

  it("a damaged time among good ones shifts nothing", () => {
    const [capture] = ingestBytes(utf8(good.replace("\n0.000250,", "\n9.000250,")), {});
    expect(capture.timebase.samples).toBe(500);
    expect(capture.notes.map(({ code }) => code)).toContain("time-mended");
  });
});

const code = (path: string) =>
  readFile(path, {}).then(
    () => "read",
    (error: ReadingError) => error.code,
  );

describe("files on the machine", () => {
  const folder = mkdtempSync(join(tmpdir(), "ringbook-reading-"));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  const file = (name: string, content: string | Uint8Array) => {
    writeFileSync(join(folder, name), content);
    return join(folder, name);
  };
  it("a folder, a missing file, a damaged archive", async () => {
    mkdirSync(join(folder, "inner.csv"));
    expect(await code(join(folder, "inner.csv"))).toBe("is-folder");
    expect(await code(join(folder, "none.csv"))).toBe("not-found");
    expect(await code(file("broken.csv.gz", gzipSync(good).subarray(0, 700)))).toBe("damaged-archive");
  });

  it.skipIf(process.getuid?.() === 0)("a file without permission", async () => {
    const path = file("locked.csv", good);
    chmodSync(path, 0);
    expect(await code(path)).toBe("no-permission");
  });

  it("reads a compressed file like the plain one, with the hash of the file itself", async () => {
    const plain = await readFile(file("plain.csv", good), {});
    const packed = await readFile(file("packed.csv.gz", gzipSync(good)), {});
    expect(packed.captures).toEqual(plain.captures);
    expect(packed.layout).toBe(plain.layout);
    expect(plain.sha256).toMatch(/^[0-9a-f]{64}$/);
    expect(packed.sha256).not.toBe(plain.sha256);
  });

  it("a file that grows while it is read", async () => {
    const path = file("growing.csv", `t (s),A (V)\n${rows(200_000).join("\n")}\n`);
    let grown = false;
    const onProgress = () => {
      if (!grown) appendFileSync(path, "0.3,0.3\n");
      grown = true;
    };
    await expect(readFile(path, {}, { onProgress })).rejects.toMatchObject({ code: "file-changed" });
  });

  it("stops when it is told to", async () => {
    const path = file("long.csv", `t (s),A (V)\n${rows(400_000).join("\n")}\n`);
    const signal = { aborted: false };
    const onProgress = (share: number) => {
      if (share > 0.2) signal.aborted = true;
    };
    await expect(readFile(path, {}, { onProgress, signal })).rejects.toMatchObject({ code: "cancelled" });
  });
});

it("a channel that steps through 0, 1, 2 is no running number", () => {
  const text = `Time [s],A [V]\n${Array.from({ length: 300 }, (_, i) => `${i}e-6,${i % 3}`).join("\n")}\n`;
  const [capture] = ingestBytes(utf8(text), {});
  expect(capture.timebase).toMatchObject({ start_s: 0, samples: 300 });
  expect(capture.timebase.step_s).toBeCloseTo(1e-6, 15);
  expect(capture.channels.map(({ name }) => name)).toEqual(["A"]);
});
