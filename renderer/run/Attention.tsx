/** What needs the eye first, most urgent on top, each a click away. */
import { Fragment, memo, useMemo } from "react";
import type { Attention as Item, PulseRow, RunDetail } from "../../app/bridge.ts";
import { plural } from "../format/words.ts";
import { hrefOf } from "../state/route.ts";

const words: Record<Item["kind"], string> = {
  "over-rating": "over a rating",
  "near-rating": "near a rating",
  question: "a question",
  error: "could not be read",
  unclear: "unclear",
  moved: "moved along the run",
  "poor-fit": "poor fit",
  "setup-missing": "missing in the setup",
};
const order = Object.keys(words) as Item["kind"][];
const shownOfAKind = 4;

/** The same thing said of several pulses is said once. */
interface Said {
  text: string;
  items: Item[];
}

function saidOnce(items: Item[]): Said[] {
  const said: Said[] = [];
  for (const item of items) {
    const before = said.find((each) => each.text === item.text);
    if (before) before.items.push(item);
    else said.push({ text: item.text, items: [item] });
  }
  return said;
}

interface Props {
  detail: RunDetail;
  rows: PulseRow[];
}

export const Attention = memo(function Attention({ detail, rows }: Props) {
  const { attention, run } = detail;
  const numbers = useMemo(
    () => new Map(rows.map((row) => [`${row.capture}/${row.pulse}`, row.number])),
    [rows],
  );
  if (attention.length === 0) return <p className="quiet">Nothing needs attention.</p>;
  const lines = (said: Said[]) =>
    said.map(({ text, items }) => (
      <li key={text}>
        <SaidLine text={text} items={items} run={run} numbers={numbers} />
      </li>
    ));
  return (
    <section className="attention" aria-labelledby="attention-title">
      <h2 id="attention-title">Look at this first</h2>
      <dl>
        {order.map((kind) => {
          const said = saidOnce(attention.filter((item) => item.kind === kind));
          if (said.length === 0) return null;
          const more = said.length > shownOfAKind + 1 ? said.length - shownOfAKind : 0;
          return (
            <div key={kind} className={`attention-${kind}`}>
              <dt>{words[kind]}</dt>
              <dd>
                <ul>{lines(said.slice(0, said.length - more))}</ul>
                {more > 0 && (
                  <details>
                    <summary>and {plural(more, "other")}</summary>
                    <ul>{lines(said.slice(-more))}</ul>
                  </details>
                )}
              </dd>
            </div>
          );
        })}
      </dl>
    </section>
  );
});

function SaidLine({ text, items, run, numbers }: Said & { run: number; numbers: Map<string, number> }) {
  const [first] = items;
  const onCard = first.kind === "setup-missing" || first.kind === "question";
  if (onCard)
    return (
      <a href="#setup-card" onClick={toCard}>
        {text}
      </a>
    );
  if (first.capture === null) return text;
  const placed = items.filter((item) => item.capture !== null);
  const number = (item: Item) => numbers.get(`${item.capture}/${item.pulse ?? 0}`);
  return (
    <>
      {placed.length === 1 && number(first) !== undefined ? "pulse " : ""}
      {placed.length > 1 && "pulses "}
      {placed.map((item, at) => (
        <Fragment key={`${item.capture}/${item.pulse}`}>
          {at > 0 && ", "}
          <a href={hrefOf({ view: "pulse", run, capture: item.capture!, pulse: item.pulse ?? 0 })}>
            {number(item) ?? "its capture"}
          </a>
        </Fragment>
      ))}
      : {text}
    </>
  );
}

/** The address belongs to the route: the card is scrolled to without it. */
function toCard(event: { preventDefault(): void }) {
  event.preventDefault();
  document.getElementById("setup-card")?.scrollIntoView();
  document.querySelector<HTMLButtonElement>("#setup-card button")?.focus();
}
