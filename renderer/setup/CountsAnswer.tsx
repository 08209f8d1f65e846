/** What one count of a column of bare integers is worth: scale, offset and unit, asked once. */
import { useMemo, useState } from "react";
import type { SetupChannel } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";
import { useSettled } from "../state/useSettled.ts";
import { Outcome, type Tried } from "./Outcome.tsx";

interface Props {
  tried: Tried;
  channel: string;
  changeOf(part: Partial<SetupChannel>): Record<string, unknown>;
  onAnswer(part: Partial<SetupChannel>): void;
}

export function CountsAnswer({ tried, channel, changeOf, onAnswer }: Props) {
  const [draft, setDraft] = useState({ scale: "", offset: "", unit: "V" });
  const part = useMemo(() => partOf(draft), [draft]);
  const settled = useSettled(part);
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        if (part) onAnswer(part);
      }}
    >
      <label>
        one count is{" "}
        <input value={draft.scale} onChange={(event) => setDraft({ ...draft, scale: event.target.value })} />
      </label>{" "}
      <select
        aria-label="unit"
        value={draft.unit}
        onChange={(event) => setDraft({ ...draft, unit: event.target.value })}
      >
        <option>V</option>
        <option>A</option>
      </select>{" "}
      <label>
        and 0 counts are{" "}
        <input
          value={draft.offset}
          placeholder="0"
          onChange={(event) => setDraft({ ...draft, offset: event.target.value })}
        />
      </label>{" "}
      <button type="submit" disabled={part === null}>
        answer
      </button>
      <Outcome {...{ tried, channel }} change={settled && changeOf(settled)} />
    </form>
  );
}

function partOf({ scale, offset, unit }: { scale: string; offset: string; unit: string }) {
  const factor = parseEntry(scale, unit);
  const zero = offset.trim() === "" ? 0 : parseEntry(offset, unit);
  return factor === null || factor === 0 || zero === null ? null : { scale: factor, offset: zero, unit };
}
