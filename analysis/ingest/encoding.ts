/** How characters are coded in the file; all of it is handled as UTF-8 or single bytes from here on. */
export type Encoding = "bytes" | "utf-16le" | "utf-16be";

/** The coding and how many bytes of byte order mark stand in front. */
export function detectEncoding(head: Uint8Array): { encoding: Encoding; mark: number } {
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return { encoding: "bytes", mark: 3 };
  if (head[0] === 0xff && head[1] === 0xfe) return { encoding: "utf-16le", mark: 2 };
  if (head[0] === 0xfe && head[1] === 0xff) return { encoding: "utf-16be", mark: 2 };
  return { encoding: everySecondByteZero(head), mark: 0 };
}

function everySecondByteZero(head: Uint8Array): Encoding {
  const pairs = Math.min(head.length, 2000) >> 1;
  let even = 0;
  let odd = 0;
  for (let i = 0; i < pairs; i++) {
    if (head[2 * i] === 0) even++;
    if (head[2 * i + 1] === 0) odd++;
  }
  if (pairs < 2) return "bytes";
  if (odd >= 0.9 * pairs && even <= 0.1 * pairs) return "utf-16le";
  if (even >= 0.9 * pairs && odd <= 0.1 * pairs) return "utf-16be";
  return "bytes";
}

/** UTF-16 code units → UTF-8 bytes. `bytes` must hold whole code units. */
export function utf16ToUtf8(bytes: Uint8Array, encoding: "utf-16le" | "utf-16be"): Uint8Array {
  const low = encoding === "utf-16le" ? 0 : 1;
  const out = new Uint8Array((bytes.length >> 1) * 3);
  let end = 0;
  for (let i = 0; i + 1 < bytes.length; i += 2) {
    const unit = bytes[i + low] | (bytes[i + 1 - low] << 8);
    if (unit < 0x80) out[end++] = unit;
    else if (unit < 0x800) {
      out[end++] = 0xc0 | (unit >> 6);
      out[end++] = 0x80 | (unit & 63);
    } else {
      out[end++] = 0xe0 | (unit >> 12);
      out[end++] = 0x80 | ((unit >> 6) & 63);
      out[end++] = 0x80 | (unit & 63);
    }
  }
  return out.subarray(0, end);
}

// The upper half of the page most single-byte files are in, where it differs from Latin-1 (0x80–0x9f).
const upperPage = "€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008dŽ\u008f\u0090‘’“”•–—˜™š›œ\u009džŸ";

/** Text for people and for the layout: UTF-8, or a single-byte page where the bytes are no UTF-8. */
export function decodeText(bytes: Uint8Array): string {
  const parts: string[] = [];
  for (let at = 0; at < bytes.length; at += 8192) parts.push(singleBytes(bytes.subarray(at, at + 8192)));
  const raw = parts.join("");
  if (!/[\x80-\xff]/.test(raw)) return raw;
  return decodeUtf8(raw) ?? raw.replace(/[\x80-\x9f]/g, (c) => upperPage[c.charCodeAt(0) - 0x80]);
}

const singleBytes = (bytes: Uint8Array) => String.fromCharCode(...bytes);

function decodeUtf8(raw: string): string | null {
  try {
    return decodeURIComponent(
      raw.replace(/[%\x80-\xff]/g, (c) => `%${c.charCodeAt(0).toString(16).padStart(2, "0")}`),
    );
  } catch {
    return null;
  }
}
