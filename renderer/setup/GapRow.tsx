/** The spark gap: distance and electrodes, which give the expected breakdown as a plausibility mark. */
import { useId, useState } from "react";
import type { Setup } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";
import { stated } from "../format/figure.ts";
import { Text } from "./FieldRow.tsx";
import type { Change } from "./SetupCard.tsx";

export function GapRow({ setup, onChange }: { setup: Setup; onChange: Change }) {
  const id = useId();
  const gap = setup.gap ?? {};
  const kept = gap.distance_m ? stated(gap.distance_m, "m") : "";
  const [text, setText] = useState(kept);
  const [seen, setSeen] = useState(kept);
  if (seen !== kept) {
    setSeen(kept);
    setText(kept);
  }
  const commit = () => {
    if (text === kept) return;
    const distance_m = text.trim() === "" ? null : parseEntry(text.replaceAll("\u00a0", " "), "m");
    onChange({ gap: { ...gap, distance_m } });
  };
  return (
    <div className="field">
      <label htmlFor={id}>gap</label>
      <span className="entry">
        <Text id={id} entry={{}} value={text} onText={setText} onDone={commit} />
        {" between "}
        <select
          aria-label="electrodes of the gap"
          value={gap.electrodes ?? ""}
          onChange={(event) => onChange({ gap: { ...gap, electrodes: event.target.value || null } })}
        >
          <option value="">not stated</option>
          <option value="points">points</option>
          <option value="spheres">spheres</option>
        </select>
      </span>
      <span className="origin" />
      <span className="help">
        6 mm between points is written 6m. Spheres also need their diameter in the setup file.
      </span>
    </div>
  );
}
