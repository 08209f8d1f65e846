import { expect, it } from "vitest";
import { ingest, ingestBytes, type ByteSource } from "../../analysis/ingest/index.ts";

const text = Array.from({ length: 3000 }, (_, k) => `${(k * 1e-6).toFixed(6)},${(k % 23) / 8}`).join("\n");
const bytes = new TextEncoder().encode(`Time (s),Node (V)\n${text}\n`);
const source = (): ByteSource => ({
  size: bytes.length,
  read: (offset, length) => bytes.subarray(offset, offset + length),
});

it("in steps gives what it gives at once", async () => {
  const { captures } = await ingest(source(), {});
  expect(captures).toEqual(ingestBytes(bytes, {}));
});

it("tells how it goes and can be stopped at every step, also when all is read", async () => {
  let steps = 0;
  await ingest(source(), {}, { rest: async () => void steps++ });
  expect(steps).toBeGreaterThan(3);
  for (let stop = 1; stop <= steps; stop++) {
    const signal = { aborted: false };
    let step = 0;
    const stopping = ingest(
      source(),
      {},
      { signal, rest: async () => void (signal.aborted = ++step >= stop) },
    );
    await expect(stopping).rejects.toMatchObject({ code: "cancelled" });
    expect(step).toBe(stop);
  }
});
