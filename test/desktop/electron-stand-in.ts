import { EventEmitter } from "node:events";
import { tmpdir } from "node:os";
import { vi } from "vitest";

/** What the tests look at of the stand-in for the `electron` module. */
export class StandInContents extends EventEmitter {
  sent: unknown[][] = [];
  openHandler: (details: { url: string }) => { action: string } = () => ({ action: "allow" });
  address = "";
  setWindowOpenHandler(handler: (details: { url: string }) => { action: string }) {
    this.openHandler = handler;
  }
  send(...message: unknown[]) {
    this.sent.push(message);
  }
  getURL() {
    return this.address;
  }
}

export class StandInWindow extends EventEmitter {
  static all: StandInWindow[] = [];
  static getAllWindows = () => StandInWindow.all;
  webContents = new StandInContents();
  loaded: string[] = [];
  maximized = false;
  focused = 0;
  constructor(readonly options: Record<string, unknown> & { webPreferences: Record<string, unknown> }) {
    super();
    StandInWindow.all.push(this);
    app.emit("web-contents-created", {}, this.webContents);
  }
  async loadURL(address: string) {
    this.loaded.push(address);
    this.webContents.address = address;
  }
  getNormalBounds = () => ({ x: 10, y: 20, width: 900, height: 700 });
  isMaximized = () => this.maximized;
  maximize = () => (this.maximized = true);
  isDestroyed = () => false;
  isMinimized = () => false;
  restore() {}
  focus = () => this.focused++;
}

class StandInApp extends EventEmitter {
  isPackaged = false;
  sandboxed = false;
  alone = true;
  quits = 0;
  exits: number[] = [];
  userData = tmpdir();
  enableSandbox = () => (this.sandboxed = true);
  requestSingleInstanceLock = () => this.alone;
  whenReady = () => Promise.resolve();
  quit = () => this.quits++;
  exit = (code: number) => this.exits.push(code);
  getPath = () => this.userData;
}

type InvokeHandler = (event: unknown, ...args: unknown[]) => Promise<unknown>;
type PageHandler = (request: { url: string; method: string }) => Promise<Response>;
type Permission = (contents: StandInContents, permission: string, answer: (granted: boolean) => void) => void;

type Check = (contents: null, permission: string, origin: string) => boolean;

export const app = new StandInApp();
export const ipcHandlers = new Map<string, InvokeHandler>();
export const schemes = new Map<string, PageHandler>();
export const session = {
  requests: null as Permission | null,
  checks: null as Check | null,
  devices: null as (() => boolean) | null,
  protocol: { handle: (scheme: string, handler: PageHandler) => schemes.set(scheme, handler) },
  setPermissionRequestHandler: (handler: Permission) => (session.requests = handler),
  setPermissionCheckHandler: (handler: Check) => (session.checks = handler),
  setDevicePermissionHandler: (handler: () => boolean) => (session.devices = handler),
};
export const privileged: unknown[] = [];
export const errorBoxes: string[][] = [];
export const chosen = { filePaths: [] as string[] };
export const menus: { template: { label?: string; submenu?: unknown }[] }[] = [];
export const exposed: Record<string, unknown> = {};
export const ipcRenderer = Object.assign(new EventEmitter(), { invoke: vi.fn() });

/** The module as `vi.mock("electron", …)` wants it. */
export const electron = () => ({
  app,
  BrowserWindow: StandInWindow,
  dialog: {
    showErrorBox: (...box: string[]) => errorBoxes.push(box),
    showMessageBox: async (_window: unknown, box: { message: string }) => errorBoxes.push([box.message]),
    showOpenDialog: async () => chosen,
  },
  ipcMain: {
    handle: (channel: string, handler: InvokeHandler) => ipcHandlers.set(channel, handler),
    removeHandler: (channel: string) => ipcHandlers.delete(channel),
  },
  Menu: {
    buildFromTemplate: (template: never) => ({ template }),
    setApplicationMenu: (menu: never) => menus.push(menu),
  },
  protocol: { registerSchemesAsPrivileged: (list: unknown) => privileged.push(list) },
  screen: { getAllDisplays: () => [{ workArea: { x: 0, y: 0, width: 1920, height: 1080 } }] },
  session: { defaultSession: session },
  contextBridge: { exposeInMainWorld: (name: string, value: unknown) => (exposed[name] = value) },
  ipcRenderer,
  webUtils: { getPathForFile: (file: { name: string }) => `/somewhere/${file.name}` },
});
