/** Puts text on the clipboard and says so. */
import { useCallback } from "react";
import { useSay } from "./say.tsx";

export function useCopy(): (text: string, said?: string) => void {
  const say = useSay();
  return useCallback(
    (text, said = "Copied.") => {
      // Other programs read a plain blank between a figure and its unit.
      navigator.clipboard.writeText(text.replaceAll("\u00a0", " ")).then(
        () => say(said),
        () => say("The browser does not let this page write to the clipboard."),
      );
    },
    [say],
  );
}
