/** What the reading says of the channels and the time base. */
import type { Capture, Channel, Note } from "./capture.ts";
import type { CaptureReading, ChannelReading } from "./reading-format.ts";

const finite = (value: number | undefined) => (Number.isFinite(value) ? (value as number) : null);

function describeChannel(channel: Channel): ChannelReading {
  const { samples } = channel;

  let low = Infinity;
  let high = -Infinity;
  for (const y of samples) {
    if (y < low && y > -Infinity) low = y;
    if (y > high && y < Infinity) high = y;
  }
  return {
    name: channel.name,
    unit: channel.unit,
    fileUnit: channel.fileUnit,
    role: channel.role,
    roleGuessed: channel.roleGuessed,
    scale: channel.scale,
    lsb: channel.lsb,
    overrange: channel.overrange,
    first: finite(samples[0]),
    last: finite(samples.at(-1)),
    minimum: finite(low),
    maximum: finite(high),
  };
}

/** A reading with nothing read yet. */
export function emptyReading(capture: Capture, notes: Note[]): CaptureReading {
  const { start_s, step_s, stepUncertainty_s, samples } = capture.timebase;
  return {
    record: capture.record,
    notes,
    channels: capture.channels.map(describeChannel),
    timebase: { start_s: step_s === null ? null : start_s, step_s, stepUncertainty_s, samples },
    pulses: [],
    ramp: null,
    combined: { inductance_H: null, capacitance_F: null, resistance_ohm: null, q: null },
    run: { pulses: 0, sparks: 0, quiet: 0, unclear: 0, misfires: null, misfireRate: null },
  };
}
