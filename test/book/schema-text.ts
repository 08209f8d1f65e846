import { DatabaseSync } from "@photostructure/sqlite";

/** The book's tables, indices and triggers as SQLite holds them, one a line. */
export function schemaText(path: string): string {
  const db = new DatabaseSync(path, { readOnly: true });
  const rows = db
    .prepare("SELECT sql FROM sqlite_schema WHERE sql IS NOT NULL AND name NOT LIKE 'sqlite%' ORDER BY name")
    .all() as { sql: string }[];
  db.close();
  return rows.map(({ sql }) => `${sql.replace(/\s+/g, " ")};\n`).join("");
}
