/** `npm start`: the demo run as lines, then the window: Electron's, else the same page on 127.0.0.1. */
import { spawn } from "node:child_process";
import { resolve } from "node:path";
import { fileURLToPath } from "node:url";
import type { Answer, Argument, CommandName } from "./bridge.ts";
import { captureHead } from "./commands/capture-text.ts";
import { complain, readArguments, say, UsageError, withUsage } from "./commands/usage.ts";
import { electronRuntime } from "./desktop/runtime.ts";
import { CallError } from "./host/failure.ts";
import { createHost, type Host } from "./host/host.ts";
import { defaultBook } from "./host/places.ts";
import { hasDisplay, openBrowser } from "./local/browser.ts";
import { openLocalDoor } from "./local/door.ts";

const built = (path: string) => fileURLToPath(new URL(path, import.meta.url));

process.exitCode = await withUsage(async () => {
  const { values, positionals } = readArguments(process.argv.slice(2), {
    "no-window": { type: "boolean" },
    book: { type: "string" },
  });
  if (positionals.length > 0) throw new UsageError(`start takes no path: ${positionals[0]}`);
  const bookPath = resolve(values.book ?? defaultBook());
  const workerUrl = new URL("./worker.js", import.meta.url);
  const host = await createHost({ bookPath, workerUrl, demo: built("../../samples/bench-run") });
  const status = await printCaptures(host);
  const runtime = values["no-window"] ? null : electronRuntime(import.meta.url);
  if (!values["no-window"] && (runtime === null || !hasDisplay())) {
    const missing = runtime === null ? "Electron's runtime is not installed" : "there is no display";
    await serveLocally(host, missing);
    return status;
  }
  await host.close();
  return runtime === null ? status : openElectron(runtime, bookPath);
});

/** One line a capture of the book's latest run; a new book gets the demo run first. */
async function printCaptures(host: Host): Promise<number> {
  let failed = 0;
  const { runs } = await ask(host, "hello", {});
  if (runs === 0) {
    const { job } = await ask(host, "openDemo", {});
    await host.idle();
    const done = (await ask(host, "jobs", {})).find((state) => state.job === job);
    for (const { file, text } of done?.problems ?? []) complain(`${file}: ${text}`);
    failed = done?.problems.length ?? 0;
  }
  const { rows } = await ask(host, "runs", { limit: 1 });
  for (const { run, name } of rows) {
    say(name);
    for (const { capture, file, error } of (await ask(host, "run", { run })).captureRows)
      if (error === null) say(captureHead(file, (await ask(host, "capture", { capture })).reading));
      else say(`${file}  ${error}`);
  }
  return failed > 0 ? 1 : 0;
}

async function ask<Name extends CommandName>(host: Host, name: Name, argument: Argument<Name>) {
  const reply = await host.answer(name, argument);
  if ("error" in reply) throw new CallError(reply.error.code, reply.error.text);
  return reply.answer as Answer<Name>;
}

async function serveLocally(host: Host, missing: string): Promise<void> {
  const door = await openLocalDoor(host, { page: built("../renderer") });
  const opened = await openBrowser(door.address);
  say(
    `${missing}: the window is ${opened ? "opened in your browser" : "served"} at ${door.address} (Ctrl+C ends it)`,
  );
  await new Promise((end) => {
    process.once("SIGINT", end);
    process.once("SIGTERM", end);
  });
  await door.close();
  await host.close();
}

function openElectron(runtime: string, bookPath: string): Promise<number> {
  const window = spawn(runtime, [built("../.."), "--book", bookPath], { stdio: "inherit" });
  return new Promise((done) => {
    window.once("error", (error) => {
      complain(`Electron could not be started: ${error.message}`);
      done(1);
    });
    window.once("exit", (code) => done(code ?? 1));
  });
}
