/** HTML as text with everything from outside escaped. */

const entities: Record<string, string> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};
/** Signs that turn the direction of what follows, or that no page can show: a name must read as it is spelled. */
// oxlint-disable-next-line no-control-regex
const unseen = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f-\u009f\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;
export const escape = (text: string) =>
  text.replace(unseen, "\ufffd").replace(/[&<>"']/g, (sign) => entities[sign]);

/** Ready markup, told apart from text that must be escaped. */
export class Markup {
  constructor(readonly text: string) {}
}

type Piece = string | number | null | undefined | Markup | Markup[];

const piece = (value: Piece): string => {
  if (value instanceof Markup) return value.text;
  if (Array.isArray(value)) return value.map(({ text }) => text).join("");
  return value === null || value === undefined ? "" : escape(String(value));
};

/** Template tag: what is filled in is escaped unless it is markup. */
export const html = (parts: TemplateStringsArray, ...values: Piece[]) =>
  new Markup(parts.map((part, i) => part + (i < values.length ? piece(values[i]) : "")).join(""));

/** Text in whatever direction it is written, without turning what stands beside it. */
export const isolated = (text: string) => html`<bdi>${text}</bdi>`;

export const table = (head: string[], rows: (string | Markup)[][]) =>
  html`<table>
    <thead>
      <tr>
        ${head.map((cell) => html`<th>${cell}</th>`)}
      </tr>
    </thead>
    <tbody>
      ${rows.map(
        (row) =>
          html`<tr>
            ${row.map((cell) => html`<td>${cell}</td>`)}
          </tr>`,
      )}
    </tbody>
  </table>`;
