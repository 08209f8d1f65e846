/**
 * A run as lines of handwriting: every pulse a small drawn ring envelope on a common baseline, in
 * order. A spark breaks the envelope and carries a filled lozenge, a pulse without one is whole and
 * carries an open circle, an unclear one a question mark.
 */
import { memo, useMemo, type MouseEvent } from "react";
import type { PulseRow } from "../../app/bridge.ts";
import { circlePath, finalVerdict, glyphPath, lozengePath, questionPath } from "../draw/glyph.ts";
import { useWidth } from "../draw/useWidth.ts";
import { plural, verdictWord } from "../format/words.ts";

interface Props {
  rows: PulseRow[];
  expected: string | null;
  /** Index of the marked pulse, −1 for none. */
  current: number;
  /** Only the line around the marked pulse. */
  excerpt?: boolean;
  onOpen(row: PulseRow): void;
  onMark?(index: number): void;
}

const pitch = 21;
const lineHeight = 58;
const baseline = 24;

export function Line({ rows, expected, current, excerpt, onOpen, onMark }: Props) {
  const [box, width] = useWidth<HTMLDivElement>();
  const perLine = Math.max(Math.floor(width / pitch), 1);
  const lines = useMemo(() => {
    if (excerpt) {
      const from = Math.max(Math.min(current - Math.floor(perLine / 2), rows.length - perLine), 0);
      return [{ from, rows: rows.slice(from, from + perLine) }];
    }
    const count = Math.ceil(rows.length / perLine);
    return Array.from({ length: count }, (_, at) => ({
      from: at * perLine,
      rows: rows.slice(at * perLine, (at + 1) * perLine),
    }));
  }, [rows, perLine, excerpt, current]);
  return (
    <div ref={box} className={excerpt ? "line excerpt" : "line"}>
      {lines.map((line) => {
        const here =
          current >= line.from && current < line.from + line.rows.length ? current - line.from : -1;
        return (
          <WrittenLine key={line.from} {...line} width={width} {...{ expected, here, onOpen, onMark }} />
        );
      })}
    </div>
  );
}

interface WrittenLineProps {
  from: number;
  rows: PulseRow[];
  width: number;
  expected: string | null;
  here: number;
  onOpen(row: PulseRow): void;
  onMark?(index: number): void;
}

const WrittenLine = memo(function WrittenLine({
  from,
  rows,
  width,
  expected,
  here,
  onOpen,
  onMark,
}: WrittenLineProps) {
  const drawn = useMemo(() => drawLine(rows), [rows]);
  const indexAt = (event: MouseEvent<SVGSVGElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    return Math.floor((((event.clientX - box.left) / box.width) * width) / pitch);
  };
  return (
    <svg
      className="written-line drawing"
      viewBox={`0 0 ${width} ${lineHeight}`}
      role="img"
      aria-label={spoken(rows, expected)}
      onClick={(event) => {
        const row = rows[indexAt(event)];
        if (row) onOpen(row);
      }}
      onMouseMove={(event) => {
        const index = indexAt(event);
        if (rows[index]) onMark?.(from + index);
      }}
    >
      <line className="baseline" x1={0} x2={rows.length * pitch} y1={baseline} y2={baseline} />
      <path className="glyphs" d={drawn.glyphs} />
      <path className="lozenge" d={drawn.lozenges} />
      <path className="circle" d={drawn.circles} />
      <path className="question" d={drawn.questions} />
      <path className="ruled" d={drawn.ruled} />
      {here >= 0 && <path className="here" d={`M${here * pitch} ${lineHeight - 4}h${pitch - 3}`} />}
    </svg>
  );
});

/** All glyphs of a line in one path a kind: thousands of pulses stay a few hundred elements. */
function drawLine(rows: PulseRow[]) {
  const drawn = { glyphs: "", lozenges: "", circles: "", questions: "", ruled: "" };
  rows.forEach((row, at) => {
    const box = { x: at * pitch + 2, y: baseline, width: pitch - 5, height: 19 };
    const middle = at * pitch + pitch / 2 - 2;
    const verdict = finalVerdict(row);
    drawn.glyphs += glyphPath(row, box);
    if (verdict === "spark") {
      const where = row.sketchOnset === null ? middle : box.x + row.sketchOnset * box.width + 2.5;
      drawn.lozenges += lozengePath(Math.min(where, box.x + box.width), baseline, 3.9);
    }
    if (verdict === "no-spark") drawn.circles += circlePath(middle, 48, 2.8);
    if (verdict === "unclear") drawn.questions += questionPath(middle, 45.5, 2.4);
    if (row.ruled) drawn.ruled += `M${middle - 4} 54.5h8`;
  });
  return drawn;
}

function spoken(rows: PulseRow[], expected: string | null): string {
  if (rows.length === 0) return "no pulses";
  const marked = rows
    .filter((row) => finalVerdict(row) !== "spark")
    .map((row) => `${row.number} ${verdictWord(finalVerdict(row), expected)}`);
  const span =
    rows.length === 1 ? `Pulse ${rows[0].number}` : `Pulses ${rows[0].number} to ${rows.at(-1)!.number}`;
  const rest = marked.length > 0 ? `: ${marked.slice(0, 12).join(", ")}` : "";
  const more = marked.length > 12 ? ` and ${plural(marked.length - 12, "other")}` : "";
  return `${span}. All sparked${rest ? " but" : ""}${rest}${more}.`;
}
