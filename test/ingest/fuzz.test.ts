import { expect, it } from "vitest";
import { fuzz } from "./fuzz.ts";

it("300 damaged files: no crash, no hang, no silent nonsense", () => {
  const { read, refused, faults } = fuzz(300, 1);
  expect(faults).toEqual([]);
  expect(read).toBeGreaterThan(150);
  expect(Object.keys(refused).length).toBeGreaterThan(1);
});
