import { spawnSync } from "node:child_process";
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { createRequire } from "node:module";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { getRawHeader, listPackage } from "@electron/asar";
import { getCurrentFuseWire, FuseV1Options } from "@electron/fuses";
import { afterAll, beforeAll, describe, expect, it } from "vitest";

const root = join(import.meta.dirname, "../..");
const release = mkdtempSync(join(tmpdir(), "ringbook-release-"));
const unpacked = join(release, "linux-unpacked");

/** Marks the fuse wire in Electron's binary (Electron's documentation, Fuses); version 1, nine fuses. */
const fuseWire = Buffer.concat([
  Buffer.from("dL7pKGdnNz796PbbjQWNKmHXBZaB9tsX"),
  Buffer.from([1, 9]),
  Buffer.alloc(9, "0"),
]);

/** A fuse is a digit in the binary. */
const [off, on] = [..."01"].map((digit) => digit.charCodeAt(0));

/** The package made offline around a stand-in for the runtime: everything but the runtime is real. */
beforeAll(() => {
  const runtime = join(release, "runtime");
  mkdirSync(runtime);
  writeFileSync(join(runtime, "electron"), fuseWire);
  writeFileSync(join(runtime, "version"), createRequire(import.meta.url)("electron/package.json").version);
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    [
      join(root, "node_modules/electron-builder/cli.js"),
      "--linux",
      "--dir",
      `-c.electronDist=${runtime}`,
      `-c.directories.output=${release}`,
    ],
    { cwd: root, encoding: "utf8" },
  );
  if (status !== 0) throw new Error(`electron-builder: ${stdout}${stderr}`);
}, 180_000);
afterAll(() => rmSync(release, { recursive: true, force: true }));

describe("the package", () => {
  const archive = join(unpacked, "resources", "app.asar");

  it("holds the built program, the demo run and the database's binary for its platform, and no sources", () => {
    const files = listPackage(archive, { isPack: false });
    for (const needed of [
      "/package.json",
      "/LICENSE",
      "/dist/app/main.js",
      "/dist/app/worker.js",
      "/dist/app/parse-worker.js",
      "/dist/preload/preload.cjs",
      "/dist/renderer/index.html",
      "/samples/bench-run/setup.json",
      "/node_modules/@photostructure/sqlite/package.json",
    ])
      expect(files).toContain(needed);
    expect(files.some((file) => file.includes("/prebuilds/linux-x64/"))).toBe(true);
    const foreign =
      /prebuilds\/(darwin|win32)|\/(analysis|renderer|test)\/.*\.tsx?$|sqlite\/src\/|node_modules\/(react|electron|vite)\//;
    expect(files.filter((file) => foreign.test(file) && !file.startsWith("/dist/"))).toEqual([]);
  });

  it("leaves outside the archive what must be a file of its own", () => {
    const { header } = getRawHeader(archive);
    const entry = (path: string) =>
      path
        .split("/")
        .reduce<{ files?: Record<string, never>; unpacked?: boolean }>(
          (folder, name) => folder.files?.[name] ?? {},
          header as never,
        );
    for (const path of ["dist/app/worker.js", "dist/app/parse-worker.js", "samples/bench-run/train.csv"])
      expect({ path, unpacked: entry(path).unpacked }).toEqual({ path, unpacked: true });
  });

  it("has its fuses set: no Node from outside, only the sealed archive", async () => {
    const wire = await getCurrentFuseWire(join(unpacked, "ringbook"));
    expect(wire[FuseV1Options.RunAsNode]).toBe(off);
    expect(wire[FuseV1Options.EnableNodeOptionsEnvironmentVariable]).toBe(off);
    expect(wire[FuseV1Options.EnableNodeCliInspectArguments]).toBe(off);
    expect(wire[FuseV1Options.OnlyLoadAppFromAsar]).toBe(on);
    expect(wire[FuseV1Options.EnableEmbeddedAsarIntegrityValidation]).toBe(on);
    expect(wire[FuseV1Options.EnableCookieEncryption]).toBe(on);
    expect(wire[FuseV1Options.GrantFileProtocolExtraPrivileges]).toBe(off);
  });

  it("is offered for captures without becoming anybody's default", () => {
    const configuration = readFileSync(join(root, "electron-builder.yml"), "utf8");
    expect(configuration).not.toMatch(/^\s*fileAssociations:/m);
  });
});
