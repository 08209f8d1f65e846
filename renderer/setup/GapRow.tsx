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
    onChange({ gap: { ...gap, distance_m: lengthOf(text) } });
  };
  return (
    <div className="field">
      <label htmlFor={id}>gap</label>
      <span className="entry">
        <Text id={id} entry={{}} value={text} onText={setText} onDone={commit} />{" "}
        <select
          aria-label="electrodes of the gap"
          value={gap.electrodes ?? ""}
          onChange={(event) => onChange({ gap: { ...gap, electrodes: event.target.value || null } })}
        >
          <option value="">between …</option>
          <option value="points">between points</option>
          <option value="spheres">between spheres</option>
        </select>
        {gap.electrodes === "spheres" && (
          <Diameter
            key={gap.diameter_m ?? 0}
            kept={gap.diameter_m ?? null}
            onChange={(diameter_m) => onChange({ gap: { ...gap, diameter_m } })}
          />
        )}
      </span>
      <span className="origin" />
      <span className="help">
        6 mm between points is written 6m. From it and the air the expected breakdown is told, for
        plausibility only.
      </span>
    </div>
  );
}

const lengthOf = (text: string) =>
  text.trim() === "" ? null : parseEntry(text.replaceAll("\u00a0", " "), "m");

function Diameter({ kept, onChange }: { kept: number | null; onChange(diameter_m: number | null): void }) {
  const shown = kept === null ? "" : stated(kept, "m");
  const [text, setText] = useState(shown);
  return (
    <>
      {" of "}
      <Text
        id="gap-diameter"
        label="diameter of the spheres"
        entry={{}}
        value={text}
        onText={setText}
        onDone={() => text !== shown && onChange(lengthOf(text))}
      />
    </>
  );
}
