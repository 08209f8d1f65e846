/** Light or dark, greeting seen, templates, last place: kept by the host, with the book. */
import { createContext, useCallback, useContext, useEffect, useMemo, useState, type ReactNode } from "react";
import { useBench } from "./bench.tsx";

interface Preferences {
  /** null until the host answered. */
  values: Record<string, string> | null;
  set(key: string, value: string): void;
}

const PreferencesContext = createContext<Preferences | null>(null);

export function usePreferences(): Preferences {
  const preferences = useContext(PreferencesContext);
  if (!preferences) throw new Error("usePreferences outside its provider");
  return preferences;
}

export function PreferencesProvider({ children }: { children: ReactNode }) {
  const bench = useBench();
  const [values, setValues] = useState<Record<string, string> | null>(null);

  useEffect(() => {
    bench.call("preferences", {}).then(setValues, () => setValues({}));
  }, [bench]);

  const set = useCallback(
    (key: string, value: string) => {
      setValues((old) => ({ ...old, [key]: value }));
      // A preference that could not be kept (a read-only book) still holds for this page.
      bench.call("setPreference", { key, value }).catch(() => undefined);
    },
    [bench],
  );
  const preferences = useMemo(() => ({ values, set }), [values, set]);
  return <PreferencesContext value={preferences}>{children}</PreferencesContext>;
}
