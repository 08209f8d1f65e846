import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { openBook, type Book } from "../../app/host/book/index.ts";
import { judged, setup, temporaryFolder } from "./runs.ts";

let place: ReturnType<typeof temporaryFolder>;
let book: Book;
beforeEach(async () => {
  place = temporaryFolder();
  book = await openBook(join(place.folder, "bench.db"));
});
afterEach(() => {
  book.close();
  place.remove();
});

const run = (key = "name:a") => book.ensureRun({ key, name: key.slice(5), folder: null });
const two = [
  { name: "a.csv", verdicts: ["spark", "no-spark"] as const },
  { name: "b.csv", verdicts: ["unclear"] as const },
].map(({ name, verdicts }) => ({ name, verdicts: [...verdicts] }));

describe("a run in the book", () => {
  it("answers what was kept, counted with its interval", () => {
    const id = run();
    book.keepRun(id, judged(two));
    expect(book.run(id)).toMatchObject({ name: "a", coil: "Winding 3", captures: 2 });
    // Clopper–Pearson 1934: bounds of 1 and of 1 + 1 unclear out of 3 at 95 % (test/statistics checks them).
    expect(book.run(id).counts).toMatchObject({ pulses: 3, sparks: 1, quiet: 1, unclear: 1, misfires: 1 });
    expect(book.run(id).counts.misfireRate?.value).toBe(0.5);
    expect(book.pulses(id, {}).rows.map(({ verdict }) => verdict)).toEqual(["spark", "no-spark", "unclear"]);
  });

  it("recognises a capture that is kept twice", () => {
    const id = run();
    book.keepRun(id, judged(two));
    book.keepRun(id, judged(two));
    expect(book.captures(id)).toHaveLength(2);
    expect(book.pulses(id, {}).rows).toHaveLength(3);
    expect(book.ensureRun({ key: "name:a", name: "a", folder: null })).toBe(id);
  });

  it("keeps a capture that lies under two paths once, and says so", () => {
    const id = run();
    const run2 = judged(two);
    run2.files[1].sha256 = run2.files[0].sha256;
    book.keepRun(id, run2);
    expect(book.captures(id)).toHaveLength(1);
    expect(book.pulses(id, {}).rows.map(({ number }) => number)).toEqual([1, 2]);
    expect(book.run(id).attention[0].text).toContain("/bench/b.csv: is the same capture as /bench/a.csv");
  });

  it("adds a reading beside the old one when the setup changed, and never drops the old one", () => {
    const id = run();
    book.keepRun(id, judged(two));
    book.keepRun(id, judged(two.map((file) => ({ ...file, stated: { ...setup, supply_V: 24 } }))));
    expect(book.readingsOf(book.captures(id)[0].capture)).toHaveLength(2);
    expect(book.captures(id)[0].setup.supply_V).toBe(24);
  });

  it("leaves a file that was written anew out of the lists, and keeps its reading", () => {
    const id = run();
    book.keepRun(id, judged(two));
    const [old] = book.captures(id);
    book.keepRun(id, judged([{ name: "c.csv", verdicts: ["spark"] }]));
    expect(book.captures(id)).toHaveLength(1);
    expect(book.run(id).counts.pulses).toBe(1);
    expect(book.capture(old.capture).reading.pulses).toHaveLength(2);
  });

  it("walks pages by key without gap or repeat", () => {
    const id = run();
    book.keepRun(
      id,
      judged([{ name: "a.csv", verdicts: Array.from({ length: 25 }, () => "spark" as const) }]),
    );
    const numbers: number[] = [];
    for (let cursor: string | null = "0"; cursor !== null;) {
      const page = book.pulses(id, { cursor, limit: 10 });
      numbers.push(...page.rows.map(({ number }) => number));
      cursor = page.cursor;
    }
    expect(numbers).toEqual(Array.from({ length: 25 }, (_, i) => i + 1));
  });

  it("is found by coil, date, verdict, file and remark", () => {
    const id = run();
    book.keepRun(id, judged(two));
    book.keepRun(run("name:b"), judged([{ name: "c.csv", verdicts: ["spark"], stated: { coil: "Other" } }]));
    book.rule(book.captures(id)[0].capture, 0, null, "damp cable");
    const found = (query: Parameters<Book["runs"]>[0]) => book.runs(query).rows.map(({ name }) => name);
    expect(found({})).toEqual(["b", "a"]);
    expect(found({ coil: "Other" })).toEqual(["b"]);
    expect(found({ verdict: "unclear" })).toEqual(["a"]);
    expect(found({ search: "damp" })).toEqual(["a"]);
    expect(found({ search: "b.csv wind" })).toEqual(["a"]);
    expect(found({ search: "100%" })).toEqual([]);
    expect(found({ from: "2026-02-01", to: "2026-03-01" })).toEqual(["a"]);
  });

  it("says so when there is no such run or capture", () => {
    expect(() => book.run(7)).toThrow("no run 7");
    expect(() => book.capture(7)).toThrow("no capture 7");
  });

  it("copies itself whole while it is open", async () => {
    const id = run();
    book.keepRun(id, judged(two));
    await book.backup(join(place.folder, "copy.db"));
    const copy = await openBook(join(place.folder, "copy.db"));
    expect(copy.captures(id)).toEqual(book.captures(id));
    copy.close();
  });
});

describe("the trail", () => {
  it("lets the user's verdict win in counts and keeps the program's beside it", () => {
    const id = run();
    book.keepRun(id, judged(two));
    const [, second] = book.captures(id);
    book.rule(second.capture, 0, "no-spark", "heard nothing");
    expect(book.run(id).counts).toMatchObject({ quiet: 2, unclear: 0 });
    const [pulse] = book.capture(second.capture).reading.pulses;
    expect(pulse.spark?.verdict).toBe("unclear");
    expect(pulse.ruled).toMatchObject({ verdict: "no-spark", remark: "heard nothing" });
  });

  it("keeps rulings when the run is judged again", () => {
    const id = run();
    book.keepRun(id, judged(two));
    book.rule(book.captures(id)[1].capture, 0, "spark", "");
    book.keepRun(id, judged(two));
    expect(book.run(id).counts).toMatchObject({ sparks: 2, unclear: 0 });
  });

  it("takes the last step back by adding to the trail, verdict by verdict, setup by setup", () => {
    const id = run();
    book.keepRun(id, judged(two));
    const { capture } = book.captures(id)[0];
    book.stateSetup(id, { supply_V: 12 });
    book.stateSetup(id, { supply_V: 24 });
    book.rule(capture, 0, "no-spark", "");
    book.rule(capture, 0, "unclear", "");
    expect(book.undo(id).rejudge).toBe(false);
    expect(book.capture(capture).reading.pulses[0].ruled?.verdict).toBe("no-spark");
    expect(book.undo(id).rejudge).toBe(false);
    expect(book.capture(capture).reading.pulses[0].ruled).toBeNull();
    expect(book.undo(id).rejudge).toBe(true);
    expect(book.stated(id)).toEqual({ supply_V: 12 });
    book.undo(id);
    expect(book.stated(id)).toBeNull();
    expect(book.run(id).canUndo).toBe(false);
    expect(() => book.undo(id)).toThrow("nothing to take back");
  });
});
