/** Splits one line into cells; quoted cells as in RFC 4180, section 2. Checked against csv-spectrum. */
export function splitCells(line: string, separator: string): string[] {
  if (separator === " ") return line.trim().split(/[ \t]+/);
  if (!line.includes('"')) return line.split(separator);
  const cells: string[] = [];
  let at = 0;
  for (;;) {
    quotedCell.lastIndex = at;
    const quoted = quotedCell.exec(line);
    const next = quoted ? at + quoted[0].length : line.indexOf(separator, at);
    const closed = quoted && (next >= line.length || line.startsWith(separator, next));
    if (quoted && closed) {
      cells.push(quoted[1].replaceAll('""', '"'));
      if (next >= line.length) return cells;
      at = next + separator.length;
      continue;
    }
    const end = line.indexOf(separator, at);
    cells.push(end < 0 ? line.slice(at) : line.slice(at, end));
    if (end < 0) return cells;
    at = end + separator.length;
  }
}

const quotedCell = / *"((?:[^"]|"")*)" */y;

/** How many cells stand before the trailing empty ones. */
export function filledWidth(cells: string[]): number {
  let width = cells.length;
  while (width > 0 && cells[width - 1].trim() === "") width--;
  return width;
}
