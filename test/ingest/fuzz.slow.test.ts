import { expect, it } from "vitest";
import { fuzz } from "./fuzz.ts";

it("20,000 damaged files: no crash, no hang, no silent nonsense", () => {
  const { read, refused, faults } = fuzz(20_000, 1_000_000);
  console.log(`${read} read, refused: ${JSON.stringify(refused)}`);
  expect(faults).toEqual([]);
});
