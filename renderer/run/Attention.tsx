/** What needs the eye first, most urgent on top, each a click away. */
import type { Attention as Item, RunDetail } from "../../app/bridge.ts";
import { plural } from "../format/words.ts";
import { hrefOf } from "../state/route.ts";

const words: Record<Item["kind"], string> = {
  "over-rating": "over a rating",
  "near-rating": "near a rating",
  question: "a question",
  error: "could not be read",
  "setup-missing": "missing in the setup",
  unclear: "unclear",
  "poor-fit": "poor fit",
};
const order = Object.keys(words) as Item["kind"][];
const shownOfAKind = 4;

export function Attention({ detail }: { detail: RunDetail }) {
  const { attention, run } = detail;
  if (attention.length === 0) return <p className="quiet">Nothing needs attention.</p>;
  return (
    <section className="attention" aria-labelledby="attention-title">
      <h2 id="attention-title">Look at this first</h2>
      <dl>
        {order.map((kind) => {
          const items = attention.filter((item) => item.kind === kind);
          if (items.length === 0) return null;
          const more = items.length - shownOfAKind;
          return (
            <div key={kind} className={`attention-${kind}`}>
              <dt>{words[kind]}</dt>
              <dd>
                <ul>
                  {items.slice(0, more === 1 ? undefined : shownOfAKind).map((item) => (
                    <li key={`${item.capture} ${item.pulse} ${item.text}`}>
                      <ItemText item={item} run={run} />
                    </li>
                  ))}
                  {more > 1 && (
                    <li>
                      <details>
                        <summary>and {plural(more, "other")}</summary>
                        <ul>
                          {items.slice(shownOfAKind).map((item) => (
                            <li key={`${item.capture} ${item.pulse} ${item.text}`}>
                              <ItemText item={item} run={run} />
                            </li>
                          ))}
                        </ul>
                      </details>
                    </li>
                  )}
                </ul>
              </dd>
            </div>
          );
        })}
      </dl>
    </section>
  );
}

function ItemText({ item, run }: { item: Item; run: number }) {
  if (item.capture === null)
    return item.kind === "setup-missing" ? (
      <a href="#setup-card" onClick={toCard}>
        {item.text}
      </a>
    ) : (
      item.text
    );
  return (
    <a href={hrefOf({ view: "pulse", run, capture: item.capture, pulse: item.pulse ?? 0 })}>{item.text}</a>
  );
}

/** The address belongs to the route: the card is scrolled to without it. */
function toCard(event: { preventDefault(): void }) {
  event.preventDefault();
  document.getElementById("setup-card")?.scrollIntoView();
  document.querySelector<HTMLButtonElement>("#setup-card button")?.focus();
}
