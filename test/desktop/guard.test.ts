import { describe, expect, it, vi } from "vitest";
import { StandInContents, session } from "./electron-stand-in.ts";
import { isOwnSender, lockContents, lockSession, pageAddress } from "../../app/desktop/guard.ts";

vi.mock("electron", async () => (await import("./electron-stand-in.ts")).electron());

const frame = (url: string, parent: unknown = null) => ({ senderFrame: { url, parent } }) as never;

describe("the sender of a call", () => {
  it("is answered when it is the top frame of the own page", () => {
    expect(isOwnSender(frame(pageAddress))).toBe(true);
  });

  it.each([
    "https://example.org/",
    "ringbook://page.example.org/",
    "ringbook://elsewhere/index.html",
    "file:///index.html",
    "about:blank",
    "",
  ])("is refused from %s", (address) => expect(isOwnSender(frame(address))).toBe(false));

  it("is refused from a frame inside the page, and from one that is gone", () => {
    expect(isOwnSender(frame(pageAddress, { url: pageAddress }))).toBe(false);
    expect(isOwnSender({ senderFrame: null })).toBe(false);
  });
});

const locked = () => {
  const contents = new StandInContents();
  lockContents(contents as never);
  return contents;
};

const prevented = (name: string, url: string) => {
  const preventDefault = vi.fn();
  locked().emit(name, { url, preventDefault });
  return preventDefault.mock.calls.length === 1;
};

describe("the window's contents", () => {
  it("open no popup", () => {
    expect(locked().openHandler({ url: "https://example.org" })).toEqual({ action: "deny" });
    expect(locked().openHandler({ url: pageAddress })).toEqual({ action: "deny" });
  });

  it("do not leave the page", () => {
    expect(prevented("will-navigate", "https://example.org/")).toBe(true);
    expect(prevented("will-navigate", "file:///etc/hosts")).toBe(true);
    expect(prevented("will-navigate", pageAddress)).toBe(false);
    expect(prevented("will-redirect", pageAddress)).toBe(true);
  });

  it("hold no embedded view", () => expect(prevented("will-attach-webview", pageAddress)).toBe(true));
});

const asked = (permission: string, address: string) => {
  lockSession(session as never);
  const contents = new StandInContents();
  contents.address = address;
  let granted: boolean | null = null;
  session.requests?.(contents, permission, (answer) => (granted = answer));
  return [granted, session.checks?.(null, permission, new URL(address).href)];
};

describe("permissions", () => {
  it.each(["media", "geolocation", "notifications", "midi", "hid", "serial", "fullscreen", "clipboard-read"])(
    "%s is denied",
    (permission) => expect(asked(permission, pageAddress)).toEqual([false, false]),
  );

  it("copying is allowed, to the own page alone", () => {
    expect(asked("clipboard-sanitized-write", pageAddress)).toEqual([true, true]);
    expect(asked("clipboard-sanitized-write", "https://example.org/")).toEqual([false, false]);
  });

  it("no device is ever handed out", () => {
    lockSession(session as never);
    expect(session.devices?.()).toBe(false);
  });
});
