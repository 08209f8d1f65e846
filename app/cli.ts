#!/usr/bin/env node
import type { Command } from "./commands/usage.ts";

/** The terminal's door. It stays small: a command's code is loaded when that command is asked for. */
const usage = `ringbook – reads oscilloscope captures of switched coils

  ringbook read PATH… [--setup FILE] [--json] [--book FILE]   read captures: a line each, one per pulse
                [--keep-files]                                … the files copied into the book as well
  ringbook coil PATH… | --coil NAME [--json]                  added-capacitor line, ramp, drive design;
                [--current A | --energy J]                    … with the dwell table for that
  ringbook log [--run NAME] [--coil NAME] [--json]            what the bench book holds;
               [--against NAME]                               … the run side by side with another
  ringbook export --run NAME [--kind csv|jsonl] [-o FILE]     a run's pulses for other programs
  ringbook report --run NAME [-o FILE]                        a run as one HTML page to hand over
  ringbook backup FILE                                        a copy of the book, safe while it is in use

PATH is a capture file or a folder of them. Commands on a book take --book FILE, else ringbook.db in
your data folder. Exit status: 0 all read, 1 some file could not be read, 2 wrong usage.
`;

const commands: Record<string, () => Promise<{ run: Command }>> = {
  read: () => import("./commands/read.ts"),
  coil: () => import("./commands/coil.ts"),
  log: () => import("./commands/log.ts"),
  export: () => import("./commands/export.ts"),
  report: () => import("./commands/report.ts"),
  backup: () => import("./commands/backup.ts"),
};

async function main([name, ...args]: string[]): Promise<number> {
  if (name === "--help" || name === "-h" || name === "help") {
    process.stdout.write(usage);
    return 0;
  }
  if (name === "--version") {
    const { version } = await import("../package.json");
    process.stdout.write(`${version}\n`);
    return 0;
  }
  if (name !== undefined && Object.hasOwn(commands, name)) return (await commands[name]()).run(args);
  process.stderr.write(name === undefined ? usage : `ringbook: there is no command "${name}"\n\n${usage}`);
  return 2;
}

// A reader that closes our output early (`| head`) is no failure.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  if (error.code === "EPIPE") process.exit(0);
  throw error;
});
process.exitCode = await main(process.argv.slice(2));
