/** The card's face: what is stated, in a few columns, guesses underlined, gaps named. */
import type { RunDetail, SetupOrigin } from "../../app/bridge.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import { plain, stated } from "../format/figure.ts";
import { plural } from "../format/words.ts";
import { roleName } from "../pulse/panels.ts";
import { allFields } from "./fields.ts";
import { shownValue } from "./value.ts";

/** Named as missing on the face: the figures people come for hang on them. */
const wanted = ["capacitor_F", "supply_V", "switchRating_V"];

export function CardFace({ run, reading }: { run: RunDetail; reading: CaptureReading | null }) {
  const { setup, origins } = run;
  const lines = allFields.filter((field) => field.key !== "coil" && field.key !== "taken");
  const channels = reading?.channels ?? [];
  const named = channels.filter((channel) => channel.role !== "other");
  const further = channels.length - named.length;
  return (
    <dl className="card-face">
      {lines.map((field) => {
        const text = shownValue(field, setup);
        if (text === null && !wanted.includes(field.key)) return null;
        return <Item key={field.key} words={field.words} text={text} origin={origins[field.key]} />;
      })}
      {named.map((channel) => (
        <Item
          key={channel.name}
          words={`column ${channel.name}`}
          text={`${roleName(channel.role)}${channel.scale === 1 ? "" : `, × ${stated(channel.scale, "")}`}`}
          origin={channel.roleGuessed ? "guessed" : undefined}
        />
      ))}
      {further > 0 && (
        <Item words={plural(further, "further column")} text="no stated role" origin={undefined} />
      )}
      {reading && (
        <Item
          words="interval"
          text={reading.timebase.step_s === null ? null : plain(reading.timebase.step_s, "s", 4)}
          origin={undefined}
        />
      )}
    </dl>
  );
}

function Item({
  words,
  text,
  origin,
}: {
  words: string;
  text: string | null;
  origin: SetupOrigin | undefined;
}) {
  return (
    <div>
      <dt>{words}</dt>{" "}
      <dd className={text === null ? "missing" : undefined}>
        {text ?? "not stated"}
        {origin === "guessed" && <span className="guessed"> guessed</span>}
      </dd>
    </div>
  );
}
