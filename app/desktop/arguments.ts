import { resolve } from "node:path";

export interface Started {
  book: string | null;
  /** Files and folders to read: "open with", or a second start while the program runs. */
  paths: string[];
}

/** What the program was started with; switches of the runtime itself are passed over. */
export function readStart(argv: string[], packaged: boolean, folder: string): Started {
  const args = argv.slice(packaged ? 1 : 2);
  const started: Started = { book: null, paths: [] };
  for (let i = 0; i < args.length; i++) {
    if (args[i] === "--book" && i + 1 < args.length) started.book = resolve(folder, args[++i]);
    else if (!args[i].startsWith("-")) started.paths.push(resolve(folder, args[i]));
  }
  return started;
}
