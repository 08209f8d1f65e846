// A thread that dies of some files: it stands for one that runs out of memory in the middle of a read.
import { parentPort } from "node:worker_threads";

const read = new Set();

parentPort.on("message", ({ number, name, argument }) => {
  if (name === "read") {
    if (argument.path.includes("deadly")) process.exit(7);
    if (argument.path.includes("throws")) throw new Error("no memory left");
    if (argument.path.includes("endless")) return;
    read.add(argument.path);
    parentPort.postMessage({ number, kind: "progress", fraction: 0.5 });
    parentPort.postMessage({
      number,
      kind: "answer",
      answer: { sha256: "", bytes: 1, records: 1, layout: "", asked: [] },
    });
    return;
  }
  const missing = argument.files.map(({ path }) => path).filter((path) => !read.has(path));
  const files = argument.files.map(({ path }) => ({
    path,
    sha256: "",
    bytes: 1,
    layout: "",
    readings: [],
    sketches: [],
  }));
  parentPort.postMessage({
    number,
    kind: "answer",
    answer: missing.length > 0 ? { missing } : { files, run: {} },
  });
});
