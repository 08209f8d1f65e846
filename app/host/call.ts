import * as v from "valibot";
import { commands, type Answer, type Argument, type CommandName } from "../bridge.ts";
import { CallError, describeFailure, type Failure } from "./failure.ts";

export type Handlers = {
  [Name in CommandName]: (argument: Argument<Name>) => Promise<Answer<Name>> | Answer<Name>;
};

/** What a door sends back, whatever carries it. */
export type Reply = { answer: unknown } | { error: Failure };

const isCommand = (name: string): name is CommandName => Object.hasOwn(commands, name);

/** The one place where a call from outside is checked: its name and every field of its argument. */
export async function answerCall(handlers: Handlers, name: unknown, argument: unknown): Promise<Reply> {
  try {
    if (typeof name !== "string" || !isCommand(name))
      throw new CallError("unknown-command", `there is no command ${JSON.stringify(name)}`);
    // The schema library takes a list for an object without keys.
    if (Array.isArray(argument))
      throw new CallError("wrong-argument", `wrong argument of ${name}: a list is none`);
    const checked = v.safeParse(commands[name], argument);
    if (!checked.success) throw new CallError("wrong-argument", describeIssues(name, checked.issues));
    const handler = handlers[name] as (argument: unknown) => unknown;
    return { answer: await handler(checked.output) };
  } catch (error) {
    return { error: describeFailure(error) };
  }
}

function describeIssues(name: string, issues: v.BaseIssue<unknown>[]): string {
  const lines = issues.slice(0, 5).map((issue) => {
    const field = v.getDotPath(issue);
    return field ? `${field}: ${issue.message}` : issue.message;
  });
  return `wrong argument of ${name}: ${lines.join("; ")}`;
}
