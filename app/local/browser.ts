import { spawn } from "node:child_process";

/** Opens an address in the user's browser; false where there is none to be had. */
export function openBrowser(address: string): Promise<boolean> {
  const [command, ...args] = openerOf(process.platform, address);
  if (command === undefined) return Promise.resolve(false);
  return new Promise((resolve) => {
    const child = spawn(command, args, { detached: true, stdio: "ignore" });
    child.once("error", () => resolve(false));
    child.once("spawn", () => resolve(true));
    child.unref();
  });
}

function openerOf(platform: NodeJS.Platform, address: string): string[] {
  if (platform === "darwin") return ["open", address];
  if (platform === "win32") return ["rundll32", "url.dll,FileProtocolHandler", address];
  return hasDisplay() ? ["xdg-open", address] : [];
}

/** Windows and macOS always have one; elsewhere an X or Wayland server must be named. */
export const hasDisplay = (): boolean =>
  process.platform === "win32" ||
  process.platform === "darwin" ||
  Boolean(process.env.DISPLAY || process.env.WAYLAND_DISPLAY);
