import { captureLine } from "../host/capture-line.ts";
import type { JudgedSource } from "../host/jobs/read-run.ts";
import { captureText } from "./capture-text.ts";
import { readAll, statedSetup } from "./read-all.ts";
import { complain, readArguments, say, UsageError, withUsage } from "./usage.ts";

/** ringbook read PATH… [--setup FILE] [--json] [--book FILE [--keep-files]] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values, positionals } = readArguments(args, {
      setup: { type: "string" },
      json: { type: "boolean" },
      book: { type: "string" },
      "keep-files": { type: "boolean" },
    });
    if (positionals.length === 0) throw new UsageError("read wants the path of a capture or of a folder");
    if (values["keep-files"] && !values.book)
      throw new UsageError("--keep-files copies files into a book: name it with --book");
    const { files, problems } = await readAll(
      positionals,
      await statedSetup(values.setup),
      values.book ?? null,
      values["keep-files"] ?? false,
    );
    for (const { file, text } of problems) complain(`${file}: ${text}`);
    const print = values.json ? printLines : printText;
    for (const file of files) print(file);
    return problems.length > 0 ? 1 : 0;
  });

function printLines(file: JudgedSource) {
  for (const reading of file.readings) say(captureLine(file.path, file.sha256, file.setup, reading));
}

function printText(file: JudgedSource) {
  for (const reading of file.readings) say(captureText(file.path, reading, file.setup));
}
