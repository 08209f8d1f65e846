/** What the window adds to the common format of figures: shares, stated values, missing figures. */
import { formatFigure, formatNumber, formatStated, noFigure } from "../../analysis/format/figure.ts";
import type { Figure } from "../../analysis/reading-format.ts";

export const dash = noFigure;

/** A figure and its unit stay on one line. */
const together = (text: string) => text.replace(/ (\S+)$/, "\u00a0$1");

/** 5.82 ± 0.04 mH, or a dash. */
export const figureText = (figure: Figure | undefined, unit: string) =>
  together(formatFigure(figure ?? null, unit));

/** A plain number, `digits` significant: 368 V, 0.930 ms. */
export const plain = (value: number | null | undefined, unit: string, digits = 3) =>
  together(formatNumber(value ?? null, unit, digits));

/** Percent of a fraction: 19.5 %. */
export function percent(fraction: number | null | undefined, decimals = 0): string {
  if (fraction === null || fraction === undefined) return dash;
  return `${(fraction * 100).toFixed(decimals).replace("-", "−")}\u00a0%`;
}

/** A value as somebody stated it: 12 V, 330 nF, 0.5 °C. */
export const stated = (value: number | null | undefined, unit: string) =>
  value === null || value === undefined ? dash : together(formatStated(value, unit));
