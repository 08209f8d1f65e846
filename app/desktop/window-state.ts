import { readFileSync, writeFileSync } from "node:fs";
import type { BrowserWindow, Rectangle } from "electron";

export interface WindowState {
  bounds: Partial<Rectangle> & { width: number; height: number };
  maximized: boolean;
}

const first: WindowState = { bounds: { width: 1280, height: 860 }, maximized: false };

/** The window as it was left; as at first where that is unknown or lies on no display any more. */
export function readWindowState(file: string, workAreas: Rectangle[]): WindowState {
  try {
    const { bounds, maximized } = JSON.parse(readFileSync(file, "utf8"));
    const numbers = [bounds.x, bounds.y, bounds.width, bounds.height];
    if (!numbers.every(Number.isInteger) || !workAreas.some((area) => overlap(area, bounds))) return first;
    return { bounds, maximized: maximized === true };
  } catch {
    return first;
  }
}

export function keepWindowState(file: string, window: BrowserWindow): void {
  window.on("close", () => {
    const state = { bounds: window.getNormalBounds(), maximized: window.isMaximized() };
    try {
      writeFileSync(file, JSON.stringify(state));
    } catch {
      // A place that can't be remembered is no reason to keep the window from closing.
    }
  });
}

/** Enough of the window is in the area to take hold of it. */
function overlap(area: Rectangle, bounds: Rectangle): boolean {
  return (
    inner(area.x, area.width, bounds.x, bounds.width) > 100 &&
    inner(area.y, area.height, bounds.y, bounds.height) > 50
  );
}

const inner = (a: number, aLength: number, b: number, bLength: number) =>
  Math.min(a + aLength, b + bLength) - Math.max(a, b);
