/** A process of its own: reads one file and prints what that took in memory. Arguments: the file, the parse worker's URL. */
import { readFile, useParseWorker } from "../../app/host/reading/index.ts";

useParseWorker(new URL(process.argv[3]));
const idle = process.memoryUsage().rss;
let pauses = 0;
let last = performance.now();
const start = last;
const onProgress = () => {
  pauses = Math.max(pauses, performance.now() - last);
  last = performance.now();
};
const { captures } = await readFile(process.argv[2], {}, { onProgress });
const seconds = (performance.now() - start) / 1000;
const arrays = captures
  .flatMap(({ channels }) => channels)
  .reduce((sum, { samples }) => sum + samples.byteLength, 0);
const peak = process.resourceUsage().maxRSS * 1024;
console.log(
  JSON.stringify({
    idle,
    arrays,
    peak,
    seconds,
    longestPause_ms: pauses,
    samples: captures[0].timebase.samples,
  }),
);
