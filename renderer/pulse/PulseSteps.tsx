/** From pulse to pulse: the one before, the next, the next to look at. By hand and by key alike. */
import { useCallback } from "react";
import type { PulseRow } from "../../app/bridge.ts";
import { nextKeys, nextPulse, type Wanted } from "../run/next-pulse.ts";
import { useSay } from "../shell/say.tsx";
import { useKeys } from "../state/keys.ts";

interface Props {
  rows: PulseRow[];
  at: number;
  onOpen(row: PulseRow): void;
}

export function PulseSteps({ rows, at, onOpen }: Props) {
  const say = useSay();
  const step = useCallback((by: number) => rows[at + by] && onOpen(rows[at + by]), [rows, at, onOpen]);
  const toNext = useCallback(
    (wanted: Wanted, none: string) => {
      const next = nextPulse(rows, at, wanted);
      if (next === null) say(none);
      else onOpen(rows[next]);
    },
    [rows, at, onOpen, say],
  );
  useKeys("pulse", [
    { key: "arrowright", does: "next pulse", act: () => step(1) },
    { key: "arrowleft", does: "pulse before", act: () => step(-1) },
    ...nextKeys.map(({ key, does, wanted, none }) => ({ key, does, act: () => toNext(wanted, none) })),
  ]);
  return (
    <p className="steps-along small no-print" role="group" aria-label="From pulse to pulse">
      <button type="button" disabled={at <= 0} onClick={() => step(-1)}>
        <kbd>←</kbd> before
      </button>
      <button type="button" disabled={at < 0 || at >= rows.length - 1} onClick={() => step(1)}>
        <kbd>→</kbd> next
      </button>
      {nextKeys.map(({ key, does, wanted, none }) => (
        <button
          key={key}
          type="button"
          disabled={nextPulse(rows, at, wanted) === null}
          onClick={() => toNext(wanted, none)}
        >
          <kbd>{key.toUpperCase()}</kbd> {does}
        </button>
      ))}
    </p>
  );
}
