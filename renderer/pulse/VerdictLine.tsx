/** The verdict in a sentence, and the user's own beside it: one key each, with a remark. */
import { useCallback, useRef, useState } from "react";
import type { PulseReading, Verdict } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { percent } from "../format/figure.ts";
import { verdictWord } from "../format/words.ts";
import { messageOf, useBench } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { useSay } from "../shell/say.tsx";
import { Mark } from "../shell/Mark.tsx";

interface Props {
  capture: number;
  pulse: PulseReading;
  setup: Setup;
}

const choices: { verdict: Verdict; key: string; does: string }[] = [
  { verdict: "spark", key: "s", does: "it sparked" },
  { verdict: "no-spark", key: "m", does: "it did not" },
  { verdict: "unclear", key: "u", does: "I can’t tell" },
];

export function VerdictLine({ capture, pulse, setup }: Props) {
  const bench = useBench();
  const say = useSay();
  const remark = useRef<HTMLInputElement>(null);
  const [draft, setDraft] = useState<{ key: string; text: string } | null>(null);
  const key = `${capture}/${pulse.index}`;
  const text = draft?.key === key ? draft.text : (pulse.ruled?.remark ?? "");

  const rule = useCallback(
    (verdict: Verdict | null, words = text) => {
      bench.call("rule", { capture, pulse: pulse.index, verdict, remark: words }).then(
        () =>
          say(
            verdict === null
              ? "Your verdict is taken back."
              : `Kept: ${verdictWord(verdict, setup.expected)}.`,
          ),
        (error: unknown) => say(messageOf(error)),
      );
    },
    [bench, capture, pulse.index, text, say, setup.expected],
  );
  useKeys("verdict", [
    ...choices.map(({ verdict, key, does }) => ({
      key,
      does: `your verdict: ${does}`,
      act: () => rule(verdict),
    })),
    { key: "x", does: "take your verdict back", act: () => rule(null) },
    { key: "n", does: "write a remark", act: () => remark.current?.focus() },
  ]);

  const { ruled, spark } = pulse;
  return (
    <section className="verdict" aria-label="Verdict">
      <p className="verdict-sentence">
        <Mark verdict={ruled?.verdict ?? spark?.verdict ?? null} />
        {spark
          ? `${capital(verdictWord(spark.verdict, setup.expected))}, ${percent(spark.confidence, spark.confidence > 0.99 ? 1 : 0)} sure, judged ${against[spark.judgedAgainst]}.`
          : "Not judged: there is no ring to judge by."}
        {ruled && <strong> You say: {verdictWord(ruled.verdict, setup.expected)}.</strong>}
        {ruled?.remark && <span className="print-only"> “{ruled.remark}”</span>}
      </p>
      <div className="verdict-choice no-print" role="group" aria-label="Your own verdict">
        {choices.map(({ verdict, key, does }) => (
          <button
            key={key}
            type="button"
            aria-pressed={ruled?.verdict === verdict}
            onClick={() => rule(verdict)}
          >
            <kbd>{key.toUpperCase()}</kbd> {does}
          </button>
        ))}
        {ruled && (
          <button type="button" onClick={() => rule(null)}>
            <kbd>X</kbd> take it back
          </button>
        )}
        <label className="remark">
          <kbd>N</kbd> remark{" "}
          <input
            ref={remark}
            value={text}
            maxLength={2000}
            onChange={(event) => setDraft({ key, text: event.target.value })}
            onKeyDown={(event) => {
              if (event.key !== "Enter" && event.key !== "Escape") return;
              if (event.key === "Enter") rule(ruled?.verdict ?? spark?.verdict ?? "unclear", text);
              event.currentTarget.blur();
            }}
          />
        </label>
      </div>
      {spark && spark.reasons.length > 0 && (
        <details className="reasons">
          <summary>
            Why: {spark.reasons.length === 1 ? "one reason" : `${spark.reasons.length} reasons`}
          </summary>
          <ol>
            {spark.reasons.map((reason) => (
              <li key={reason}>{reason}</li>
            ))}
          </ol>
        </details>
      )}
    </section>
  );
}

const capital = (word: string) => word[0].toUpperCase() + word.slice(1);

const against = {
  run: "against the run’s quiet pulses",
  setup: "against what the setup lets expect",
  itself: "against its own ring alone",
};
