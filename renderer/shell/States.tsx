/** What a sheet shows before its answer is there, and when none comes. */
import { hrefOf } from "../state/route.ts";
import { SheetHead } from "./SheetHead.tsx";

export const Waiting = () => (
  <p className="quiet" role="status">
    Turning the page …
  </p>
);

export function Failure({ text, run }: { text: string; run?: number }) {
  return (
    <div className="failure" role="alert">
      <SheetHead title="This page can’t be shown" plainTitle="This page can’t be shown" />
      <p>{text}</p>
      <p>
        {run !== undefined && <a href={hrefOf({ view: "run", run })}>Back to the run</a>}{" "}
        <a href={hrefOf({ view: "book" })}>To the book’s contents</a>
      </p>
    </div>
  );
}
