/** What the window adds to the common format of figures: shares, stated values, missing figures. */
import { formatFigure, formatNumber, noFigure } from "../../analysis/format/figure.ts";
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

/** A value as somebody stated it, with no digits it has not: 12 V, 330 nF, 0.5 °C. */
export function stated(value: number | null | undefined, unit: string): string {
  if (unit === "°C")
    return value === null || value === undefined ? dash : `${String(value).replace("-", "−")}\u00a0°C`;
  return plain(value, unit, 6)
    .replace(/(\.\d*?)0+(?=\D|$)/, "$1")
    .replace(/\.(?=\D|$)/, "");
}
