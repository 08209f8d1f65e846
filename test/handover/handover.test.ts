import { join } from "node:path";
import Papa from "papaparse";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { openBook, type Book } from "../../app/host/book/index.ts";
import { exportRun, type Views } from "../../app/host/handover/index.ts";
import { judged, setup, temporaryFolder } from "../book/runs.ts";

const views: Views = {
  trace: ({ from_s, to_s }) =>
    Promise.resolve({
      channel: 0,
      name: "node",
      unit: "V",
      axis: "seconds",
      from_s: from_s ?? 0,
      to_s: to_s ?? 1,
      time_s: [from_s ?? 0, to_s ?? 1],
      low: [-10, null],
      high: [400, null],
    }),
  ringPicture: () => Promise.resolve(null),
};

let place: ReturnType<typeof temporaryFolder>;
let book: Book;
let run: number;
beforeEach(async () => {
  place = temporaryFolder();
  book = await openBook(join(place.folder, "bench.db"));
  run = book.ensureRun({ key: "name:x", name: "<b>Bench & shed</b>", folder: null });
  book.keepRun(run, judged([{ name: '=cmd|"x".csv', verdicts: ["spark", "no-spark"] }]));
  book.rule(1, 1, "unclear", "=HYPERLINK(1)\n<script>alert(1)</script>");
});
afterEach(() => {
  book.close();
  place.remove();
});

const csv = async () => {
  const { text } = await exportRun(book, run, "csv", views);
  // PapaParse reads it back: an independent reader of RFC 4180.
  return { text, rows: Papa.parse<Record<string, string>>(text.slice(1), { header: true }).data };
};

describe("the pulse table", () => {
  it("has one row a pulse, units in the header, CRLF and a byte order mark", async () => {
    const { text, rows } = await csv();
    expect(text.charCodeAt(0)).toBe(0xfeff);
    expect(text.split("\r\n")[0]).toContain("peak / V");
    expect(rows.filter((row) => row.pulse)).toHaveLength(2);
    expect(Number(rows[0]["peak / V"])).toBe(400);
    expect(Number(rows[0]["L / H"])).toBe(0.0058);
    expect(Number(rows[0]["u(L) / H"])).toBeCloseTo(5.8e-6, 12);
  });

  it("leaves a figure that could not be had empty, never 0", async () => {
    const { rows } = await csv();
    expect(rows[0]["breakdown / V"]).toBe("");
    expect(rows[1]["onset / s"]).toBe("");
  });

  it("writes a figure of volts as a number and a text that looks like a formula as text", async () => {
    const { rows } = await csv();
    expect(rows[1].remark).toBe("'=HYPERLINK(1)\n<script>alert(1)</script>");
    expect(rows.every((row) => !/^[=+@]/.test(row.file ?? ""))).toBe(true);
  });
});

describe("a cell of text", () => {
  // What starts a formula in spreadsheets, after the CSV injection notes that are published about it.
  const begins = /(^|[;\t\r\n])\s*[=+\-@＝＋－＠]/;
  for (const remark of [
    "=1+1",
    "+1",
    "-1",
    "@A1",
    "\t=1",
    "\r=1",
    " =1",
    "＝1",
    "＠A1",
    "fine;=1+1",
    "fine\n=1",
  ])
    it(`is no formula: ${JSON.stringify(remark)}`, async () => {
      book.rule(1, 1, "unclear", remark);
      const { rows } = await csv();
      expect(rows[1].remark).not.toMatch(begins);
      expect(rows[1].remark.replaceAll("'", "")).toBe(remark);
    });

  it("is left as it is where nothing in it could be one", async () => {
    book.rule(1, 1, "unclear", "L = 5 mH, Q - 3; gap 7 mm");
    expect((await csv()).rows[1].remark).toBe("L = 5 mH, Q - 3; gap 7 mm");
  });
});

describe("JSON Lines", () => {
  it("is one ringbook.capture/1 object a line", async () => {
    const { text, name } = await exportRun(book, run, "jsonl", views);
    expect(name).toBe("b-Bench-shed-b.jsonl");
    const [line] = text.trimEnd().split("\n");
    expect(JSON.parse(line)).toMatchObject({ format: "ringbook.capture/1", setup: { coil: "Winding 3" } });
    expect(text).not.toMatch(/NaN|Infinity/);
  });
});

describe("the report", () => {
  it("shows names and remarks as text and loads nothing from outside", async () => {
    const { text } = await exportRun(book, run, "html", views);
    expect(text).toContain("&lt;b&gt;Bench &amp; shed&lt;/b&gt;");
    expect(text).toContain("&lt;script&gt;alert(1)&lt;/script&gt;");
    expect(text).not.toMatch(/<script|<b>Bench|src=|href=|url\(/);
    expect(text).toContain("default-src 'none'");
  });

  it("holds counts with their interval, file hashes, version and the cautions", async () => {
    const { text } = await exportRun(book, run, "html", views);
    expect(text).toContain("2 pulses: 1 sparked, 0 misfired, 1 unclear.");
    expect(text).toMatch(/Misfire rate 0\.0 % \(0\.0 to \d+\.\d % at 95 %\)/);
    expect(text).toContain("=cmd|&quot;x&quot;.csv".padEnd(10));
    expect(text).toMatch(/Ringbook \d+\.\d+\.\d+/);
    expect(text).toContain("never a safety device");
    expect(text).toContain("<svg");
  });

  it("writes what was stated in words with units, and says when it was computed again", async () => {
    const again = judged([
      {
        name: '=cmd|"x".csv',
        verdicts: ["spark"],
        stated: { ...setup, capacitor_F: { value: 4.7e-7, tolerance: 0.05 } },
      },
    ]);
    book.stateSetup(run, { capacitor_F: { value: 4.7e-7, tolerance: 0.05 } });
    const before = (await exportRun(book, run, "html", views)).text;
    expect(before).toContain("not computed yet");
    book.keepRun(run, again);
    const { text } = await exportRun(book, run, "html", views);
    expect(text).toMatch(/capacitor<\/bdi>\s*<\/td>\s*<td>\s*<bdi>470 nF ± 5 %/);
    expect(text).toMatch(/switch rating<\/bdi>\s*<\/td>\s*<td>\s*<bdi>600 V/);
    expect(text).toMatch(/computed again from the captures; the book keeps\s+1 earlier reading/);
    expect(text).toMatch(/Stated on \d{4}-\d\d-\d\d \d\d:\d\d UTC:\s+<bdi>capacitor: 470 nF ± 5 %/);
    expect(text).not.toContain("not computed yet");
  });

  it("gives the added-capacitor line, or why there is none", async () => {
    const { text } = await exportRun(book, run, "html", views);
    expect(text).toMatch(/Added-capacitor line<\/h2>\s*<p class="quiet">\s*No line: /);
  });

  it("shows a name as it is spelled, whatever turns the direction of writing in it", async () => {
    book.rule(1, 1, "unclear", "\u202egnp.exe\u202c \u05d0\u05d1");
    const { text } = await exportRun(book, run, "html", views);
    expect(text).not.toMatch(/[\u202a-\u202e\u2066-\u2069]/);
    expect(text).toContain("\ufffdgnp.exe\ufffd \u05d0\u05d1");
  });

  it("says so where a trace can't be drawn, and keeps the rest", async () => {
    const gone = { ...views, trace: () => Promise.reject(new Error("there is no such file")) };
    const { text } = await exportRun(book, run, "html", gone);
    expect(text).toContain("The trace could not be drawn: there is no such file");
    expect(text).toContain("Pulse log");
  });
});
