export { hashOf, isCaptureFile, isFurtherChannel, isSidecar } from "./neighbours.ts";
export { useParseWorker } from "./parse-pool.ts";
export { readFile, type Companion } from "./read-file.ts";
