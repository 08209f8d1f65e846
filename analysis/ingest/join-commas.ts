const [comma, point, lineFeed, carriageReturn] = [44, 46, 10, 13];

/** For a file stated to be so: in lines of digits, every first comma of two becomes the decimal point. */
export function joinDecimalCommas(bytes: Uint8Array): Uint8Array<ArrayBuffer> {
  const joined = new Uint8Array(bytes);
  let from = 0;
  while (from < joined.length) {
    let to = from;
    while (to < joined.length && joined[to] !== lineFeed && joined[to] !== carriageReturn) to++;
    const line = joined.subarray(from, to);
    if (line.every(isOfNumbers)) joinLine(line);
    from = to + 1;
  }
  return joined;
}

/** Digits, signs, commas and blanks. */
const isOfNumbers = (byte: number) => (byte >= 43 && byte <= 57 && byte !== 47) || byte === 32;

function joinLine(line: Uint8Array): void {
  let first = true;
  for (let at = 0; at < line.length; at++) {
    if (line[at] !== comma) continue;
    if (first) line[at] = point;
    first = !first;
  }
}
