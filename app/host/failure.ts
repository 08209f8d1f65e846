import { ReadingError } from "../../analysis/errors.ts";
import { SetupError } from "../../analysis/setup/parse.ts";

/** A call that can't be answered, with a stable code and a text for people. */
export class CallError extends Error {
  constructor(
    readonly code: string,
    text: string,
  ) {
    super(text);
    this.name = "CallError";
  }
}

export interface Failure {
  code: string;
  text: string;
}

const systemAdvice: Record<string, string> = {
  ENOENT: "there is no such file. Check the path",
  EACCES: "permission denied. Give yourself the right to read it",
  EPERM: "permission denied. Give yourself the right to read it",
  EISDIR: "this is a folder, not a file. Name the files in it",
  ENOSPC: "the disk is full. Free some space and try again",
  EROFS: "the disk can't be written to. Choose another place",
  EMFILE: "too many files are open. Close other programs and try again",
};

/** Any error as code and text; never a stack, never an error object of another realm. */
export function describeFailure(error: unknown): Failure {
  if (error instanceof CallError) return { code: error.code, text: error.message };
  if (error instanceof ReadingError) return { code: error.code, text: withPlace(error) };
  if (isFailure(error)) return error;
  if (error instanceof SetupError) return { code: "wrong-setup", text: error.message };
  const { code, message } = error as { code?: unknown; message?: unknown };
  if (typeof code === "string" && code in systemAdvice) {
    const path = (error as { path?: string }).path;
    return { code: code.toLowerCase(), text: path ? `${path}: ${systemAdvice[code]}` : systemAdvice[code] };
  }
  const text = typeof message === "string" && message !== "" ? message : String(error);
  return { code: typeof code === "string" ? code : "failed", text };
}

/** Described already, in a thread or where it was met. */
const isFailure = (error: unknown): error is Failure =>
  !(error instanceof Error) &&
  typeof (error as Failure).code === "string" &&
  typeof (error as Failure).text === "string";

function withPlace(error: ReadingError): string {
  const { line, byte } = error.place;
  if (line !== undefined) return `line ${line}: ${error.message}`;
  return byte === undefined ? error.message : `byte ${byte}: ${error.message}`;
}
