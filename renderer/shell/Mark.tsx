/** A verdict's mark: lozenge, open circle, question mark. The word stands beside it. */
import type { Verdict } from "../../analysis/reading-format.ts";
import { circlePath, lozengePath, questionPath } from "../draw/glyph.ts";

export function Mark({ verdict }: { verdict: Verdict | null }) {
  return (
    <svg className="mark" viewBox="0 0 16 16" aria-hidden="true">
      {verdict === "spark" && <path className="lozenge" d={lozengePath(8, 8, 4.5)} />}
      {verdict === "no-spark" && <path className="circle" d={circlePath(8, 8, 4.5)} />}
      {verdict === "unclear" && <path className="question" d={questionPath(8, 7, 3.6)} />}
      {verdict === null && <path className="circle" d="M3 8H13" />}
    </svg>
  );
}
