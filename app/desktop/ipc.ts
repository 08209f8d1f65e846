import { ipcMain, type BrowserWindow } from "electron";
import type { Reply } from "../host/call.ts";
import type { Host } from "../host/host.ts";
import { callChannel, eventChannel } from "./channels.ts";
import { isOwnSender } from "./guard.ts";

/** The bridge over IPC: calls in, events out. Answers a function that ends it. */
export function openDesktopDoor(host: Host, window: BrowserWindow): () => void {
  ipcMain.handle(callChannel, async (event, name: unknown, argument: unknown): Promise<Reply> => {
    if (!isOwnSender(event))
      return { error: { code: "foreign-sender", text: "only Ringbook's own page may call" } };
    return host.answer(name, argument);
  });
  const unsubscribe = host.subscribe((event) => {
    if (!window.isDestroyed()) window.webContents.send(eventChannel, event);
  });
  return () => {
    unsubscribe();
    ipcMain.removeHandler(callChannel);
  };
}
