/** Copies a table or figures as text, by click or key. */
import { useCallback } from "react";
import { useKeys } from "../state/keys.ts";
import { useSay } from "./say.tsx";

export function CopyButton({ text, keyName, does }: { text: () => string; keyName: string; does: string }) {
  const say = useSay();
  const copy = useCallback(() => {
    // Other programs read a plain blank between a figure and its unit.
    navigator.clipboard.writeText(text().replaceAll("\u00a0", " ")).then(
      () => say("Copied."),
      () => say("The browser does not let this page write to the clipboard."),
    );
  }, [text, say]);
  useKeys("copy", [{ key: keyName, does, act: copy }]);
  return (
    <button type="button" className="small" onClick={copy} title={does}>
      <kbd>{keyName.toUpperCase()}</kbd> copy
    </button>
  );
}
