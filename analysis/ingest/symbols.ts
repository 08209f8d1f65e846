/** Logic and bus columns: a hex word stands for its bits, any other symbol for no number. */

const hexWord = /^(?:0x|h|\$|#h)?([0-9a-f]+)h?$/i;

/** The value of one symbol; NaN where it has none ("X", "Z", a word). */
export function readSymbol(text: string): number {
  const match = hexWord.exec(
    text
      .trim()
      .replace(/^"(.*)"$/, "$1")
      .trim(),
  );
  return match && match[1].length <= 13 ? parseInt(match[1], 16) : NaN;
}

/** Fewer cells than this must look like symbols by themselves. */
const fewWords = 12;

/** Whether cells that are not numbers come from a small set or are hex words: a column of symbols. */
export function looksSymbolic(cells: string[]): boolean {
  const words = cells.map((cell) => cell.trim()).filter((cell) => cell !== "");
  if (words.length < 3) return false;
  if (words.every((word) => word.length <= 18 && hexWord.test(word))) return true;
  if (words.length < fewWords) return words.every((word) => /^([xzu01-]+|(0x|h|\$)[0-9a-f]+)$/i.test(word));
  const short = words.every((word) => word.length <= 12 && !/\s/.test(word));
  return short && new Set(words).size <= Math.max(4, words.length / 8);
}
