import { ReadingError } from "../errors.ts";
import type { Axes } from "./axes.ts";
import type { StatedTiming } from "./timing.ts";
import { readUnit, type NamedUnit } from "./units.ts";

/** A spectrum looks like a capture; its axis is frequency and no time can be measured in it. */
export function refuseSpectrum(axes: Axes, names: Map<number, NamedUnit>, timing: StatedTiming): void {
  const [{ axis, values }] = axes.groups;
  const axisName = axis === null ? null : names.get(axis);
  const why =
    axisName?.unit?.symbol === "Hz" || /freq/i.test(axisName?.name ?? "")
      ? "its axis is a frequency"
      : timing.axisUnit !== null && readUnit(timing.axisUnit)?.symbol === "Hz"
        ? `its header gives the axis in ${timing.axisUnit}`
        : values.length > 0 && values.every((column) => names.get(column)?.unit?.symbol === "dB")
          ? "its values are in decibels"
          : null;
  if (why)
    throw new ReadingError(
      "spectrum",
      `The file holds a spectrum, not a waveform: ${why}`,
      "Export the waveform the spectrum was computed from",
    );
}
