/** What is dropped becomes sources: bytes through a door without paths, paths where there are some. */
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Bench } from "../../app/bridge.ts";
import { sourcesOf, type Named } from "../../renderer/bench/drop.ts";

const named = (name: string): Named => ({ name, file: new File(["1,2\n"], name.split("/").at(-1)!) });

/** Keeps what it was sent, in order. */
function keeper() {
  const sent: { name: string; bytes: Uint8Array }[] = [];
  const call = async (name: string, argument: never) => {
    expect(name).toBe("addFile");
    sent.push(argument);
    return { file: `kept-${sent.length}` };
  };
  return { sent, bench: { call, subscribe: () => () => undefined } as unknown as Bench };
}

afterEach(() => vi.unstubAllGlobals());

describe("dropped files", () => {
  it("are sent with their folders, setups first, and only captures are opened", async () => {
    vi.stubGlobal("window", {});
    const { bench, sent } = keeper();
    const sources = await sourcesOf(
      bench,
      [named("run/a.csv"), named("run/setup.json"), named("run/b.csv")],
      () => undefined,
    );
    expect(sent.map(({ name }) => name)).toEqual(["run/setup.json", "run/a.csv", "run/b.csv"]);
    expect(sources).toEqual([{ file: "kept-2" }, { file: "kept-3" }]);
    expect(new TextDecoder().decode(sent[0].bytes)).toBe("1,2\n");
  });

  it("that are loose make one run a day", async () => {
    vi.stubGlobal("window", {});
    const { bench, sent } = keeper();
    await sourcesOf(bench, [named("a.csv")], () => undefined);
    expect(sent[0].name).toMatch(/^dropped \d{4}-\d{2}-\d{2}\/a\.csv$/);
  });

  it("go by their path where the shell knows it, and no byte is sent", async () => {
    vi.stubGlobal("window", { ringbook: { pathOf: (file: File) => `/bench/${file.name}` } });
    const { bench, sent } = keeper();
    const sources = await sourcesOf(bench, [named("run/setup.json"), named("run/a.csv")], () => undefined);
    expect(sources).toEqual([{ path: "/bench/a.csv" }]);
    expect(sent).toEqual([]);
  });
});
