import { copyFileSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { ringbook, samples } from "./ringbook.ts";

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "ringbook-cli-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const put = (name: string, text: string | Uint8Array) => {
  writeFileSync(join(folder, name), text);
  return join(folder, name);
};
const copy = (name: string) => copyFileSync(join(samples, name), join(folder, name));

interface Line {
  format: string;
  file: string;
  sha256: string;
  pulses: { spark: { verdict: string } | null }[];
  notes: { code: string; question?: string }[];
}
const parsed = (lines: string[]) => lines.map((line) => JSON.parse(line) as Line);

describe("ringbook read", () => {
  const demo = ringbook("read", samples, "--json");

  it("prints one ringbook.capture/1 line per capture of the demo run, in the order of the files", () => {
    const captures = parsed(demo.lines);
    expect(demo.status).toBe(0);
    expect(captures.map(({ file }) => file.split("/").at(-1))).toEqual([
      ...Array.from({ length: 10 }, (_, i) => `pulse-${String(i + 1).padStart(2, "0")}.csv`),
      "train.csv",
    ]);
    for (const capture of captures) {
      expect(capture.format).toBe("ringbook.capture/1");
      expect(capture.sha256).toMatch(/^[0-9a-f]{64}$/);
    }
    expect(demo.stdout).not.toMatch(/NaN|Infinity/);
  });

  it("judges the demo run as its gap really behaved", () => {
    // Truth from the gap's own state in the circuit simulation that made the run (samples/truth.json).
    const truth = JSON.parse(readFileSync(join(samples, "..", "truth.json"), "utf8")) as {
      files: Record<string, { pulses: { spark: boolean }[] }>;
    };
    for (const { file, pulses } of parsed(demo.lines)) {
      const name = file.split("/").at(-1) as string;
      const verdicts = pulses.map(({ spark }) => spark?.verdict);
      const sparked = truth.files[name].pulses.map(({ spark }) => (spark ? "spark" : "no-spark"));
      expect({ name, verdicts }).toEqual({ name, verdicts: sparked });
    }
  });

  it("prints a line per capture and one per pulse with verdict and reason for people", () => {
    const { status, lines } = ringbook("read", join(samples, "pulse-03.csv"));
    expect(status).toBe(0);
    expect(lines[0]).toMatch(/^pulse-03\.csv {2}L .* mH {2}Q .* sparks 0 of 1$/);
    expect(lines[1]).toMatch(/^ +1 {2}at .*no-spark \(.*\): /);
  });

  it("does the other files of a folder when some can't be read, names each, and answers 1", () => {
    copy("pulse-03.csv");
    put("empty.csv", "");
    put("picture.csv", Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 1, 2, 3]));
    put("words.csv", "this is\nno capture\n");
    put("bad.csv", "0,1\n1,2\n2,3\n");
    put("bad.setup.json", '{"capacitor_F": 4}');
    const { status, stderr, lines } = ringbook("read", folder, "--json");
    expect(status).toBe(1);
    expect(parsed(lines).map(({ file }) => file.split("/").at(-1))).toEqual(["pulse-03.csv"]);
    for (const name of ["empty.csv", "picture.csv", "words.csv", "bad.csv"])
      expect(stderr).toMatch(new RegExp(`${name}: .{20,}`));
    expect(stderr).toContain("capacitor_F");
    expect(stderr).not.toMatch(/\[object|undefined| at .*\.js:/);
  });

  it("says that a file is missing, and where", () => {
    const { status, stderr } = ringbook("read", join(folder, "gone.csv"));
    expect(status).toBe(1);
    expect(stderr).toMatch(/gone\.csv: .*no such file/);
  });

  it("reads a capture without a switch-off, gives no pulse and says so", () => {
    const rows = Array.from({ length: 2000 }, (_, i) => `${i}e-6,${(i * 7) % 3}`).join("\n");
    const { status, lines } = ringbook("read", put("flat.csv", `Time (s),A (V)\n${rows}\n`), "--json");
    expect(status).toBe(0);
    const [capture] = parsed(lines);
    expect(capture.pulses).toEqual([]);
    expect(capture.notes.map(({ code }) => code)).toContain("no-switch-off");
  });

  it("asks for an interval that is not in the file, and exits 0", () => {
    const rows = Array.from({ length: 500 }, (_, i) => (Math.sin(i / 9) * 10).toFixed(3)).join("\n");
    const { status, lines } = ringbook("read", put("bare.csv", `A\nVolt\n${rows}\n`), "--json");
    expect(status).toBe(0);
    const [capture] = parsed(lines);
    expect(capture.pulses).toEqual([]);
    expect(capture.notes.some(({ question }) => question)).toBe(true);
  });

  it("keeps the run in a book when one is named, and keeps it once", () => {
    copy("pulse-03.csv");
    const book = join(folder, "bench.db");
    for (let i = 0; i < 2; i++) expect(ringbook("read", folder, "--book", book).status).toBe(0);
    const [run] = ringbook("log", "--book", book, "--json").lines.map((line) => JSON.parse(line));
    expect(run).toMatchObject({ format: "ringbook.run/1", captures: 1, pulses: 1 });
  });
});

describe("the book's commands", () => {
  it("hand over a run as table, lines, page and copy", () => {
    const book = join(folder, "bench.db");
    mkdirSync(join(folder, "run"));
    copyFileSync(join(samples, "pulse-03.csv"), join(folder, "run", "pulse-03.csv"));
    ringbook("read", join(folder, "run"), "--book", book);
    expect(ringbook("export", "--run", "run", "--book", book).stdout).toMatch(/^\uFEFFfile,record,pulse/);
    expect(ringbook("export", "--run", "run", "--kind", "jsonl", "--book", book).lines).toHaveLength(1);
    const page = join(folder, "report.html");
    expect(ringbook("report", "--run", "run", "--book", book, "-o", page).status).toBe(0);
    expect(readFileSync(page, "utf8")).toContain("<svg");
    expect(ringbook("backup", join(folder, "copy.db"), "--book", book).status).toBe(0);
    expect(ringbook("log", "--book", join(folder, "copy.db")).stdout).toContain("1 captures");
  });

  it("put two runs side by side with an interval for the difference", () => {
    const book = join(folder, "bench.db");
    for (const [run, name] of [
      ["one", "pulse-03.csv"],
      ["two", "pulse-06.csv"],
    ]) {
      mkdirSync(join(folder, run));
      copyFileSync(join(samples, name), join(folder, run, name));
      ringbook("read", join(folder, run), "--book", book);
    }
    const { lines } = ringbook("log", "--run", "two", "--against", "one", "--json", "--book", book);
    const { format, q, quietRate } = JSON.parse(lines[0]);
    expect(format).toBe("ringbook.comparison/1");
    expect(Math.abs(q.value)).toBeLessThan(4 * q.u);
    // Newcombe 1998: one of one against one of one says nothing, and the interval shows it.
    expect(quietRate).toMatchObject({ value: 0, level: 0.95 });
    expect(quietRate.low).toBeLessThan(-0.5);
    expect(quietRate.high).toBeGreaterThan(0.5);
  });

  it("give the coil's line, ramp and drive", () => {
    const { status, lines } = ringbook("coil", join(samples, "pulse-03.csv"), "--json");
    expect(status).toBe(0);
    const coil = JSON.parse(lines[0]);
    expect(coil.format).toBe("ringbook.coil/1");
    expect(coil.ramp.inductance_H.value).toBeGreaterThan(0);
    expect(ringbook("coil", join(samples, "pulse-03.csv"), "--energy", "0.0075").stdout).toMatch(
      /smallest capacitor.*\n.*time to 1\.4\d A/,
    );
  });
});

describe("wrong usage", () => {
  it.each([
    ["an unknown command", ["measure"], "no command"],
    ["no command", [], "ringbook read"],
    ["no path", ["read"], "path"],
    ["an unknown option", ["read", "x.csv", "--frobnicate"], "frobnicate"],
    ["a setup that is not there", ["read", "x.csv", "--setup", "nowhere.json"], "--setup"],
    ["a run that is not there", ["export", "--run", "none"], "no run"],
    ["an unknown kind", ["export", "--run", "x", "--kind", "pdf"], "csv or jsonl"],
    ["both paths and a name", ["coil", "a.csv", "--coil", "b"], "coil wants"],
  ])("%s answers 2 and says what is wrong", (_, args, text) => {
    const withBook = ["export"].includes(args[0]) ? [...args, "--book", join(folder, "bench.db")] : args;
    const { status, stderr } = ringbook(...withBook);
    expect(status).toBe(2);
    expect(stderr).toContain(text);
  });
});
