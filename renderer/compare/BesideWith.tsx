/** From a run to the sheet on which it lies beside another: of the same coil first. */
import { useRef } from "react";
import type { RunDetail } from "../../app/bridge.ts";
import { dayText } from "../format/words.ts";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { go } from "../state/route.ts";

const offered = 200;

export function BesideWith({ run }: { run: RunDetail }) {
  const { book } = useDesk();
  const { answer } = useAnswer("runs", { limit: offered }, book);
  const select = useRef<HTMLSelectElement>(null);
  useKeys("run", [{ key: "v", does: "lay it beside another run", act: () => select.current?.focus() }]);
  const others = (answer?.rows ?? []).filter((row) => row.run !== run.run);
  if (others.length === 0) return null;
  const alike = others.filter(({ coil }) => coil !== null && coil === run.coil);
  const further = others.filter((row) => !alike.includes(row));
  const groups = [
    { label: "of the same coil", rows: alike },
    { label: alike.length > 0 ? "of others" : "in the book", rows: further },
  ];
  return (
    <p className="no-print">
      <label>
        <kbd>V</kbd> beside{" "}
        <select
          ref={select}
          value=""
          onChange={(event) => go({ view: "beside", first: Number(event.target.value), second: run.run })}
        >
          <option value="" disabled>
            another run…
          </option>
          {groups.map(
            ({ label, rows }) =>
              rows.length > 0 && (
                <optgroup key={label} label={label}>
                  {rows.map((row) => (
                    <option key={row.run} value={row.run}>
                      {[row.name, dayText(row.taken)].filter(Boolean).join(", ")}
                    </option>
                  ))}
                </optgroup>
              ),
          )}
        </select>
      </label>
    </p>
  );
}
