/**
 * A plain decimal number straight from bytes. The value equals Number() of its text to the last bit: up
 * to 2^53 the digits are an exact integer, powers of ten up to 10^22 are exact, and one division or
 * product of exact operands rounds once (IEEE 754). Every other spelling goes through Number() itself.
 */
const tens = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
const largestExact = 9007199254740991;
const [plus, minus, point] = [43, 45, 46];

/** Where the last scanned number ended; the start itself where there was none. */
export let scanEnd = 0;

/** The number at `start`; `scanEnd` says where it ended. NaN, and `scanEnd` = start, without one. */
export function scanNumber(bytes: Uint8Array, start: number, decimal: number): number {
  let at = start;
  let byte = bytes[at];
  const negative = byte === minus;
  if (negative || byte === plus) byte = bytes[++at];
  let digits = 0;
  let scale = 0;
  const whole = at;
  while (byte >= 48 && byte <= 57) {
    digits = digits * 10 + (byte - 48);
    byte = bytes[++at];
  }
  let count = at - whole;
  if (byte === decimal) {
    byte = bytes[++at];
    const fraction = at;
    while (byte >= 48 && byte <= 57) {
      digits = digits * 10 + (byte - 48);
      byte = bytes[++at];
    }
    scale = fraction - at;
    count -= scale;
  }
  scanEnd = start;
  if (count === 0) return NaN;
  if (byte === 101 || byte === 69) {
    const sign = bytes[++at];
    if (sign === minus || sign === plus) at++;
    const first = at;
    let exponent = 0;
    byte = bytes[at];
    while (byte >= 48 && byte <= 57) {
      if (exponent < 10_000) exponent = exponent * 10 + (byte - 48);
      byte = bytes[++at];
    }
    if (at === first) return NaN;
    scale += sign === minus ? -exponent : exponent;
  }
  scanEnd = at;
  if (digits > largestExact || scale < -22 || scale > 22) return spelled(bytes, start, at, decimal);
  const value = scale < 0 ? digits / tens[-scale] : digits * tens[scale];
  return negative ? -value : value;
}

function spelled(bytes: Uint8Array, from: number, to: number, decimal: number): number {
  let text = "";
  for (let at = from; at < to; at++) text += String.fromCharCode(bytes[at] === decimal ? point : bytes[at]);
  return Number(text);
}
