/** What the file does not tell, asked beside its first lines; an answer goes into the setup at once. */
import { useState } from "react";
import type { RunDetail } from "../../app/bridge.ts";
import type { Note } from "../../analysis/capture.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import type { Setup, SetupChannel } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";
import { stated } from "../format/figure.ts";
import { unitPart, withChannel } from "./channels.ts";
import { CountsAnswer } from "./CountsAnswer.tsx";
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
        <Question key={note.code + note.question} note={note} setup={run.setup} onChange={onChange} />
      ))}
      {capture !== null && <Preview capture={capture} />}
    </div>
  );
}

interface QuestionProps {
  note: Note;
  setup: Setup;
  onChange: Change;
}

function Question({ note, setup, onChange }: QuestionProps) {
  return (
    <div className="question" role="group" aria-label={note.question}>
      <p>
        <span className="question-mark" aria-hidden="true">
          ?
        </span>{" "}
        <strong>{note.question}</strong> {note.text}
      </p>
      {note.answers === "channels" ? (
        <ChannelAnswer note={note} setup={setup} onChange={onChange} />
      ) : (
        <FieldAnswer note={note} onChange={onChange} />
      )}
    </div>
  );
}

/** About one column: its unit is chosen, its counts are stated; joining files is left to the setup file. */
function ChannelAnswer({ note: { channel, choices }, setup, onChange }: QuestionProps) {
  if (channel === undefined)
    return <p className="quiet">Answer it in the folder’s setup.json, under channels.</p>;
  const put = (part: Partial<SetupChannel>) =>
    onChange({ channels: withChannel(setup, channel, null, part) });
  if (!choices) return <CountsAnswer onAnswer={put} />;
  return (
    <p>
      {choices.map((choice) => (
        <button key={choice} type="button" onClick={() => put(unitPart(choice))}>
          {choice}
        </button>
      ))}
    </p>
  );
}

function FieldAnswer({ note, onChange }: Omit<QuestionProps, "setup">) {
  const [text, setText] = useState("");
  const field = allFields.find((field) => field.key === note.answers);
  if (!field) return <p className="quiet">{note.choices?.join(", ")}</p>;
  const answer = (words: string) => {
    const number = parseEntry(words, field.unit);
    if (field.kind === "choice") onChange({ [field.key]: words });
    else if (number !== null) onChange({ [field.key]: number });
  };
  const worded = (choice: string) =>
    field.choices?.find(({ value }) => value === choice)?.words ??
    (field.kind === "number" ? stated(Number(choice), field.unit) : choice);
  if (note.choices && note.choices.length > 0)
    return (
      <p>
        {note.choices.map((choice) => (
          <button key={choice} type="button" onClick={() => answer(choice)}>
            {worded(choice)}
          </button>
        ))}
      </p>
    );
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        answer(text);
      }}
    >
      <input aria-label={note.question} value={text} onChange={(event) => setText(event.target.value)} />{" "}
      {field.unit} <button type="submit">answer</button>
    </form>
  );
}
