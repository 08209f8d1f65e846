import { parseArgs, type ParseArgsConfig } from "node:util";

/** A command of the terminal; answers the exit status. */
export type Command = (args: string[]) => Promise<number>;

/** Wrong usage: said in one line, exit status 2. */
export class UsageError extends Error {}

/** The command's options and paths; throws UsageError for an option that does not exist. */
export function readArguments<Options extends NonNullable<ParseArgsConfig["options"]>>(
  args: string[],
  options: Options,
) {
  try {
    return parseArgs({ args, options, allowPositionals: true, strict: true });
  } catch (error) {
    throw new UsageError((error as Error).message);
  }
}

export const say = (text: string) => process.stdout.write(`${text}\n`);
export const complain = (text: string) => process.stderr.write(`ringbook: ${text}\n`);

/** Runs a command's body; wrong usage becomes exit status 2, any other failure 1, each in one line. */
export async function withUsage(body: () => Promise<number>): Promise<number> {
  try {
    return await body();
  } catch (error) {
    const { describeFailure } = await import("../host/failure.ts");
    complain(describeFailure(error).text);
    return error instanceof UsageError ? 2 : 1;
  }
}
