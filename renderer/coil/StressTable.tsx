/** What each part bears, against what it is stated to bear. */
import type { Stress } from "../../app/bridge.ts";
import { dash, figureText, percent, stated } from "../format/figure.ts";
import { nearRating } from "../pulse/notes.ts";

export function StressTable({ stress }: { stress: Stress[] }) {
  return (
    <section aria-labelledby="stress-title">
      <h2 id="stress-title">What the parts bear</h2>
      {stress.length === 0 ? (
        <p className="quiet">It needs a measured kick or current.</p>
      ) : (
        <div className="wide-table">
          <table>
            <thead>
              <tr>
                <th scope="col">part</th>
                <th scope="col">quantity</th>
                <th scope="col">load</th>
                <th scope="col">rating</th>
                <th scope="col">share</th>
              </tr>
            </thead>
            <tbody>
              {stress.map((line) => (
                <StressRow key={line.part + line.quantity} line={line} />
              ))}
            </tbody>
          </table>
        </div>
      )}
    </section>
  );
}

function StressRow({ line }: { line: Stress }) {
  const warned = line.share !== null && line.share >= nearRating;
  return (
    <tr className={warned ? "warned" : undefined}>
      <th scope="row">{line.part}</th>
      <td>{line.quantity}</td>
      <td className="tabular">
        {figureText(line.value, line.unit)}
        {line.value === null && line.reason && <span className="quiet"> {line.reason}</span>}
      </td>
      <td className="tabular">{line.rating === null ? "not stated" : stated(line.rating, line.unit)}</td>
      <td className="tabular">
        {line.share === null ? dash : percent(line.share)}
        {warned && (line.share! > 1 ? " ! over" : " ! near")}
      </td>
    </tr>
  );
}
