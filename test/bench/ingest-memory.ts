/** A process of its own: reads one file and prints what that took in memory. Arguments: the file, the parse worker's URL. */
import { existsSync, readFileSync } from "node:fs";
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
onProgress();
const seconds = (performance.now() - start) / 1000;
const arrays = captures
  .flatMap(({ channels }) => channels)
  .reduce((sum, { samples }) => sum + samples.byteLength, 0);
const peak = peakOf();
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

/** Bytes. The kernel's own mark where there is one: the other holds what the starting process had, too. */
function peakOf(): number {
  const status = existsSync("/proc/self/status") ? readFileSync("/proc/self/status", "utf8") : "";
  const mark = /^VmHWM:\s*(\d+) kB/m.exec(status);
  return 1024 * (mark ? Number(mark[1]) : process.resourceUsage().maxRSS);
}
