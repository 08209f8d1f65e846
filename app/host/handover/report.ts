import { countSentence } from "../../../analysis/format/counts.ts";
import { formatNumber } from "../../../analysis/format/figure.ts";
import type { CaptureReading } from "../../../analysis/reading-format.ts";
import { version } from "../../../package.json";
import type { CaptureDetail, RunDetail } from "../../bridge.ts";
import type { RunHistory } from "../book/history.ts";
import { baseName } from "./base-name.ts";
import type { Views } from "./index.ts";
import { escape, html, isolated, table, type Markup } from "./markup.ts";
import { budgetTable, figureTable, pulseLog, setupTable } from "./report-tables.ts";
import { historySection, momentOf } from "./report-history.ts";
import { capacitorLine } from "./report-line.ts";
import { reportStyle } from "./report-style.ts";
import { pulseDrawing } from "./trace-drawing.ts";

/** So many pulses are drawn; the log lists all of them. */
const drawnPulses = 12;
const drawingPixels = 640;

interface HandedRun {
  run: RunDetail;
  captures: CaptureDetail[];
  /** Captures of the coil's latest runs, this one's among them. */
  ofCoil: CaptureDetail[];
  history: RunHistory;
}

/** The run as one HTML file that needs nothing from outside and prints as it looks. */
export async function reportPage(handed: HandedRun, views: Views): Promise<string> {
  const { run, captures, ofCoil, history } = handed;
  const drawings = await drawPulses(captures, views);
  const body = html`<header>
      <h1>${run.name}</h1>
      <p>${headOf(run)}</p>
    </header>
    <main>
      <p class="counts">${countSentence(run.counts)}</p>
      ${attention(run, captures)}
      <h2>What was found</h2>
      ${figureTable(run, captures)}
      <h2>What it rests on</h2>
      ${budgetTable(captures)}
      <h2>Added-capacitor line</h2>
      ${capacitorLine(ofCoil)}
      <h2>The setup</h2>
      ${setupTable(run)}
      <h2>How it came about</h2>
      ${historySection(history, captures)}
      <h2>Pulses, drawn</h2>
      ${drawings}
      <h2>Pulse log</h2>
      ${pulseLog(captures)}
      <h2>Files</h2>
      <div class="files">${fileTable(captures)}</div>
      ${cautions}
    </main>
    <footer>
      Ringbook ${version} · written ${momentOf(new Date().toISOString())} · a measuring aid, not a safety
      device
    </footer>`;
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'">
<title>${escape(run.name)}</title><style>${reportStyle}</style></head><body>${body.text}</body></html>
`;
}

const headOf = ({ coil, taken, captures }: RunDetail): Markup[] =>
  [coil, taken, `${captures} ${captures === 1 ? "capture" : "captures"}`]
    .filter((part) => part !== null)
    .map((part, i) => html`${i > 0 ? " · " : ""}${isolated(part)}`);

function attention({ attention: found }: RunDetail, captures: CaptureDetail[]): Markup {
  const files = new Map(captures.map(({ capture, file }) => [capture, baseName(file)]));
  const urgent = found.filter(({ kind }) => kind !== "setup-missing").slice(0, 20);
  if (urgent.length === 0) return html``;
  const left = found.length - urgent.length;
  return html`<h2>What needs a look</h2>
    <ul>
      ${urgent.map(
        ({ text, pulse, capture }) =>
          html`<li>${placeOf(files.get(capture ?? -1) ?? null, pulse)}${isolated(text)}</li>`,
      )}${left > 0 ? html`<li>and ${left} more</li>` : html``}
    </ul>`;
}

/** "pulse-07.csv, pulse 3: " */
function placeOf(file: string | null, pulse: number | null): Markup {
  if (file === null) return html``;
  return html`${isolated(file)}${pulse === null ? "" : `, pulse ${pulse + 1}`}: `;
}

/** The first pulses that sparked, stayed quiet or are unclear, in turn, so that each kind is seen. */
async function drawPulses(captures: CaptureDetail[], views: Views): Promise<Markup> {
  const all = captures.flatMap((capture) => capture.reading.pulses.map((pulse) => ({ capture, pulse })));
  const kinds = ["unclear", "no-spark", "spark"].map((verdict) =>
    all.filter(({ pulse }) => (pulse.ruled?.verdict ?? pulse.spark?.verdict) === verdict),
  );
  const chosen = new Set(
    Array.from({ length: drawnPulses }, (_, i) => kinds.flatMap((kind) => kind.slice(i, i + 1)))
      .flat()
      .slice(0, drawnPulses),
  );
  const figures: Markup[] = [];
  for (const { capture, pulse } of all.filter((place) => chosen.has(place)))
    figures.push(await drawPulse(capture, pulse, views));
  const left = all.length - figures.length;
  return html`${figures}${left > 0 ? html`<p class="quiet">${left} more are in the log below.</p>` : html``}`;
}

async function drawPulse(
  { capture, file, reading }: CaptureDetail,
  pulse: CaptureDetail["reading"]["pulses"][number],
  views: Views,
): Promise<Markup> {
  const { ring, spark } = pulse;
  const verdict = pulse.ruled?.verdict ?? spark?.verdict ?? "no verdict";
  const title = html`${placeOf(baseName(file), pulse.index)}${verdict}`;
  const channel = reading.channels.findIndex(({ name }) => name === ring?.channel);
  const from = pulse.switchOffTime_s ?? ring?.from_s ?? null;
  const to = ring?.to_s ?? null;
  const reasons = html`<figcaption>
    <b>${title}</b>${(spark?.reasons ?? []).map((reason) => html`<br />${reason}`)}
  </figcaption>`;
  if (channel < 0 || from === null || to === null) return html`<figure>${reasons}</figure>`;
  const length = Math.max(to - from, (spark?.extinction_s ?? from) - from);
  try {
    const trace = await views.trace({
      capture,
      channel,
      from_s: from - 0.1 * length,
      to_s: from + 1.25 * length,
      pixels: drawingPixels,
    });
    const picture = await views.ringPicture({ capture, pulse: pulse.index, pixels: drawingPixels });
    return html`<figure>${pulseDrawing(trace, picture, pulse)}${reasons}</figure>`;
  } catch (error) {
    return html`<figure>
      <p class="quiet">The trace could not be drawn: ${(error as Error).message}</p>
      ${reasons}
    </figure>`;
  }
}

const fileTable = (captures: CaptureDetail[]) =>
  table(
    ["file", "record", "samples", "interval", "SHA-256"],
    captures.flatMap(({ file, sha256, companions, reading }) => [
      fileRow(file, sha256, reading),
      ...companions.map((companion) => [
        html`${isolated(baseName(companion.name))}, read along with it`,
        "",
        "",
        "",
        html`<span class="hash">${companion.sha256}</span>`,
      ]),
    ]),
  );

const fileRow = (file: string, sha256: string, { record, timebase }: CaptureReading) => [
  isolated(baseName(file)),
  `${record.index + 1} of ${record.count}`,
  String(timebase.samples),
  timebase.step_s === null ? "unknown" : formatNumber(timebase.step_s, "s", 5),
  html`<span class="hash">${sha256}</span>`,
];

const cautions = html`<h2>Cautions</h2>
  <p>
    The voltages and energies on these pages can injure or kill. Use probes and dividers rated for the kick
    and the secondary; discharge capacitor and secondary before touching; keep one hand away and stand on an
    insulated floor; arcs give off ozone and ultraviolet light; keep people with implanted devices away. Local
    codes and licensed practice come first. Ringbook is a measuring aid, never a safety device.
  </p>`;
