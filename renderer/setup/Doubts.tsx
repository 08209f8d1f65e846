/** Implausible entries, questioned with what could have been meant. A doubt put aside stays aside. */
import { useState } from "react";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { doubts } from "./doubts.ts";
import type { Change } from "./SetupCard.tsx";

interface Props {
  setup: Setup;
  reading: CaptureReading | null;
  onChange: Change;
}

export function Doubts({ setup, reading, onChange }: Props) {
  const [aside, setAside] = useState<string[]>([]);
  const open = doubts(setup, reading).filter((doubt) => !aside.includes(doubt.text));
  return open.map((doubt) => (
    <div key={doubt.key} className="question doubt" role="group" aria-label={doubt.text}>
      <p>
        <span className="question-mark" aria-hidden="true">
          ?
        </span>{" "}
        {doubt.text}
      </p>
      <p>
        {doubt.offers.map((offer) => (
          <button key={offer.words} type="button" onClick={() => onChange(offer.change)}>
            {offer.words}
          </button>
        ))}
        <button type="button" onClick={() => setAside([...aside, doubt.text])}>
          It is right as it stands
        </button>
      </p>
    </div>
  ));
}
