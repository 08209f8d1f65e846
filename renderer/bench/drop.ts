/** Dropped or chosen files and folders → sources the host can open, folders kept together. */
import type { Argument, Bench } from "../../app/bridge.ts";
import type { DesktopBench } from "./desktop.ts";

type Source = Argument<"open">["sources"][number];

export interface Named {
  /** With its folders: "bench-run/pulse-01.csv". */
  name: string;
  file: File;
}

/** Entries must be taken before the first await: the browser empties the list after the event. */
export async function filesOfDrop(items: DataTransferItemList): Promise<Named[]> {
  const dropped = Array.from(items, (item) => ({ entry: item.webkitGetAsEntry(), file: item.getAsFile() }));
  const found = await Promise.all(
    // A file that is on no disk (dragged out of another program) has no entry.
    dropped.map(({ entry, file }) => (entry ? walk(entry, "") : file ? [{ name: file.name, file }] : [])),
  );
  return found.flat();
}

async function walk(entry: FileSystemEntry, folder: string): Promise<Named[]> {
  const name = folder + entry.name;
  if (entry.isFile) {
    const file = await new Promise<File>((done, failed) => (entry as FileSystemFileEntry).file(done, failed));
    return [{ name, file }];
  }
  const children = await readAll((entry as FileSystemDirectoryEntry).createReader());
  const found = await Promise.all(children.map((child) => walk(child, `${name}/`)));
  return found.flat();
}

/** A reader hands out at most 100 entries at a time. */
async function readAll(reader: FileSystemDirectoryReader): Promise<FileSystemEntry[]> {
  const all: FileSystemEntry[] = [];
  for (;;) {
    const some = await new Promise<FileSystemEntry[]>((done, failed) => reader.readEntries(done, failed));
    if (some.length === 0) return all;
    all.push(...some);
  }
}

/** Sidecars travel too, the host finds them beside their captures; only captures are opened. */
export async function sourcesOf(
  bench: Bench,
  files: Named[],
  onSent: (sent: number) => void,
): Promise<Source[]> {
  const shell: DesktopBench | undefined = window.ringbook;
  const pathOf = shell?.pathOf;
  const sources: Source[] = [];
  const ordered = files.toSorted((a, b) => Number(isSidecar(b.name)) - Number(isSidecar(a.name)));
  for (const [at, { name, file }] of ordered.entries()) {
    if (pathOf) {
      if (!isSidecar(name)) sources.push({ path: pathOf(file) });
    } else {
      const bytes = new Uint8Array(await file.arrayBuffer());
      const kept = await bench.call("addFile", { name: inFolder(name), bytes });
      if (!isSidecar(name)) sources.push(kept);
    }
    onSent(at + 1);
  }
  return sources;
}

/** A run is a folder: loose files make one run a day, not one for ever. */
const inFolder = (name: string) =>
  name.includes("/") ? name : `dropped ${new Date().toLocaleDateString("sv-SE")}/${name}`;

const isSidecar = (name: string) => name.endsWith(".json");
