/** Two runs side by side: what was measured of each, and what lies between them. */
import type { Figure } from "../../analysis/reading-format.ts";
import type { RunDetail } from "../../app/bridge.ts";
import { figureText } from "../format/figure.ts";
import { countsSentence, dayText } from "../format/words.ts";
import { SheetHead } from "../shell/SheetHead.tsx";
import { Failure, Waiting } from "../shell/States.tsx";
import { useAnswer, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { go, hrefOf } from "../state/route.ts";
import { BesideSparks } from "./BesideSparks.tsx";
import { between, farApart } from "./between.ts";

interface Props {
  first: number;
  second: number;
}

export function BesideSheet({ first, second }: Props) {
  const { runs } = useDesk();
  const seen = (runs[first] ?? 0) + (runs[second] ?? 0);
  const one = useAnswer("run", { run: first }, seen);
  const other = useAnswer("run", { run: second }, seen);
  const compared = useAnswer("compare", { first, second }, seen);
  useKeys("two runs", [
    { key: "x", does: "change sides", act: () => go({ view: "beside", first: second, second: first }, true) },
    { key: "arrowup", does: "back to the run on the right", act: () => go({ view: "run", run: second }) },
  ]);
  const failed = one.error ?? other.error ?? compared.error;
  if (failed) return <Failure text={failed} />;
  if (!one.answer || !other.answer || !compared.answer) return <Waiting />;
  const [a, b] = [one.answer, other.answer];
  const { quietRate, ...less } = compared.answer;
  const lines: [name: string, unit: string, a: Figure, b: Figure, less: Figure][] = [
    ["L", "H", a.combined.inductance_H, b.combined.inductance_H, less.inductance_H],
    ["R", "Ω", a.combined.resistance_ohm, b.combined.resistance_ohm, less.resistance_ohm],
    ["Q", "", a.combined.q, b.combined.q, less.q],
  ];
  return (
    <article>
      <SheetHead
        title="Two runs side by side"
        plainTitle={`${a.name} beside ${b.name}`}
        beside={
          <button
            type="button"
            className="small no-print"
            onClick={() => go({ view: "beside", first: second, second: first }, true)}
          >
            <kbd>X</kbd> change sides
          </button>
        }
        page={`pages ${first} and ${second}`}
      />
      <div className="wide-table">
        <table className="beside-figures">
          <thead>
            <tr>
              <td />
              {[a, b].map((run) => (
                <th key={run.run} scope="col">
                  <RunName run={run} />
                </th>
              ))}
              <th scope="col">second less first</th>
            </tr>
          </thead>
          <tbody>
            {lines.map(([name, unit, one, other, difference]) => (
              <tr key={name}>
                <th scope="row">{name}</th>
                {[one, other, difference].map((figure, at) => (
                  <td key={at} className="tabular">
                    {figureText(figure, unit)}
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="quiet">
        {farApart(lines.map(([name, , , , difference]) => ({ name, difference })))} Uncertainties are added as
        if nothing were common to both runs: the same capacitor makes the difference surer than it is stated.
      </p>
      <h2>How often they sparked</h2>
      {[a, b].map((run) => (
        <p key={run.run} className="sentence">
          <strong>{run.name}.</strong> {countsSentence(run.counts)}
        </p>
      ))}
      <p>{between(quietRate)}</p>
      <BesideSparks runs={[a, b]} />
    </article>
  );
}

function RunName({ run }: { run: RunDetail }) {
  return (
    <>
      <a href={hrefOf({ view: "run", run: run.run })}>{run.name}</a>
      <span className="quiet"> {[run.coil, dayText(run.taken)].filter(Boolean).join(" · ")}</span>
    </>
  );
}
