/** A file or capture that can't be used: what is wrong, where, and what to do about it. */
export class ReadingError extends Error {
  constructor(
    /** Stable, kebab-case: "empty-file", "no-numbers", … */
    readonly code: string,
    /** What is wrong and where. */
    what: string,
    /** What the user can do. */
    readonly advice: string,
    readonly place: { line?: number; byte?: number } = {},
  ) {
    super(`${what}. ${advice}`);
    this.name = "ReadingError";
  }
}
