import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";

/** The rules of the layers that the linter's import patterns can't see: file sizes and the pure core. */
const root = join(import.meta.dirname, "..");

function sources(folder: string): string[] {
  return readdirSync(join(root, folder), { recursive: true, encoding: "utf8" })
    .filter((name) => /\.(ts|tsx|css)$/.test(name) && !name.includes("node_modules"))
    .map((name) => join(folder, name));
}

const text = (file: string) => readFileSync(join(root, file), "utf8");

describe("layers", () => {
  it("analysis imports nothing but itself and pure packages", () => {
    const foreign = sources("analysis").flatMap((file) =>
      [...text(file).matchAll(/from "([^"]+)"/g)]
        .map((match) => match[1])
        .filter((name) => !/^\.\.?\//.test(name) && !["valibot", "papaparse"].includes(name))
        .map((name) => `${file}: ${name}`),
    );
    expect(foreign).toEqual([]);
  });

  it("analysis never climbs out of its folder", () => {
    const climbing = sources("analysis").filter((file) => {
      const depth = file.split("/").length - 2;
      return [...text(file).matchAll(/from "((?:\.\.\/)+)/g)].some((match) => match[1].length / 3 > depth);
    });
    expect(climbing).toEqual([]);
  });

  it("the renderer imports only the bridge from app", () => {
    const foreign = sources("renderer").filter((file) =>
      [...text(file).matchAll(/from "[./]+\/app\/([^"]+)"/g)].some((match) => match[1] !== "bridge.ts"),
    );
    expect(foreign).toEqual([]);
  });

  it("no file is longer than 300 lines", () => {
    const long = ["analysis", "app", "renderer", "test", "samples"]
      .flatMap(sources)
      .filter((file) => text(file).split("\n").length > 301);
    expect(long).toEqual([]);
  });
});
