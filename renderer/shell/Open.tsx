/** Files and folders into the book: dropped anywhere, or chosen. */
import {
  createContext,
  useCallback,
  useContext,
  useEffect,
  useMemo,
  useRef,
  useState,
  type ReactNode,
} from "react";
import { filesOfDrop, sourcesOf, type Named } from "../bench/drop.ts";
import { plural } from "../format/words.ts";
import { messageOf, useDesk } from "../state/bench.tsx";
import { useSay } from "./say.tsx";

interface Open {
  choose(): void;
  chooseFolder(): void;
}

const OpenContext = createContext<Open>({ choose() {}, chooseFolder() {} });
export const useOpen = () => useContext(OpenContext);

export function OpenProvider({ children }: { children: ReactNode }) {
  const { bench, follow } = useDesk();
  const say = useSay();
  const files = useRef<HTMLInputElement>(null);
  const folder = useRef<HTMLInputElement>(null);

  const take = useCallback(
    async (named: Named[]) => {
      if (named.length === 0) return;
      try {
        const report = (sent: number) => say(`Taking in ${sent} of ${plural(named.length, "file")} …`);
        const sources = await sourcesOf(bench, named, report);
        if (sources.length === 0) say("There is no capture among these files.");
        else follow((await bench.call("open", { sources })).job);
      } catch (error) {
        say(messageOf(error));
      }
    },
    [bench, follow, say],
  );
  const over = useDropAnywhere(take, say);
  const open = useMemo(
    () => ({ choose: () => files.current?.click(), chooseFolder: () => folder.current?.click() }),
    [],
  );
  const chosen = (input: HTMLInputElement) => {
    const named = Array.from(input.files ?? [], (file) => ({
      name: file.webkitRelativePath || file.name,
      file,
    }));
    input.value = "";
    void take(named);
  };
  return (
    <OpenContext value={open}>
      {children}
      <input ref={files} type="file" multiple hidden onChange={(event) => chosen(event.currentTarget)} />
      <input
        ref={folder}
        type="file"
        multiple
        hidden
        {...{ webkitdirectory: "" }}
        onChange={(event) => chosen(event.currentTarget)}
      />
      {over && (
        <div className="drop-here" aria-hidden="true">
          <p>Let go: these captures go into the book.</p>
        </div>
      )}
    </OpenContext>
  );
}

function useDropAnywhere(take: (named: Named[]) => Promise<void>, say: (text: string) => void): boolean {
  const [over, setOver] = useState(false);
  useEffect(() => {
    const enter = (event: DragEvent) => {
      if (!event.dataTransfer?.types.includes("Files")) return;
      event.preventDefault();
      setOver(true);
    };
    const leave = (event: DragEvent) => event.relatedTarget === null && setOver(false);
    const drop = (event: DragEvent) => {
      event.preventDefault();
      setOver(false);
      if (event.dataTransfer)
        filesOfDrop(event.dataTransfer.items).then(take, (error: unknown) => say(messageOf(error)));
    };
    window.addEventListener("dragenter", enter);
    window.addEventListener("dragover", enter);
    window.addEventListener("dragleave", leave);
    window.addEventListener("drop", drop);
    return () => {
      window.removeEventListener("dragenter", enter);
      window.removeEventListener("dragover", enter);
      window.removeEventListener("dragleave", leave);
      window.removeEventListener("drop", drop);
    };
  }, [take, say]);
  return over;
}
