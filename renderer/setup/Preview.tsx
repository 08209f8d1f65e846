/** The file's first lines, as text: what the reader saw. */
import { useAnswer } from "../state/bench.tsx";

export function Preview({ capture }: { capture: number }) {
  const head = useAnswer("fileHead", { capture, lines: 12 });
  if (head.error) return <p className="quiet">The file’s first lines can’t be shown: {head.error}</p>;
  if (!head.answer) return null;
  return (
    <figure className="preview">
      <figcaption className="quiet">The file begins</figcaption>
      <pre tabIndex={0} aria-label="First lines of the file">
        {head.answer.lines.map((line) => line.slice(0, 200)).join("\n")}
        {head.answer.more ? "\n…" : ""}
      </pre>
    </figure>
  );
}
