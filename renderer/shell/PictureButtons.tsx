/** The drawing above as a picture file. */
import { useCallback } from "react";
import { savePng, saveSvg } from "../draw/picture.ts";
import { messageOf } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { useSay } from "./say.tsx";

export function PictureButtons({ of, name }: { of: string; name: string }) {
  const say = useSay();
  const save = useCallback(
    (kind: "png" | "svg") => {
      const drawing = document.querySelector<SVGSVGElement>(of);
      if (!drawing) return;
      (kind === "png" ? savePng(drawing, name) : saveSvg(drawing, name)).then(
        (file) => say(`Saved ${file}.`),
        (error: unknown) => say(messageOf(error)),
      );
    },
    [of, name, say],
  );
  useKeys("picture", [
    { key: "p", does: "save the drawing as a PNG picture", act: () => save("png") },
    { key: "shift+p", does: "save the drawing as an SVG picture", act: () => save("svg") },
  ]);
  return (
    <p className="picture-buttons no-print">
      Save this drawing:{" "}
      <button type="button" className="small" onClick={() => save("png")}>
        <kbd>P</kbd> PNG
      </button>{" "}
      <button type="button" className="small" onClick={() => save("svg")}>
        <kbd>Shift P</kbd> SVG
      </button>
    </p>
  );
}
