import { dialog, type BrowserWindow } from "electron";
import type { BenchEvent } from "../bridge.ts";
import type { Host } from "../host/host.ts";
import { eventChannel } from "./channels.ts";
import type { MenuActions } from "./menu.ts";

/** What the menu and "open with" do: a dialog where one is needed, then a call like the page's own. */
export function desktopActions(
  host: Host,
  window: BrowserWindow,
): MenuActions & { open(paths: string[]): Promise<void> } {
  async function call(name: string, argument: unknown) {
    const reply = await host.answer(name, argument);
    if ("error" in reply) await dialog.showMessageBox(window, { type: "warning", message: reply.error.text });
  }
  async function choose(properties: ("openFile" | "openDirectory" | "multiSelections")[]) {
    const { filePaths } = await dialog.showOpenDialog(window, { properties });
    return filePaths;
  }
  async function open(paths: string[]) {
    if (paths.length > 0) await call("open", { sources: paths.map((path) => ({ path })) });
  }
  return {
    open,
    openFiles: async () => open(await choose(["openFile", "multiSelections"])),
    openFolder: async () => open(await choose(["openDirectory"])),
    async watchFolder() {
      for (const path of await choose(["openDirectory"])) await call("watch", { path });
    },
    showRun(run) {
      window.webContents.send(eventChannel, { type: "show-run", run } satisfies BenchEvent);
    },
  };
}
