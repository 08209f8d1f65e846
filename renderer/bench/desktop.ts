/** The desktop door: the shell puts a Bench on the window before the page runs. */
import type { Bench } from "../../app/bridge.ts";

/** What the desktop door adds: the path of a dropped file. */
export interface DesktopBench extends Bench {
  pathOf(file: File): string;
}

declare global {
  interface Window {
    ringbook?: DesktopBench;
  }
}
