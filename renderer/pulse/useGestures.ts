/** Drag pans, the wheel zooms once the figure is in hand (clicked, or with Ctrl), a double click resets. */
import { useEffect, useLayoutEffect, useRef, type PointerEvent, type RefObject } from "react";
import type { Scale } from "../draw/scale.ts";
import type { PlacedNote } from "./layout.ts";
import type { PulseFigureProps } from "./PulseFigure.tsx";

const nearby = 26;

export function useGestures(
  x: Scale,
  plotWidth: number,
  onMove: PulseFigureProps["onMove"],
  placed: PlacedNote[],
  onLight: (id: string | null) => void,
  ref: RefObject<SVGSVGElement | null>,
) {
  const drag = useRef<number | null>(null);
  const latest = useRef({ x, plotWidth, onMove });
  useLayoutEffect(() => {
    latest.current = { x, plotWidth, onMove };
  });

  useEffect(() => {
    const svg = ref.current;
    if (!svg) return undefined;
    // React's own wheel listener is passive and could not keep the page from scrolling.
    const wheel = (event: WheelEvent) => {
      const { x, plotWidth, onMove } = latest.current;
      const at = pixelOf(svg, event);
      const inHand = event.ctrlKey || document.activeElement === svg;
      if (!inHand || at.x > plotWidth) return;
      event.preventDefault();
      onMove({ factor: 1.0015 ** event.deltaY, at: x.invert(at.x) });
    };
    svg.addEventListener("wheel", wheel, { passive: false });
    return () => svg.removeEventListener("wheel", wheel);
  }, [ref]);

  const handlers = {
    onPointerDown(event: PointerEvent<SVGSVGElement>) {
      const at = pixelOf(event.currentTarget, event);
      if (event.button !== 0 || at.x > plotWidth) return;
      drag.current = at.x;
      event.currentTarget.setPointerCapture(event.pointerId);
    },
    onPointerMove(event: PointerEvent<SVGSVGElement>) {
      const at = pixelOf(event.currentTarget, event);
      if (drag.current !== null) {
        onMove({ pan: x.invert(drag.current) - x.invert(at.x) });
        drag.current = at.x;
      } else if (at.x <= plotWidth) onLight(nearest(placed, at));
    },
    onPointerUp() {
      drag.current = null;
    },
    onPointerLeave: () => onLight(null),
    onDoubleClick: () => onMove({ reset: true }),
  };
  return handlers;
}

/** Page coordinates → the drawing's own. */
function pixelOf(svg: SVGSVGElement, { clientX, clientY }: { clientX: number; clientY: number }) {
  const box = svg.getBoundingClientRect();
  const scale = svg.viewBox.baseVal.width / box.width;
  return { x: (clientX - box.left) * scale, y: (clientY - box.top) * scale };
}

function nearest(placed: PlacedNote[], at: { x: number; y: number }): string | null {
  const distances = placed
    .filter(({ lane }) => lane !== null)
    .map(({ note, lane }) => ({ id: note.id, distance: Math.hypot(lane!.x - at.x, lane!.y - at.y) }))
    .toSorted((a, b) => a.distance - b.distance);
  return distances[0] && distances[0].distance < nearby ? distances[0].id : null;
}
