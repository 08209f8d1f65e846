/** What the file does not tell, asked beside its first lines; an answer goes into the setup at once. */
import { useState } from "react";
import type { RunDetail } from "../../app/bridge.ts";
import type { Note } from "../../analysis/capture.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import { parseEntry } from "../format/entry.ts";
import { allFields } from "./fields.ts";
import { Preview } from "./Preview.tsx";
import type { Change } from "./SetupCard.tsx";

interface Props {
  run: RunDetail;
  capture: number | null;
  reading: CaptureReading | null;
  onChange: Change;
}

export function Questions({ run, capture, reading, onChange }: Props) {
  const asked = [...(reading?.notes ?? []), ...run.notes].filter((note) => note.question);
  const once = asked.filter(
    (note, at) => asked.findIndex((other) => other.question === note.question) === at,
  );
  if (once.length === 0) return null;
  return (
    <div className="questions">
      {once.map((note) => (
        <Question key={note.code + note.question} note={note} onChange={onChange} />
      ))}
      {capture !== null && <Preview capture={capture} />}
    </div>
  );
}

function Question({ note, onChange }: { note: Note; onChange: Change }) {
  const [text, setText] = useState("");
  const field = allFields.find((field) => field.key === note.answers);
  const answer = (words: string) => {
    if (!note.answers) return;
    const number = parseEntry(words, field?.unit ?? "");
    onChange({ [note.answers]: field?.kind === "choice" || number === null ? words : number });
  };
  return (
    <div className="question" role="group" aria-label={note.question}>
      <p>
        <span className="question-mark" aria-hidden="true">
          ?
        </span>{" "}
        <strong>{note.question}</strong> {note.text}
      </p>
      <p>
        {note.answers &&
          note.choices?.map((choice) => (
            <button key={choice} type="button" onClick={() => answer(choice)}>
              {choice}
            </button>
          ))}
        {!note.answers && note.choices && (
          <span className="quiet">
            Possible: {note.choices.join(", ")}. Put it right on the back of the card.
          </span>
        )}
        {note.answers && (!note.choices || note.choices.length === 0) && (
          <form
            onSubmit={(event) => {
              event.preventDefault();
              answer(text);
            }}
          >
            <input
              aria-label={note.question}
              value={text}
              onChange={(event) => setText(event.target.value)}
            />{" "}
            {field?.unit} <button type="submit">answer</button>
          </form>
        )}
      </p>
    </div>
  );
}
