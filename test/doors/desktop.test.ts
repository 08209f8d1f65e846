import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { commands, type Bench } from "../../app/bridge.ts";
import { exposed, ipcHandlers, ipcRenderer, StandInWindow } from "../desktop/electron-stand-in.ts";
import { keepsTheContract } from "./contract.ts";
import { temporaryHost } from "./host.ts";

vi.mock("electron", async () => (await import("../desktop/electron-stand-in.ts")).electron());

let place: Awaited<ReturnType<typeof temporaryHost>>;
let closeDoor: () => void;

/** Main process and preload in one process; only Electron's wires between them are the stand-in's. */
beforeAll(async () => {
  const { openDesktopDoor } = await import("../../app/desktop/ipc.ts");
  const { callChannel } = await import("../../app/desktop/channels.ts");
  const { pageAddress } = await import("../../app/desktop/guard.ts");
  await import("../../app/desktop/preload.ts");
  place = await temporaryHost();
  const window = new StandInWindow({ webPreferences: {} });
  const top = { url: pageAddress, parent: null, origin: new URL(pageAddress).origin };
  window.webContents.send = (channel: unknown, event: unknown) =>
    void ipcRenderer.emit(channel as string, {}, structuredClone(event));
  ipcRenderer.invoke.mockImplementation(async (channel: string, ...args: unknown[]) => {
    const handler = ipcHandlers.get(channel === callChannel ? callChannel : "");
    // What crosses IPC is cloned, as Electron does.
    return structuredClone(await handler?.({ senderFrame: top }, ...structuredClone(args)));
  });
  closeDoor = openDesktopDoor(place.host, window as never);
});
afterAll(async () => {
  closeDoor();
  await place.end();
});

describe("the desktop door", () => keepsTheContract(() => exposed.ringbook as Bench));

describe("the desktop door, called from elsewhere", () => {
  it.each(Object.keys(commands))(
    "refuses %s to a foreign page and to a frame inside its own",
    async (name) => {
      const { callChannel } = await import("../../app/desktop/channels.ts");
      const { pageAddress } = await import("../../app/desktop/guard.ts");
      const frames = [
        { url: "https://example.org/", parent: null },
        { url: pageAddress, parent: { url: pageAddress } },
        null,
      ];
      for (const senderFrame of frames)
        expect(await ipcHandlers.get(callChannel)!({ senderFrame }, name, {})).toMatchObject({
          error: { code: "foreign-sender" },
        });
    },
  );
});
