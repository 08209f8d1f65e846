/** Copies a table or figures as text, by click or key. */
import { useCallback } from "react";
import { useKeys } from "../state/keys.ts";
import { useCopy } from "./useCopy.ts";

export function CopyButton({ text, keyName, does }: { text: () => string; keyName: string; does: string }) {
  const put = useCopy();
  const copy = useCallback(() => put(text()), [put, text]);
  useKeys("copy", [{ key: keyName, does, act: copy }]);
  return (
    <button type="button" className="small no-print" onClick={copy} title={does}>
      <kbd>{keyName.toUpperCase()}</kbd> copy
    </button>
  );
}
