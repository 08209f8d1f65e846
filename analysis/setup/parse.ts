import * as v from "valibot";
import { setupSchema, type Setup } from "./schema.ts";

/** A setup that can't be taken; the message names each field and what is wrong with it. */
export class SetupError extends Error {
  constructor(readonly problems: { field: string; text: string }[]) {
    super(problems.map(({ field, text }) => `setup field ${field} ${text}`).join("; "));
    this.name = "SetupError";
  }
}

/** Parsed JSON → Setup. Throws SetupError. */
export function parseSetup(json: unknown): Setup {
  // The schema library takes a list for an object without keys.
  if (Array.isArray(json)) throw new SetupError([{ field: "(whole file)", text: notAnObject }]);
  const result = v.safeParse(setupSchema, json);
  if (result.success) return result.output;
  throw new SetupError(result.issues.map(describe));
}

const notAnObject = "must be a JSON object of setup fields";

function describe(issue: v.BaseIssue<unknown>) {
  const field = v.getDotPath(issue) ?? "(whole file)";
  const unknownKey = issue.type === "strict_object" && issue.expected === "never";
  const wholeFile = issue.type === "strict_object" && !issue.path;
  if (unknownKey) return { field, text: "does not exist: check the spelling" };
  if (wholeFile) return { field, text: notAnObject };
  return { field, text: issue.message };
}
