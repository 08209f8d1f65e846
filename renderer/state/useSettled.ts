/** A value once it has been left alone for a moment: what is being typed is not asked about letter by letter. */
import { useEffect, useState } from "react";

const pause_ms = 300;

export function useSettled<T>(value: T): T {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), pause_ms);
    return () => clearTimeout(timer);
  }, [value]);
  return settled;
}
