/** One field of the card: its entry, what it is for, where its value came from. */
import { useId, useState } from "react";
import type { SetupOrigin } from "../../app/bridge.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import type { Field } from "./fields.ts";
import type { Change } from "./SetupCard.tsx";
import { draftOf, readDraft, type Draft } from "./value.ts";

interface Props {
  field: Field;
  setup: Setup;
  origin: SetupOrigin | undefined;
  onChange: Change;
}

const origins: Record<SetupOrigin, string> = {
  stated: "stated here",
  "file setup": "from the file’s setup",
  "folder setup": "from the folder’s setup",
  "answered before": "as answered before for files of this layout",
  guessed: "guessed",
};

export function FieldRow({ field, setup, origin, onChange }: Props) {
  const id = useId();
  const kept = draftOf(field, setup);
  const [draft, setDraft] = useState<Draft>(kept);
  const [problem, setProblem] = useState<string | null>(null);
  const [seen, setSeen] = useState(kept);
  // Another value came from outside (an undo, an answer, a template): it replaces the draft.
  if (seen.text !== kept.text || seen.tolerance !== kept.tolerance) {
    setSeen(kept);
    setDraft(kept);
  }

  const commit = (draft: Draft) => {
    if (draft.text === kept.text && draft.tolerance === kept.tolerance) return setProblem(null);
    const read = readDraft(field, draft, setup);
    if ("problem" in read) return setProblem(read.problem);
    setProblem(null);
    return onChange({ [field.key]: read.value });
  };
  const entry = { "aria-describedby": `${id}-help`, "aria-invalid": problem !== null };
  return (
    <div className="field">
      <label htmlFor={id}>{field.words}</label>
      <span className="entry">
        {field.kind === "choice" ? (
          <select
            id={id}
            {...entry}
            value={draft.text}
            onChange={(event) => commit({ text: event.target.value, tolerance: "" })}
          >
            <option value="">not stated</option>
            {field.choices?.map(({ value, words }) => (
              <option key={value} value={value}>
                {words}
              </option>
            ))}
          </select>
        ) : (
          <Text
            id={id}
            entry={entry}
            value={draft.text}
            onText={(text) => setDraft({ ...draft, text })}
            onDone={() => commit(draft)}
          />
        )}
        {field.kind === "toleranced" && (
          <>
            {" ± "}
            <Text
              id={`${id}-tolerance`}
              label={`tolerance of ${field.words} in percent`}
              entry={entry}
              value={draft.tolerance}
              onText={(tolerance) => setDraft({ ...draft, tolerance })}
              onDone={() => commit(draft)}
              short
            />
            {" %"}
          </>
        )}
      </span>
      <span className={origin === "guessed" ? "origin guessed" : "origin"}>
        {origin ? origins[origin] : "not stated"}
      </span>
      <span id={`${id}-help`} className={problem ? "help problem" : "help"}>
        {problem ?? field.help}
      </span>
    </div>
  );
}

interface TextProps {
  id: string;
  label?: string;
  entry: object;
  value: string;
  short?: boolean;
  onText(text: string): void;
  onDone(): void;
}

export function Text({ id, label, entry, value, short, onText, onDone }: TextProps) {
  return (
    <input
      id={id}
      aria-label={label}
      className={short ? "short" : undefined}
      {...entry}
      value={value}
      maxLength={200}
      onChange={(event) => onText(event.target.value)}
      onBlur={onDone}
      onKeyDown={(event) => {
        if (event.key === "Enter") onDone();
        if (event.key === "Escape") event.currentTarget.blur();
      }}
    />
  );
}
