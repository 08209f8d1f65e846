/** Whether the book holds the files themselves, beside what was read from them. */
import { usePreferences } from "../state/preferences.tsx";

export function KeepFiles() {
  const { values, set } = usePreferences();
  return (
    <label className="keep-files no-print">
      <input
        type="checkbox"
        checked={values?.keepFiles === "yes"}
        onChange={(event) => set("keepFiles", event.target.checked ? "yes" : "no")}
      />{" "}
      keep a compressed copy of every file that is read (up to 500 MB) in the book, so that a run can be
      computed again when the files are gone
    </label>
  );
}
