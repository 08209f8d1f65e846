import { StrictMode } from "react";
import { createRoot } from "react-dom/client";
import { findBench } from "./bench/index.ts";
import { App } from "./shell/App.tsx";
import { OpenProvider } from "./shell/Open.tsx";
import { SayProvider } from "./shell/say.tsx";
import { DeskProvider } from "./state/bench.tsx";
import { PreferencesProvider } from "./state/preferences.tsx";

const bench = findBench();

function Page() {
  if (!bench)
    return (
      <main className="sheet">
        <h1>This page needs its key</h1>
        <p>
          Open it with the whole address that Ringbook printed when it started; the part after # is the key.
        </p>
      </main>
    );
  return (
    <DeskProvider bench={bench}>
      <PreferencesProvider>
        <SayProvider>
          <OpenProvider>
            <App />
          </OpenProvider>
        </SayProvider>
      </PreferencesProvider>
    </DeskProvider>
  );
}

createRoot(document.getElementById("page")!).render(
  <StrictMode>
    <Page />
  </StrictMode>,
);
