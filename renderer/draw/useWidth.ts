/** The width an element has on the page, in CSS pixels, followed as it changes. */
import { useLayoutEffect, useRef, useState } from "react";

export function useWidth<T extends HTMLElement>(first = 960) {
  const element = useRef<T>(null);
  const [width, setWidth] = useState(first);
  useLayoutEffect(() => {
    const watched = element.current;
    if (!watched) return undefined;
    const measure = () => setWidth(Math.max(Math.floor(watched.clientWidth), 240));
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(watched);
    return () => observer.disconnect();
  }, []);
  return [element, width] as const;
}
