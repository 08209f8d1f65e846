/** Setups kept by name, for a bench or a coil, to be laid on other runs. */
import { useState } from "react";
import * as v from "valibot";
import { setupSchema, type Setup } from "../../analysis/setup/schema.ts";
import { usePreferences } from "../state/preferences.tsx";
import { useSay } from "../shell/say.tsx";
import type { Change } from "./SetupCard.tsx";

const prefix = "template:";
/** What belongs to one run only does not travel. */
const ownOfRun = new Set(["format", "run", "taken"]);

export function Templates({ setup, onChange }: { setup: Setup; onChange: Change }) {
  const { values, set } = usePreferences();
  const say = useSay();
  const [name, setName] = useState("");
  const kept = Object.keys(values ?? {}).filter((key) => key.startsWith(prefix) && values?.[key]);

  const lay = (key: string) => {
    const parsed = v.safeParse(setupSchema, JSON.parse(values?.[key] ?? "{}"));
    if (parsed.success) onChange(parsed.output);
    else say("This template no longer fits what a setup may hold.");
  };
  return (
    <form
      className="templates no-print"
      onSubmit={(event) => {
        event.preventDefault();
        const template = Object.fromEntries(Object.entries(setup).filter(([key]) => !ownOfRun.has(key)));
        set(prefix + name.trim(), JSON.stringify(template));
        say(`Kept as “${name.trim()}”.`);
        setName("");
      }}
    >
      {kept.length > 0 && (
        <label>
          Lay a kept setup on this run:{" "}
          <select value="" onChange={(event) => event.target.value && lay(event.target.value)}>
            <option value="">choose …</option>
            {kept.map((key) => (
              <option key={key} value={key}>
                {key.slice(prefix.length)}
              </option>
            ))}
          </select>{" "}
        </label>
      )}
      <label>
        Keep this setup as{" "}
        <input
          value={name}
          maxLength={80}
          placeholder="bench or coil"
          onChange={(event) => setName(event.target.value)}
        />
      </label>{" "}
      <button type="submit" disabled={name.trim() === ""}>
        keep
      </button>
    </form>
  );
}
