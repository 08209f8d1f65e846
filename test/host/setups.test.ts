import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { readSetupFile, readSetups } from "../../app/host/setups.ts";

let folder: string;
beforeEach(() => (folder = mkdtempSync(join(tmpdir(), "setups-"))));
afterEach(() => rmSync(folder, { recursive: true }));

const write = (name: string, text: string | object) =>
  writeFileSync(join(folder, name), typeof text === "string" ? text : JSON.stringify(text));

describe("the setup of a capture", () => {
  it("is what is stated, completed by the file's own and then by the folder's", async () => {
    write("setup.json", { coil: "of the folder", supply_V: 12, expected: "spark" });
    write("pulse.setup.json", { coil: "of the file", supply_V: 24 });
    const { setup, origins } = await readSetups(join(folder, "pulse.csv"), { coil: "stated" });
    expect(setup).toEqual({ format: "ringbook.setup/1", coil: "stated", supply_V: 24, expected: "spark" });
    expect(origins).toEqual({ coil: "stated", supply_V: "file setup", expected: "folder setup" });
  });

  it.each(["pulse.csv", "pulse.csv.gz", "pulse.TXT", "pulse.dat"])("is found beside %s", async (name) => {
    write("pulse.setup.json", { supply_V: 24 });
    expect((await readSetups(join(folder, name), null)).setup.supply_V).toBe(24);
  });

  it("leaves to the next what is stated as null", async () => {
    write("setup.json", { supply_V: 12 });
    const { setup, origins } = await readSetups(join(folder, "pulse.csv"), { supply_V: null });
    expect([setup.supply_V, origins.supply_V]).toEqual([12, "folder setup"]);
  });

  it("is empty where nothing is stated anywhere", async () => {
    expect(await readSetups(join(folder, "pulse.csv"), null)).toEqual({
      setup: { format: "ringbook.setup/1" },
      origins: {},
    });
  });

  it.each([
    ["no JSON", "{", /\(whole file\) in .*setup\.json is not JSON/],
    ["a list", "[]", /\(whole file\) in .*setup\.json must be a JSON object/],
    [
      "an unknown field",
      { capacitor_nF: 330 },
      /capacitor_nF in .*setup\.json does not exist: check the spelling/,
    ],
    ["a wrong type", { supply_V: "12" }, /supply_V in .*setup\.json must be a number/],
    ["an absurd size", { capacitor_F: 330 }, /capacitor_F in .*setup\.json must be at most 0.1/],
  ])("with %s is refused with file and field", async (_what, text, message) => {
    write("setup.json", text);
    await expect(readSetups(join(folder, "pulse.csv"), null)).rejects.toThrow(message);
  });

  it("is read with a byte order mark too", async () => {
    write("setup.json", '\uFEFF{"supply_V": 12}');
    expect((await readSetupFile(join(folder, "setup.json"))).supply_V).toBe(12);
  });
});
