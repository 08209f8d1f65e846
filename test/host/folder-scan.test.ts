import {
  appendFileSync,
  mkdtempSync,
  renameSync,
  rmSync,
  unlinkSync,
  utimesSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { createFolderScan } from "../../app/host/watch/folder-scan.ts";

let folder: string;
let time: number;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "scan-"));
  time = 0;
});
afterEach(() => rmSync(folder, { recursive: true }));

const at = (name: string) => join(folder, name);
const scanner = (known: (path: string) => boolean = () => false) =>
  createFolderScan(folder, {
    wanted: (name) => name.endsWith(".csv"),
    settle_ms: 1000,
    known,
    now: () => time,
  });

describe("a watched folder", () => {
  it("gives a file once it has not changed for the settling time, and only once", async () => {
    const scan = scanner();
    writeFileSync(at("a.csv"), "1,2\n");
    expect(await scan.look()).toEqual([]);
    time = 999;
    expect(await scan.look()).toEqual([]);
    time = 1000;
    expect(await scan.look()).toEqual(["a.csv"]);
    time = 5000;
    expect(await scan.look()).toEqual([]);
  });

  it("waits for a file that still grows", async () => {
    const scan = scanner();
    writeFileSync(at("a.csv"), "1,2\n");
    for (time = 0; time < 5000; time += 500) {
      expect(await scan.look()).toEqual([]);
      appendFileSync(at("a.csv"), "3,4\n");
    }
    await scan.look();
    time += 1000;
    expect(await scan.look()).toEqual(["a.csv"]);
  });

  it("gives a file again when its writer had only paused", async () => {
    const scan = scanner();
    writeFileSync(at("a.csv"), "1,2\n");
    await scan.look();
    time = 1000;
    expect(await scan.look()).toEqual(["a.csv"]);
    appendFileSync(at("a.csv"), "3,4\n");
    time = 1500;
    expect(await scan.look()).toEqual([]);
    time = 2500;
    expect(await scan.look()).toEqual(["a.csv"]);
  });

  it("takes a file renamed to its final name, and does not take a read one again under a new name", async () => {
    const scan = scanner();
    writeFileSync(at("a.part"), "1,2\n");
    await scan.look();
    time = 2000;
    expect(await scan.look()).toEqual([]);
    renameSync(at("a.part"), at("a.csv"));
    await scan.look();
    time = 3000;
    expect(await scan.look()).toEqual(["a.csv"]);
    renameSync(at("a.csv"), at("b.csv"));
    for (time = 4000; time < 8000; time += 1000) expect(await scan.look()).toEqual([]);
  });

  it("leaves an empty file alone until something is in it", async () => {
    const scan = scanner();
    writeFileSync(at("a.csv"), "");
    for (time = 0; time < 5000; time += 1000) expect(await scan.look()).toEqual([]);
    writeFileSync(at("a.csv"), "1,2\n");
    await scan.look();
    time += 1000;
    expect(await scan.look()).toEqual(["a.csv"]);
  });

  it("passes over what an earlier start has read, unless it changes", async () => {
    const scan = scanner((path) => path === at("a.csv"));
    writeFileSync(at("a.csv"), "1,2\n");
    writeFileSync(at("b.csv"), "1,2\n");
    await scan.look();
    time = 1000;
    expect(await scan.look()).toEqual(["b.csv"]);
    utimesSync(at("a.csv"), 1e9, 1e9);
    await scan.look();
    time = 2000;
    expect(await scan.look()).toEqual(["a.csv"]);
  });

  it("takes a file that was deleted and saved anew", async () => {
    const scan = scanner();
    writeFileSync(at("a.csv"), "1,2\n");
    await scan.look();
    time = 1000;
    await scan.look();
    unlinkSync(at("a.csv"));
    await scan.look();
    writeFileSync(at("a.csv"), "5,6\n");
    await scan.look();
    time = 2000;
    expect(await scan.look()).toEqual(["a.csv"]);
  });
});
