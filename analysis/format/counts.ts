import type { RateReading, RunCounts } from "../reading-format.ts";

const percent = (share: number) => (share * 100).toFixed(1);

/** "54 pulses: 36 sparked, 17 misfired, 1 unclear. Misfire rate 32.1 % (19.5 to 47.5 % at 95 %)." */
export function countSentence({ pulses, sparks, quiet, unclear, misfires, misfireRate }: RunCounts): string {
  const silent = misfires === null ? `${quiet} stayed quiet` : `${misfires} misfired`;
  const counted = `${pulses} pulses: ${sparks} sparked, ${silent}, ${unclear} unclear.`;
  if (!misfireRate) return counted;
  return `${counted} Misfire rate ${rateText(misfireRate)}.`;
}

/** "32.1 % (19.5 to 47.5 % at 95 %)" */
export function rateText({ value, low, high, level }: RateReading): string {
  const rate = value === null ? "cannot be given" : `${percent(value)} %`;
  return `${rate} (${percent(low)} to ${percent(high)} % at ${level * 100} %)`;
}
