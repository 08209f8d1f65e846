import { expect, it } from "vitest";
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, channelOf } from "../reference/captures.ts";
import { coupledTrial } from "../reference/coupled-set.ts";

it("200 circuit-simulated captures: frequency error median ≤ 1, 99 % ≤ 3, worst ≤ 4.5 bounds", async () => {
  const errors: number[] = [];
  for (let seed = 100; seed < 300; seed++) {
    const { trial, truth, bound_Hz } = await coupledTrial(seed);
    const capture = captureOf([channelOf("switch-node", "V", trial.samples, trial.lsb)], trial.step_s);
    const [pulse] = readCapture(capture, {}).reading.pulses;
    expect(pulse.ring!.modes.length).toBeGreaterThanOrEqual(1);
    errors.push(Math.abs(pulse.ring!.modes[0].frequency_Hz.value - truth[0].frequency_Hz) / bound_Hz[0]);
  }
  errors.sort((a, b) => a - b);
  expect(errors[100]).toBeLessThanOrEqual(1);
  expect(errors[197]).toBeLessThanOrEqual(3);
  expect(errors[199]).toBeLessThanOrEqual(4.5);
});
