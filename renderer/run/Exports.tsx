/** The run for other programs and for customers. */
import { save } from "../draw/picture.ts";
import { messageOf, useBench } from "../state/bench.tsx";
import { useSay } from "../shell/say.tsx";

const kinds = [
  { kind: "html", words: "a report page" },
  { kind: "csv", words: "a table (CSV)" },
  { kind: "jsonl", words: "readings (JSON Lines)" },
] as const;

export function Exports({ run }: { run: number }) {
  const bench = useBench();
  const say = useSay();
  const take = (kind: (typeof kinds)[number]["kind"]) =>
    bench.call("exportRun", { run, kind }).then(
      ({ name, mime, text }) => say(`Saved ${save(new Blob([text], { type: mime }), name)}.`),
      (error: unknown) => say(messageOf(error)),
    );
  return (
    <p className="exports no-print">
      Take the run away as{" "}
      {kinds.map(({ kind, words }) => (
        <button key={kind} type="button" className="small" onClick={() => take(kind)}>
          {words}
        </button>
      ))}
    </p>
  );
}
