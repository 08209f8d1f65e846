/** What the program remarks of a capture or a run beside its figures: guesses, limits, assumptions. */
import type { Note } from "../../analysis/capture.ts";

interface Props {
  title: string;
  notes: Note[];
}

const shownOpen = 5;

export function Remarks({ title, notes }: Props) {
  const texts = [...new Set(notes.filter((note) => !note.question).map((note) => note.text))];
  if (texts.length === 0) return null;
  const list = (
    <ul>
      {texts.map((text) => (
        <li key={text}>{text}</li>
      ))}
    </ul>
  );
  return (
    <section className="remarks">
      <h2>{title}</h2>
      {texts.length <= shownOpen ? (
        list
      ) : (
        <details>
          <summary>{texts.length} remarks</summary>
          {list}
        </details>
      )}
    </section>
  );
}
