/**
 * What the file does not tell, asked beside its first lines and beside what each answer would make of it;
 * an answer goes into the setup at once.
 */
import { useState } from "react";
import type { RunDetail } from "../../app/bridge.ts";
import type { Note } from "../../analysis/capture.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import type { Setup, SetupChannel } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";
import { stated } from "../format/figure.ts";
import { unitPart, withChannel } from "./channels.ts";
import { CountsAnswer } from "./CountsAnswer.tsx";
import { allFields, type Field } from "./fields.ts";
import { Outcome, type Tried } from "./Outcome.tsx";
import { Preview } from "./Preview.tsx";
import { useSettled } from "../state/useSettled.ts";
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
  if (once.length === 0 || capture === null) return null;
  const tried = { run: run.run, capture };
  return (
    <div className="questions">
      {once.map((note) => (
        <Question key={note.code + note.question} {...{ note, tried, onChange }} setup={run.setup} />
      ))}
      <Preview capture={capture} />
    </div>
  );
}

interface QuestionProps {
  note: Note;
  tried: Tried;
  setup: Setup;
  onChange: Change;
}

function Question(props: QuestionProps) {
  const { note } = props;
  return (
    <div className="question" role="group" aria-label={note.question}>
      <p>
        <span className="question-mark" aria-hidden="true">
          ?
        </span>{" "}
        <strong>{note.question}</strong> {note.text}
      </p>
      {note.answers === "channels" ? <ChannelAnswer {...props} /> : <FieldAnswer {...props} />}
    </div>
  );
}

/** About one column: its unit is chosen, its counts are stated; joining files is left to the setup file. */
function ChannelAnswer({ note: { channel, choices }, tried, setup, onChange }: QuestionProps) {
  if (channel === undefined)
    return <p className="quiet">Answer it in the folder’s setup.json, under channels.</p>;
  const changeOf = (part: Partial<SetupChannel>) => ({ channels: withChannel(setup, channel, null, part) });
  if (!choices)
    return <CountsAnswer {...{ tried, channel, changeOf }} onAnswer={(part) => onChange(changeOf(part))} />;
  const offers = choices.map((choice) => ({ words: choice, change: changeOf(unitPart(choice)) }));
  return <Choices {...{ tried, channel, offers, onChange }} />;
}

function FieldAnswer({ note, tried, onChange }: QuestionProps) {
  const [text, setText] = useState("");
  const settled = useSettled(text);
  const field = allFields.find((field) => field.key === note.answers);
  if (!field) return <p className="quiet">{note.choices?.join(", ")}</p>;
  if (note.choices && note.choices.length > 0) {
    const offers = note.choices.map((choice) => offerOf(field, choice));
    return <Choices {...{ tried, offers, onChange }} />;
  }
  const changeOf = (words: string) => {
    const number = parseEntry(words, field.unit);
    return number === null ? null : { [field.key]: number };
  };
  const change = changeOf(text);
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        if (change) onChange(change);
      }}
    >
      <input aria-label={note.question} value={text} onChange={(event) => setText(event.target.value)} />{" "}
      {field.unit}{" "}
      <button type="submit" disabled={change === null}>
        answer
      </button>
      <Outcome tried={tried} change={changeOf(settled)} />
    </form>
  );
}

interface Offer {
  words: string;
  change: Record<string, unknown>;
}

function offerOf(field: Field, choice: string): Offer {
  if (field.kind === "number")
    return { words: stated(Number(choice), field.unit), change: { [field.key]: Number(choice) } };
  const words = field.choices?.find(({ value }) => value === choice)?.words ?? choice;
  return { words, change: { [field.key]: choice } };
}

interface ChoicesProps {
  tried: Tried;
  channel?: string;
  offers: Offer[];
  onChange: Change;
}

/** Every choice with what it would make of the file. */
function Choices({ tried, channel, offers, onChange }: ChoicesProps) {
  return (
    <ul className="choices">
      {offers.map(({ words, change }) => (
        <li key={words}>
          <button type="button" onClick={() => onChange(change)}>
            {words}
          </button>
          <Outcome {...{ tried, channel, change }} />
        </li>
      ))}
    </ul>
  );
}
