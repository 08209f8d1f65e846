import { homedir } from "node:os";
import { join } from "node:path";

/**
 * Where the bench book and kept files live when nothing else is said: the user's data folder by the
 * XDG Base Directory Specification on Linux, the system's own on Windows and macOS.
 */
export function dataFolder(
  platform: NodeJS.Platform = process.platform,
  env: NodeJS.ProcessEnv = process.env,
  home: string = homedir(),
): string {
  if (platform === "win32") return join(env.APPDATA || join(home, "AppData", "Roaming"), "Ringbook");
  if (platform === "darwin") return join(home, "Library", "Application Support", "Ringbook");
  // The specification ignores relative paths here.
  const xdg = env.XDG_DATA_HOME?.startsWith("/") ? env.XDG_DATA_HOME : join(home, ".local", "share");
  return join(xdg, "ringbook");
}

export const defaultBook = (): string => join(dataFolder(), "ringbook.db");
