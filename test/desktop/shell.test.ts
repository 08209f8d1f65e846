import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import {
  chosen,
  errorBoxes,
  exposed,
  ipcRenderer,
  schemes,
  session,
  StandInWindow,
} from "./electron-stand-in.ts";
import { desktopActions } from "../../app/desktop/actions.ts";
import { readStart } from "../../app/desktop/arguments.ts";
import { menuTemplate } from "../../app/desktop/menu.ts";
import { servePage } from "../../app/desktop/page.ts";
import { keepWindowState, readWindowState } from "../../app/desktop/window-state.ts";

vi.mock("electron", async () => (await import("./electron-stand-in.ts")).electron());

let folder: string;
beforeEach(() => (folder = mkdtempSync(join(tmpdir(), "shell-"))));
afterEach(() => rmSync(folder, { recursive: true }));

const get = (url: string, method = "GET") => schemes.get("ringbook")?.({ url, method }) as Promise<Response>;

describe("the page's scheme", () => {
  beforeEach(() => {
    writeFileSync(join(folder, "index.html"), "<!doctype html>");
    servePage(session as never, folder);
  });

  it("serves the page with its policy", async () => {
    const response = await get("ringbook://page/index.html");
    expect(response.status).toBe(200);
    expect(response.headers.get("content-security-policy")).toContain("connect-src 'self';");
    expect(response.headers.get("content-security-policy")).not.toContain("unsafe-eval");
  });

  it.each([
    "ringbook://page/..%2f..%2fetc%2fhosts",
    "ringbook://elsewhere/index.html",
    "ringbook://page/none.js",
  ])("serves nothing at %s", async (url) => expect((await get(url)).status).toBe(404));

  it("answers reading only", async () =>
    expect((await get("ringbook://page/index.html", "POST")).status).toBe(404));
});

describe("the command line of the window", () => {
  it("names a book and files, relative to where it was started", () => {
    const argv = ["/usr/bin/ringbook", "--book", "my.db", "--no-sandbox", "a.csv", "/captures/run 7"];
    expect(readStart(argv, true, "/bench")).toEqual({
      book: "/bench/my.db",
      paths: ["/bench/a.csv", "/captures/run 7"],
    });
    expect(readStart(["electron", ".", "a.csv"], false, "/bench").paths).toEqual(["/bench/a.csv"]);
  });
});

describe("the window's place", () => {
  const areas = [{ x: 0, y: 0, width: 1920, height: 1080 }];
  it("is kept when the window closes and found again", () => {
    const file = join(folder, "window.json");
    const window = new StandInWindow({ webPreferences: {} });
    keepWindowState(file, window as never);
    window.emit("close");
    expect(readWindowState(file, areas)).toEqual({
      bounds: { x: 10, y: 20, width: 900, height: 700 },
      maximized: false,
    });
  });

  it("is as at first when the file is damaged or the display is gone", () => {
    const file = join(folder, "window.json");
    const first = readWindowState(join(folder, "none.json"), areas);
    writeFileSync(file, '{"bounds": {"x": 5000, "y": 0, "width": 900, "height": 700}}');
    expect(readWindowState(file, areas)).toEqual(first);
    writeFileSync(file, '{"bounds": {"x": "<b>"');
    expect(readWindowState(file, areas)).toEqual(first);
    expect(readFileSync(file, "utf8")).not.toBe("");
  });
});

const window = () => new StandInWindow({ webPreferences: {} });

describe("the menu", () => {
  const host = { answer: vi.fn(async (_name: string, _argument: unknown) => ({ answer: {} })) };
  beforeEach(() => {
    host.answer.mockClear();
    errorBoxes.length = 0;
  });

  it("reads what was chosen, and nothing when the dialog was closed", async () => {
    const actions = desktopActions(host as never, window() as never);
    chosen.filePaths = [];
    await actions.openFiles();
    expect(host.answer).not.toHaveBeenCalled();
    chosen.filePaths = ["/bench/a.csv"];
    await actions.openFiles();
    await actions.watchFolder();
    expect(host.answer.mock.calls).toEqual([
      ["open", { sources: [{ path: "/bench/a.csv" }] }],
      ["watch", { path: "/bench/a.csv" }],
    ]);
  });

  it("says in a box what could not be done", async () => {
    host.answer.mockResolvedValueOnce({
      error: { code: "not-a-folder", text: "/x is not a folder" },
    } as never);
    chosen.filePaths = ["/x"];
    await desktopActions(host as never, window() as never).watchFolder();
    expect(errorBoxes).toEqual([["/x is not a folder"]]);
  });

  it("lists the latest runs and turns the window to one", () => {
    const shown = window();
    const actions = desktopActions(host as never, shown as never);
    const template = menuTemplate(actions, [{ run: 7, name: "Monday" } as never], false);
    const book = template[0].submenu as { label?: string; submenu?: { label: string; click(): void }[] }[];
    const runs = book.find(({ label }) => label === "Latest runs")?.submenu ?? [];
    expect(runs.map(({ label }) => label)).toEqual(["Monday"]);
    runs[0].click();
    expect(shown.webContents.sent).toEqual([["ringbook:event", { type: "show-run", run: 7 }]]);
  });
});

describe("the preload", () => {
  it("exposes the bridge and nothing else", async () => {
    await import("../../app/desktop/preload.ts");
    expect(Object.keys(exposed)).toEqual(["ringbook"]);
    const bridge = exposed.ringbook as Record<string, (...args: unknown[]) => unknown>;
    expect(Object.keys(bridge).toSorted()).toEqual(["call", "pathOf", "subscribe"]);
    expect(bridge.pathOf({ name: "a.csv" })).toBe("/somewhere/a.csv");

    ipcRenderer.invoke.mockResolvedValueOnce({ answer: 3 });
    expect(await bridge.call("hello", {})).toBe(3);
    ipcRenderer.invoke.mockResolvedValueOnce({ error: { code: "x", text: "what and what to do" } });
    await expect(bridge.call("hello", {})).rejects.toThrow("what and what to do");

    const listener = vi.fn();
    const unsubscribe = bridge.subscribe(listener) as () => void;
    ipcRenderer.emit("ringbook:event", { sender: "not handed on" }, { type: "book-changed" });
    unsubscribe();
    ipcRenderer.emit("ringbook:event", {}, { type: "book-changed" });
    expect(listener.mock.calls).toEqual([[{ type: "book-changed" }]]);
  });
});
