/** Electron's main process: one window and one IPC door on the host. */
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { app, BrowserWindow, dialog, Menu, screen, session } from "electron";
import type { RunRow } from "../bridge.ts";
import { describeFailure } from "../host/failure.ts";
import { createHost, type Host } from "../host/host.ts";
import { defaultBook } from "../host/places.ts";
import { desktopActions } from "./actions.ts";
import { readStart } from "./arguments.ts";
import { lockContents, lockSession, pageAddress } from "./guard.ts";
import { openDesktopDoor } from "./ipc.ts";
import { menuTemplate } from "./menu.ts";
import { registerPageScheme, servePage } from "./page.ts";
import { keepWindowState, readWindowState } from "./window-state.ts";

const built = (path: string) => fileURLToPath(new URL(path, import.meta.url));

/** Files that came ("open with") before the window was there. */
const waiting: string[] = [];
let openPaths = (paths: string[]) => {
  waiting.push(...paths);
};

const started = readStart(process.argv, app.isPackaged, process.cwd());
openPaths(started.paths);
registerPageScheme();
app.enableSandbox();
app.on("web-contents-created", (_event, contents) => lockContents(contents));
app.on("open-file", (event, path) => {
  event.preventDefault();
  openPaths([path]);
});
app.on("window-all-closed", () => app.quit());
if (app.requestSingleInstanceLock()) {
  app.on("second-instance", (_event, argv, folder) => {
    const [window] = BrowserWindow.getAllWindows();
    if (window?.isMinimized()) window.restore();
    window?.focus();
    openPaths(readStart(argv, app.isPackaged, folder).paths);
  });
  app.whenReady().then(start, fail).catch(fail);
} else app.quit();

async function start() {
  lockSession(session.defaultSession);
  servePage(session.defaultSession, built("../renderer"));
  const host = await createHost({
    bookPath: started.book ?? defaultBook(),
    workerUrl: new URL("./worker.js", import.meta.url),
    demo: unpacked(built("../../samples/bench-run")),
  });
  const window = createWindow();
  const closeDoor = openDesktopDoor(host, window);
  const actions = desktopActions(host, window);
  const drawMenu = async () =>
    Menu.setApplicationMenu(
      Menu.buildFromTemplate(menuTemplate(actions, await latestRuns(host), process.platform === "darwin")),
    );
  host.subscribe((event) => {
    if (event.type === "book-changed") void drawMenu();
  });
  await drawMenu();
  window.on("closed", () => {
    closeDoor();
    void host.close();
  });
  await window.loadURL(pageAddress);
  openPaths = (paths) => void actions.open(paths);
  openPaths(waiting);
}

function createWindow(): BrowserWindow {
  const stateFile = join(app.getPath("userData"), "window.json");
  const areas = screen.getAllDisplays().map(({ workArea }) => workArea);
  const { bounds, maximized } = readWindowState(stateFile, areas);
  const window = new BrowserWindow({
    ...bounds,
    minWidth: 360,
    minHeight: 400,
    title: "Ringbook",
    webPreferences: {
      preload: built("../preload/preload.cjs"),
      contextIsolation: true,
      sandbox: true,
      nodeIntegration: false,
      webSecurity: true,
      webviewTag: false,
    },
  });
  if (maximized) window.maximize();
  keepWindowState(stateFile, window);
  return window;
}

async function latestRuns(host: Host): Promise<RunRow[]> {
  const reply = await host.answer("runs", { limit: 10 });
  return "error" in reply ? [] : (reply.answer as { rows: RunRow[] }).rows;
}

/** Files that are read as files lie beside the archive, not in it. */
const unpacked = (path: string) => path.replace(/app\.asar(?=[\\/])/, "app.asar.unpacked");

function fail(error: unknown) {
  dialog.showErrorBox("Ringbook can't start", describeFailure(error).text);
  app.exit(1);
}
