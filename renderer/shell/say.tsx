/** Short spoken lines at the foot of the page: what was just done, or why it was not. */
import { createContext, useCallback, useContext, useEffect, useState, type ReactNode } from "react";

const SayContext = createContext<(text: string) => void>(() => undefined);

export const useSay = () => useContext(SayContext);

const shown_ms = 6000;

export function SayProvider({ children }: { children: ReactNode }) {
  const [said, setSaid] = useState<{ text: string } | null>(null);
  const say = useCallback((text: string) => setSaid({ text }), []);
  useEffect(() => {
    if (!said) return undefined;
    const timer = setTimeout(() => setSaid(null), shown_ms);
    return () => clearTimeout(timer);
  }, [said]);
  return (
    <SayContext value={say}>
      {children}
      <p className="said" role="status">
        {said?.text}
      </p>
    </SayContext>
  );
}
