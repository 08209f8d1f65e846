import { openBook, type Book } from "../host/book/index.ts";
import { defaultBook } from "../host/places.ts";
import { complain } from "./usage.ts";

/** Opens the book that `--book` names, else the user's own, and closes it after `use`. */
export async function withBook(
  path: string | undefined,
  use: (book: Book) => Promise<number>,
): Promise<number> {
  const book = await openBook(path ?? defaultBook());
  if (book.note) complain(book.note);
  try {
    return await use(book);
  } finally {
    book.close();
  }
}
