/** The window's only way out: the bridge, and the path of a file the user dropped. */
import { contextBridge, ipcRenderer, webUtils, type IpcRendererEvent } from "electron";
import type { BenchEvent } from "../bridge.ts";
import { callChannel, eventChannel } from "./channels.ts";

contextBridge.exposeInMainWorld("ringbook", {
  async call(name: string, argument: unknown): Promise<unknown> {
    const reply = await ipcRenderer.invoke(callChannel, name, argument);
    if ("error" in reply) throw new Error(reply.error.text);
    return reply.answer;
  },
  subscribe(listener: (event: BenchEvent) => void): () => void {
    const forward = (_event: IpcRendererEvent, event: BenchEvent) => listener(event);
    ipcRenderer.on(eventChannel, forward);
    return () => ipcRenderer.removeListener(eventChannel, forward);
  },
  pathOf: (file: File): string => webUtils.getPathForFile(file),
});
