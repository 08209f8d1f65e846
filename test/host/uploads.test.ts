import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { basename, dirname, join, relative } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { createUploads } from "../../app/host/uploads.ts";

let folder: string;
beforeEach(() => (folder = mkdtempSync(join(tmpdir(), "uploads-"))));
afterEach(() => rmSync(folder, { recursive: true }));

const bytes = (text: string) => new TextEncoder().encode(text);

describe("files that a window sent", () => {
  it("of one folder lie together, with their setup", async () => {
    const uploads = createUploads(folder);
    const capture = uploads.pathOf((await uploads.add("run 7/a.csv", bytes("1"))).file);
    const setup = uploads.pathOf((await uploads.add("run 7/setup.json", bytes("{}"))).file);
    const other = uploads.pathOf((await uploads.add("run 8/a.csv", bytes("2"))).file);
    expect(dirname(capture)).toBe(dirname(setup));
    expect(basename(dirname(capture))).toBe("run 7");
    expect(dirname(other)).not.toBe(dirname(capture));
    expect(readFileSync(capture, "utf8")).toBe("1");
  });

  it("never overwrite each other", async () => {
    const uploads = createUploads(folder);
    const first = uploads.pathOf((await uploads.add("a.csv", bytes("1"))).file);
    const second = uploads.pathOf((await uploads.add("a.csv", bytes("2"))).file);
    expect(readFileSync(first, "utf8") + readFileSync(second, "utf8")).toBe("12");
  });

  it.each([
    "../../etc/passwd",
    "..\\..\\evil.csv",
    "/etc/hosts",
    "a/../../b.csv",
    "..",
    "x/..",
    "C:\\a.csv",
    "nul\0.csv",
  ])("named %j stay inside the host's folder", async (name) => {
    const uploads = createUploads(folder);
    const path = await uploads.add(name, bytes("1")).then(
      ({ file }) => uploads.pathOf(file),
      () => folder,
    );
    expect(relative(folder, path)).not.toMatch(/^\.\.|^\//);
    expect(basename(path)).not.toMatch(/[\\/:\0]|^\.\.$/);
  });

  it("are known only while the program runs that took them", () => {
    expect(() => createUploads(folder).pathOf("x")).toThrow("Drop it again");
  });
});
