/** A coil over all its runs: history, added-capacitor line, ramp and saturation, drive design. */
import { rateText } from "../../analysis/format/counts.ts";
import type { CoilSheet as Coil } from "../../app/bridge.ts";
import { Caution } from "../help/Caution.tsx";
import { dash, figureText, plain } from "../format/figure.ts";
import { dayText, plural } from "../format/words.ts";
import { CopyButton } from "../shell/CopyButton.tsx";
import { SheetHead } from "../shell/SheetHead.tsx";
import { Failure, Waiting } from "../shell/States.tsx";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { go, hrefOf } from "../state/route.ts";
import { AddedCapacitor } from "./AddedCapacitor.tsx";
import { CapacitorChoice } from "./CapacitorChoice.tsx";
import { DwellTable } from "./DwellTable.tsx";
import { Ramp } from "./Ramp.tsx";
import { StressTable } from "./StressTable.tsx";

export default function CoilSheet({ coil }: { coil: string }) {
  const { book } = useDesk();
  const asked = useAnswer("coil", { coil }, book);
  useKeys("coil", [{ key: "arrowup", does: "to the book’s contents", act: () => go({ view: "book" }) }]);
  if (asked.error) return <Failure text={asked.error} />;
  if (!asked.answer) return <Waiting />;
  const sheet = asked.answer;
  // Why there is no added-capacitor line stands where the line would.
  const notes = sheet.notes.filter((note) => note.code !== "no-capacitor-line");
  return (
    <article className="coil-sheet">
      <SheetHead
        title={sheet.coil}
        plainTitle={`Coil ${sheet.coil}`}
        beside={plural(sheet.history.length, "run")}
        page="coil"
      />
      {notes.length > 0 && (
        <ul className="coil-notes">
          {notes.map((note) => (
            <li key={note.code + note.text}>{note.text}</li>
          ))}
        </ul>
      )}
      <History sheet={sheet} />
      <CapacitorChoice sheet={sheet} />
      <DwellTable dwell={sheet.dwell} />
      <StressTable stress={sheet.stress} />
      <AddedCapacitor line={sheet.addedCapacitor} />
      <Ramp sheet={sheet} />
      <Caution />
    </article>
  );
}

function History({ sheet }: { sheet: Coil }) {
  const asText = () =>
    sheet.history
      .map((row) =>
        [
          row.name,
          row.taken ?? "",
          figureText(row.inductance_H, "H"),
          figureText(row.q, ""),
          figureText(row.resistance_ohm, "Ω"),
          figureText(row.resistance20_ohm, "Ω"),
          row.misfireRate ? rateText(row.misfireRate) : dash,
        ].join("\t"),
      )
      .join("\n");
  return (
    <section aria-labelledby="history-title">
      <h2 id="history-title">
        History <CopyButton keyName="t" does="copy the history as a table" text={asText} />
      </h2>
      <div className="wide-table">
        <table className="history">
          <thead>
            <tr>
              <th scope="col">run</th>
              <th scope="col">taken</th>
              <th scope="col">L</th>
              <th scope="col">C</th>
              <th scope="col">R</th>
              <th scope="col">Q</th>
              <th scope="col">R at 20 °C</th>
              <th scope="col">misfire rate</th>
              <th scope="col">highest kick</th>
            </tr>
          </thead>
          <tbody>
            {sheet.history.map((row) => (
              <tr key={row.run}>
                <th scope="row">
                  <a href={hrefOf({ view: "run", run: row.run })}>{row.name}</a>
                  {row.flag && <div className="problem">! {row.flag}</div>}
                </th>
                <td data-name="taken">{dayText(row.taken)}</td>
                <td className="tabular" data-name="L">
                  {figureText(row.inductance_H, "H")}
                </td>
                <td className="tabular" data-name="C">
                  {figureText(row.capacitance_F, "F")}
                </td>
                <td className="tabular" data-name="R">
                  {figureText(row.resistance_ohm, "Ω")}
                </td>
                <td className="tabular" data-name="Q">
                  {figureText(row.q, "")}
                </td>
                <td className="tabular" data-name="R at 20 °C">
                  {figureText(row.resistance20_ohm, "Ω")}
                </td>
                <td className="tabular" data-name="misfire rate">
                  {row.misfireRate ? rateText(row.misfireRate) : dash}
                </td>
                <td className="tabular" data-name="highest kick">
                  {plain(row.peak_V, "V")}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}
