import { withBook } from "./book-option.ts";
import { complain, readArguments, UsageError, withUsage } from "./usage.ts";

/** ringbook backup FILE [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values, positionals } = readArguments(args, { book: { type: "string" } });
    const [file] = positionals;
    if (positionals.length !== 1) throw new UsageError("backup wants one file to copy the book to");
    return withBook(values.book, async (book) => {
      await book.backup(file);
      complain(`${book.path} is copied to ${file}`);
      return 0;
    });
  });
