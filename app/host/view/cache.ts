/** Keeps what was used last, up to a total of bytes; the newest entry always stays. */
export function createCache<Value>(mostBytes: number, bytesOf: (value: Value) => number) {
  const entries = new Map<string, Value>();
  let bytes = 0;

  function drop(key: string) {
    const value = entries.get(key);
    if (value === undefined) return;
    bytes -= bytesOf(value);
    entries.delete(key);
  }

  return {
    get(key: string): Value | undefined {
      const value = entries.get(key);
      if (value === undefined) return undefined;
      // A Map keeps the order of insertion: in again at its end makes it the youngest.
      entries.delete(key);
      entries.set(key, value);
      return value;
    },
    set(key: string, value: Value) {
      drop(key);
      entries.set(key, value);
      bytes += bytesOf(value);
      for (const oldest of entries.keys()) {
        if (bytes <= mostBytes || entries.size === 1) break;
        drop(oldest);
      }
    },
  };
}
