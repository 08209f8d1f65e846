/** Onsets and breakdowns of two runs, one below the other on the same scale. */
import { useMemo } from "react";
import type { RunCourse, RunDetail } from "../../app/bridge.ts";
import { plural } from "../format/words.ts";
import { Distribution, fenced, type FittedMark } from "../run/Distribution.tsx";
import { useAnswer, useDesk } from "../state/bench.tsx";

const none: FittedMark[] = [];

export function BesideSparks({ runs: [a, b] }: { runs: [RunDetail, RunDetail] }) {
  const { runs } = useDesk();
  const first = useAnswer("course", { run: a.run }, runs[a.run] ?? 0).answer;
  const second = useAnswer("course", { run: b.run }, runs[b.run] ?? 0).answer;
  if (!first || !second) return null;
  const names: [string, string] = [a.name, b.name];
  return (
    <div className="distributions">
      <Pair title="Onset after switch-off" unit="s" names={names} of={[first.onset_s, second.onset_s]} />
      <Pair
        title={titleOf(first, second)}
        unit="V"
        names={names}
        of={[first.breakdown_V, second.breakdown_V]}
      />
    </div>
  );
}

const sources = { secondary: "measured", ratio: "through the ratio" };

/** Measured and referred voltages are not the same thing: which is which is said. */
function titleOf(first: RunCourse, second: RunCourse): string {
  const from = [first, second].map(({ breakdownFrom }) => breakdownFrom && sources[breakdownFrom]);
  if (from[0] === from[1] || !from[0] || !from[1])
    return `Breakdown voltage${(from[0] ?? from[1]) ? `, ${from[0] ?? from[1]}` : ""}`;
  return `Breakdown voltage, ${from[0]} in the first and ${from[1]} in the second`;
}

interface PairProps {
  title: string;
  unit: string;
  names: [string, string];
  of: [(number | null)[], (number | null)[]];
}

function Pair({ title, unit, names, of }: PairProps) {
  const values = useMemo(() => of.map((list) => list.filter((value) => value !== null)), [of]);
  const range = useMemo((): [number, number] => {
    const all = values.flatMap((list) => fenced(list).near).toSorted((p, q) => p - q);
    return [all[0], all[all.length - 1]];
  }, [values]);
  if (values.flat().length === 0) return null;
  return (
    <figure>
      <figcaption>
        <strong>{title}.</strong>
      </figcaption>
      {values.map((list, at) =>
        list.length === 0 ? (
          <p key={names[at]} className="quiet">
            {names[at]}: none to be had.
          </p>
        ) : (
          <div key={names[at]}>
            <p className="quiet">
              {names[at]}, {plural(list.length, "spark")}
            </p>
            <Distribution
              label={`${title} in ${names[at]}: ${plural(list.length, "spark")}`}
              values={list}
              unit={unit}
              marks={none}
              range={range}
            />
          </div>
        ),
      )}
    </figure>
  );
}
