/** HTML as text with everything from outside escaped. */

const entities: Record<string, string> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};
export const escape = (text: string) => text.replace(/[&<>"']/g, (sign) => entities[sign]);

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
