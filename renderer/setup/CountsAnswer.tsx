/** What one count of a column of bare integers is worth: scale, offset and unit, asked once. */
import { useState } from "react";
import type { SetupChannel } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";

export function CountsAnswer({ onAnswer }: { onAnswer(part: Partial<SetupChannel>): void }) {
  const [draft, setDraft] = useState({ scale: "", offset: "", unit: "V" });
  const scale = parseEntry(draft.scale, draft.unit);
  const offset = draft.offset.trim() === "" ? 0 : parseEntry(draft.offset, draft.unit);
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        if (scale !== null && offset !== null) onAnswer({ scale, offset, unit: draft.unit });
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
      <button type="submit" disabled={scale === null || scale === 0 || offset === null}>
        answer
      </button>
    </form>
  );
}
