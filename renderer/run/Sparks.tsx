/** When the run's sparks struck and at what voltage the gap broke down. */
import { memo, useMemo } from "react";
import type { RunCourse } from "../../app/bridge.ts";
import type { RunTrends } from "../../analysis/spark/run-trends.ts";
import { percent, plain } from "../format/figure.ts";
import { plural } from "../format/words.ts";
import { Distribution } from "./Distribution.tsx";

const known = (values: (number | null)[]) => values.filter((value) => value !== null);

export const Sparks = memo(function Sparks({ course }: { course: RunCourse }) {
  const onsets = useMemo(() => known(course.onset_s), [course]);
  const broke = useMemo(() => known(course.breakdown_V), [course]);
  const fitted = useMemo(() => weibullMarks(course.trends?.breakdown_V ?? null), [course]);
  if (onsets.length === 0 && broke.length === 0) return null;
  const { trends, breakdownFrom } = course;
  return (
    <section className="sparks" aria-labelledby="sparks-title">
      <h2 id="sparks-title">How it sparked</h2>
      <div className="distributions">
        {onsets.length > 0 && (
          <figure>
            <figcaption>
              <strong>Onset after switch-off.</strong> {onsetSentence(onsets, trends)}
            </figcaption>
            <Distribution
              label={`Onset of ${plural(onsets.length, "spark")} after switch-off`}
              values={onsets}
              unit="s"
              marks={none}
            />
          </figure>
        )}
        <figure>
          <figcaption>
            <strong>Breakdown voltage.</strong> {breakdownSentence(broke.length, breakdownFrom, trends)}
          </figcaption>
          {broke.length > 0 && (
            <Distribution
              label={`Breakdown voltage of ${plural(broke.length, "spark")}`}
              values={broke}
              unit="V"
              marks={fitted}
            />
          )}
        </figure>
      </div>
    </section>
  );
});

const none: never[] = [];

function onsetSentence(onsets: number[], trends: RunTrends | null): string {
  const told = trends?.onset_s;
  return told
    ? `Median ${plain(told.median, "s")}, spread ${plain(told.spread, "s", 2)}, ${plural(onsets.length, "spark")}.`
    : `${plural(onsets.length, "spark")}.`;
}

function breakdownSentence(
  count: number,
  from: RunCourse["breakdownFrom"],
  trends: RunTrends | null,
): string {
  if (count === 0)
    return "Not to be had: it needs the secondary on a channel, or the turns ratio on the card.";
  const source =
    from === "secondary"
      ? "Measured at the secondary."
      : "Referred from the switch node through the stated turns ratio.";
  const fit = trends?.breakdown_V;
  if (!fit)
    return `${source} Too few or too alike for a distribution to be fitted: ${plural(count, "breakdown")}.`;
  const held =
    fit.held > 0
      ? `${plural(fit.held, "quiet pulse")} held and ${fit.held === 1 ? "counts" : "count"} as more than its peak`
      : "no quiet pulse’s peak is on screen to count as held";
  const bounds = ({ low, high }: { low: number; high: number }, unit: string) =>
    `${plain(low, unit)} to ${plain(high, unit)}`;
  return (
    `${source} Weibull fit: 63 % lie below ${plain(fit.scale_V.value, "V")} (${bounds(fit.scale_V, "V")}), ` +
    `one in ten below ${plain(fit.tenth_V.value, "V")} (${bounds(fit.tenth_V, "V")}), ` +
    `shape ${plain(fit.shape.value, "")} (${bounds(fit.shape, "")}), each at ${percent(fit.level)}; ` +
    `${plural(fit.broke, "breakdown")}, ${held}.`
  );
}

function weibullMarks(fit: RunTrends["breakdown_V"]) {
  if (!fit) return none;
  return [
    { words: "63 % below", ...fit.scale_V },
    { words: "one in ten below", ...fit.tenth_V },
  ];
}
