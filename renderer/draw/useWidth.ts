/** The width an element has on the page, in CSS pixels, followed as it changes. */
import { useCallback, useState } from "react";

const least = 240;

/** Answers a ref for the element and its width; `first` until it is on the page. */
export function useWidth<T extends HTMLElement>(first = 960) {
  const [width, setWidth] = useState(first);
  const ref = useCallback((watched: T | null) => {
    if (!watched) return undefined;
    const measure = () => setWidth(Math.max(Math.floor(watched.clientWidth), least));
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(watched);
    return () => observer.disconnect();
  }, []);
  return [ref, width] as const;
}
