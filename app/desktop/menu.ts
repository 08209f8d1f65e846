import type { MenuItemConstructorOptions } from "electron";
import type { RunRow } from "../bridge.ts";

export interface MenuActions {
  openFiles(): void;
  openFolder(): void;
  watchFolder(): void;
  showRun(run: number): void;
}

/** The menu of the window; runs as they stand in the book, the latest first. */
export function menuTemplate(
  actions: MenuActions,
  recent: RunRow[],
  mac: boolean,
): MenuItemConstructorOptions[] {
  const runs = recent.map(({ run, name }) => ({ label: name, click: () => actions.showRun(run) }));
  return [
    ...(mac ? [{ role: "appMenu" } as const] : []),
    {
      label: "&Book",
      submenu: [
        { label: "Read captures…", accelerator: "CmdOrCtrl+O", click: actions.openFiles },
        { label: "Read a folder…", accelerator: "CmdOrCtrl+Shift+O", click: actions.openFolder },
        { label: "Watch a folder…", click: actions.watchFolder },
        { type: "separator" },
        { label: "Latest runs", enabled: runs.length > 0, submenu: runs },
        { type: "separator" },
        { role: mac ? "close" : "quit" },
      ],
    },
    { role: "editMenu" },
    {
      label: "&View",
      submenu: [
        { role: "resetZoom" },
        { role: "zoomIn" },
        { role: "zoomOut" },
        { type: "separator" },
        { role: "togglefullscreen" },
      ],
    },
    { role: "windowMenu" },
  ];
}
