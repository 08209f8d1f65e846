/** The book's contents: every run with its page, as a table of contents; the coils below. */
import { useDeferredValue, useState } from "react";
import type { Page, RunRow } from "../../app/bridge.ts";
import type { Verdict } from "../../analysis/reading-format.ts";
import { figureText } from "../format/figure.ts";
import { countsSentence, dayText, plural } from "../format/words.ts";
import { SheetHead } from "../shell/SheetHead.tsx";
import { Failure, Waiting } from "../shell/States.tsx";
import { messageOf, useAnswer, useBench, useDesk } from "../state/bench.tsx";
import { useKeys } from "../state/keys.ts";
import { go, hrefOf } from "../state/route.ts";
import { Greeting } from "./Greeting.tsx";
import { KeepFiles } from "./KeepFiles.tsx";
import { WatchFolder } from "./WatchFolder.tsx";

const pageSize = 50;

export function Contents() {
  const { book } = useDesk();
  const [search, setSearch] = useState("");
  const [verdict, setVerdict] = useState<Verdict | "">("");
  const query = useDeferredValue({ search: search.trim() || null, verdict: verdict || null });
  const hello = useAnswer("hello", {}, book);
  const first = useAnswer("runs", { ...query, limit: pageSize }, book);
  const { rows, more, error } = useFurther(first.answer, query);
  const [marked, setMarked] = useState(-1);
  useKeys("contents", [
    {
      key: "arrowdown",
      does: "mark the next run",
      act: () => setMarked((old) => Math.min(old + 1, rows.length - 1)),
    },
    { key: "arrowup", does: "mark the run before", act: () => setMarked((old) => Math.max(old - 1, 0)) },
    {
      key: "enter",
      does: "open the marked run",
      act: () => rows[marked] && go({ view: "run", run: rows[marked].run }),
    },
    { key: "/", does: "search the book", act: () => document.getElementById("search")?.focus() },
  ]);

  if (first.error ?? hello.error) return <Failure text={(first.error ?? hello.error)!} />;
  if (!hello.answer) return <Waiting />;
  const { book: place, runs } = hello.answer;
  if (runs === 0 && !first.waiting && rows.length === 0 && !query.search && !query.verdict)
    return <Greeting />;
  return (
    <article>
      <SheetHead
        title="Contents"
        plainTitle="Contents"
        beside={place.readOnly ? `${plural(runs, "run")}, read only` : plural(runs, "run")}
      />
      {place.note && <p className="problem">{place.note}</p>}
      <form className="search no-print" role="search" onSubmit={(event) => event.preventDefault()}>
        <label>
          <kbd>/</kbd> search{" "}
          <input
            id="search"
            type="search"
            value={search}
            onChange={(event) => setSearch(event.target.value)}
            placeholder="name, coil, file, remark"
          />
        </label>{" "}
        <label>
          with{" "}
          <select value={verdict} onChange={(event) => setVerdict(event.target.value as Verdict | "")}>
            <option value="">all pulses</option>
            <option value="spark">sparks</option>
            <option value="no-spark">pulses without a spark</option>
            <option value="unclear">unclear pulses</option>
          </select>
        </label>
      </form>
      {rows.length === 0 && !first.waiting && <p className="quiet">Nothing in the book answers to that.</p>}
      <ol className="contents">
        {rows.map((row, at) => (
          <Entry key={row.run} row={row} marked={at === marked} />
        ))}
      </ol>
      {error && <p className="problem">{error}</p>}
      {more && (
        <p>
          <button type="button" onClick={more}>
            further runs
          </button>
        </p>
      )}
      <Coils />
      <WatchFolder />
      <KeepFiles />
    </article>
  );
}

function Entry({ row, marked }: { row: RunRow; marked: boolean }) {
  return (
    <li className={marked ? "marked" : undefined}>
      <a href={hrefOf({ view: "run", run: row.run })}>{row.name}</a>
      <span className="dots" aria-hidden="true" />
      <span className="page-number tabular">{row.run}</span>
      <p className="quiet">
        {[row.coil, dayText(row.taken), countsSentence(row.counts)].filter(Boolean).join(" · ")}
      </p>
    </li>
  );
}

function Coils() {
  const { book } = useDesk();
  const coils = useAnswer("coils", {}, book);
  if (!coils.answer || coils.answer.length === 0) return null;
  return (
    <section className="coils" aria-labelledby="coils-title">
      <h2 id="coils-title">Coils</h2>
      <ol className="contents">
        {coils.answer.map((coil) => (
          <li key={coil.coil}>
            <a href={hrefOf({ view: "coil", coil: coil.coil })}>{coil.coil}</a>
            <span className="dots" aria-hidden="true" />
            <span className="tabular">L {figureText(coil.inductance_H, "H")}</span>
            <p className="quiet">
              {plural(coil.runs, "run")}, {plural(coil.pulses, "pulse")}
              {coil.last && `, last on ${dayText(coil.last)}`}
            </p>
          </li>
        ))}
      </ol>
    </section>
  );
}

type Query = { search: string | null; verdict: Verdict | null };

/** Pages after the first, fetched as they are wanted; forgotten when the first page changes. */
function useFurther(first: Page<RunRow> | null, query: Query) {
  const bench = useBench();
  const [held, setHeld] = useState<{ of: Page<RunRow>; page: Page<RunRow> } | null>(null);
  const [error, setError] = useState<string | null>(null);
  const further = held && held.of === first ? held.page : null;
  const cursor = further ? further.cursor : (first?.cursor ?? null);
  const rows = [...(first?.rows ?? []), ...(further?.rows ?? [])];
  const fetchMore = () =>
    bench.call("runs", { ...query, cursor, limit: pageSize }).then(
      (page) =>
        first &&
        setHeld({ of: first, page: { rows: [...(further?.rows ?? []), ...page.rows], cursor: page.cursor } }),
      (failure: unknown) => setError(messageOf(failure)),
    );
  return { rows, more: cursor === null ? null : fetchMore, error };
}
