/** What moved along the run, drawn into its chart: a change of level, a drift. */
import type { Scale } from "../draw/scale.ts";
import { plain } from "../format/figure.ts";
import type { Moves } from "./course-figures.ts";

interface Props {
  moves: Moves;
  count: number;
  unit: string;
  /** Where a pulse number stands. */
  placeOf(number: number): number;
  y: Scale;
  top: number;
  bottom: number;
}

export function CourseMarks({ moves: { change, drift }, count, unit, placeOf, y, top, bottom }: Props) {
  if (change) {
    const at = (placeOf(change.number - 1) + placeOf(change.number)) / 2;
    const [first, last] = [placeOf(1), placeOf(count)];
    const onLeft = at > (first + last) / 2;
    return (
      <g className="course-mark">
        <path className="expected" d={`M${first} ${y(change.before)}H${at}V${y(change.after)}H${last}`} />
        <path className="onset" d={`M${at} ${top}V${bottom}`} />
        <text className="label" x={at + (onLeft ? -6 : 6)} y={top + 10} textAnchor={onLeft ? "end" : "start"}>
          changes at pulse {change.number}: {plain(change.before, unit)} to {plain(change.after, unit)}
        </text>
      </g>
    );
  }
  if (!drift) return null;
  return (
    <g className="course-mark">
      <path className="expected" d={`M${placeOf(1)} ${y(drift(1))}L${placeOf(count)} ${y(drift(count))}`} />
      <text className="label" x={placeOf(1)} y={top + 10}>
        drifts by {plain(drift(2) - drift(1), unit, 2)} a pulse
      </text>
    </g>
  );
}
