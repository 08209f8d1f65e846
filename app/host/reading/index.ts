export { isCaptureFile, readFile, type ReadFile, type ReadOptions } from "./read-file.ts";
export { useParseWorker } from "./parse-pool.ts";
