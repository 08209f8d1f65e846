import { statementWords } from "../../../analysis/setup/words.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { CaptureDetail } from "../../bridge.ts";
import type { RunHistory } from "../book/history.ts";
import { html, isolated, type Markup } from "./markup.ts";

/** Which version read the run when, and what was stated and computed again since. */
export function historySection(history: RunHistory, captures: CaptureDetail[]): Markup {
  const { read, earlier } = history;
  return html`<ul>
    ${read.map(({ version, at }) => html`<li>Read by Ringbook ${version}, last on ${momentOf(at)}.</li>`)}
    ${changesOf(history)}
    ${
      earlier === 0
        ? html``
        : html`<li>
            The figures on these pages were computed again from the captures; the book keeps
            ${String(earlier)} earlier ${earlier === 1 ? "reading" : "readings"} with another setup or by
            another version.
          </li>`
    }
    ${
      isComputed(history, captures)
        ? html``
        : html`<li>
            <strong>What was stated last is not computed yet</strong>: the figures on these pages rest on the
            setup above.
          </li>`
    }
  </ul>`;
}

/** "2026-12-01 15:23 UTC" */
export const momentOf = (iso: string) => `${iso.slice(0, 16).replace("T", " ")} UTC`;

function changesOf({ statements }: RunHistory): Markup[] {
  let before: Setup = {};
  return statements.map(({ at, stated, takenBack }) => {
    const words = differences(before, stated).map(([what, value]) => `${what}: ${value}`);
    if (!takenBack) before = stated;
    return html`<li>
      Stated on ${momentOf(at)}${takenBack ? " and taken back later" : ""}:
      ${isolated(words.join("; ") || "nothing new")}.
    </li>`;
  });
}

/** What the second setup says otherwise, with what the first said. */
function differences(before: Setup, after: Setup): [what: string, value: string][] {
  const words = (setup: Setup) =>
    new Map(
      (Object.keys(setup) as (keyof Setup)[]).flatMap((key) =>
        statementWords(key, setup).map(([what, value]): [string, string] => [what, value]),
      ),
    );
  const [old, now] = [words(before), words(after)];
  return [...new Set([...old.keys(), ...now.keys()])].flatMap((what): [string, string][] => {
    const [was, is] = [old.get(what), now.get(what)];
    if (was === is) return [];
    if (is === undefined) return [[what, `stated no more, before ${was}`]];
    return [[what, was === undefined ? is : `${is}, before ${was}`]];
  });
}

/** Whether the readings rest on what stands; channels are stated by name or place and may be merged. */
function isComputed({ statements }: RunHistory, captures: CaptureDetail[]): boolean {
  const stated = statements.findLast(({ takenBack }) => !takenBack)?.stated ?? {};
  return captures.every(({ setup }) =>
    Object.entries(stated).every(
      ([key, value]) =>
        key === "channels" ||
        key === "format" ||
        JSON.stringify(setup[key as keyof Setup]) === JSON.stringify(value),
    ),
  );
}
