/** The card's back: every field with what it is for and where its value came from; all can be changed. */
import type { RunDetail } from "../../app/bridge.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import { ChannelTable } from "./ChannelTable.tsx";
import { FieldRow } from "./FieldRow.tsx";
import { GapRow } from "./GapRow.tsx";
import { groups } from "./fields.ts";
import { Preview } from "./Preview.tsx";
import type { Change } from "./SetupCard.tsx";
import { Templates } from "./Templates.tsx";

interface Props {
  run: RunDetail;
  reading: CaptureReading | null;
  capture: number | null;
  onChange: Change;
}

export function CardBack({ run, reading, capture, onChange }: Props) {
  return (
    <div className="card-back">
      <p className="quiet">
        Everything is optional; what is missing only takes away the figures that need it. Write sizes as you
        say them: 330n, 4.7 mH, 12. An empty field states nothing. A change is judged at once and can be
        undone.
      </p>
      <Templates setup={run.setup} onChange={onChange} />
      {groups.map((group) => (
        <fieldset key={group.title}>
          <legend>{group.title}</legend>
          {group.fields.map((field) => (
            <FieldRow
              key={field.key}
              field={field}
              setup={run.setup}
              origin={run.origins[field.key]}
              onChange={onChange}
            />
          ))}
          {group.title === "The air" && <GapRow setup={run.setup} onChange={onChange} />}
        </fieldset>
      ))}
      {reading && <ChannelTable setup={run.setup} reading={reading} onChange={onChange} />}
      {capture !== null && <Preview capture={capture} />}
    </div>
  );
}
