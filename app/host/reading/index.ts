export { isCaptureFile, readFile } from "./read-file.ts";
export { useParseWorker } from "./parse-pool.ts";
