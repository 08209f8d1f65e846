/** The Chromium that is on the machine, and what to do where there is none. */
import { existsSync } from "node:fs";
import { chromium, type Browser } from "playwright-core";
import { describe } from "vitest";
import { chromiumPath } from "./chromium-path.ts";

const found = existsSync(chromiumPath);

if (!found && process.env.CI)
  throw new Error(`window tests need a Chromium at ${chromiumPath}; in CI its absence is a failure`);
if (!found) console.log(`no Chromium at ${chromiumPath}: the window tests are skipped`);

/** `describe`, skipped where no Chromium is. */
export const describeWindow = found ? describe : describe.skip;

export const launch = (): Promise<Browser> =>
  chromium.launch({ executablePath: chromiumPath, chromiumSandbox: false });
