import { handOver } from "./hand-over.ts";
import { readArguments, withUsage } from "./usage.ts";

/** ringbook report --run NAME [-o FILE] [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values } = readArguments(args, {
      run: { type: "string" },
      output: { type: "string", short: "o" },
      book: { type: "string" },
    });
    return handOver("html", values);
  });
