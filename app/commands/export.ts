import { handOver } from "./hand-over.ts";
import { readArguments, UsageError, withUsage } from "./usage.ts";

/** ringbook export --run NAME [--kind csv|jsonl] [-o FILE] [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values } = readArguments(args, {
      run: { type: "string" },
      kind: { type: "string", default: "csv" },
      output: { type: "string", short: "o" },
      book: { type: "string" },
    });
    if (values.kind !== "csv" && values.kind !== "jsonl")
      throw new UsageError(`--kind is csv or jsonl, not "${values.kind}"`);
    return handOver(values.kind, values);
  });
