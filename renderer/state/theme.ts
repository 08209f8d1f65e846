/** The sheet's paper: as the machine has it, or as chosen with one key. */
import { useCallback, useEffect } from "react";
import { usePreferences } from "./preferences.tsx";

const prefersDark = () => window.matchMedia("(prefers-color-scheme: dark)").matches;

/** Answers what turns light into dark and back. */
export function useTheme(): () => void {
  const { values, set } = usePreferences();
  const chosen = values?.["paper"] ?? "";

  useEffect(() => {
    if (chosen) document.documentElement.dataset["paper"] = chosen;
    else delete document.documentElement.dataset["paper"];
  }, [chosen]);

  return useCallback(() => {
    const isDark = chosen ? chosen === "dark" : prefersDark();
    set("paper", isDark ? "light" : "dark");
  }, [chosen, set]);
}
