/** All figures of a pulse with their uncertainties, what each rests on, and its budget on demand. */
import type { BudgetLine, CaptureReading, Figure, PulseReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { dash, figureText, percent, plain, stated } from "../format/figure.ts";
import { CopyButton } from "../shell/CopyButton.tsx";
import { useCopy } from "../shell/useCopy.ts";
import { Caution } from "../help/Caution.tsx";

interface Row {
  name: string;
  text: string;
  rests: string;
  budget?: BudgetLine[];
  unit: string;
}

type Source = { reading: CaptureReading; pulse: PulseReading; setup: Setup };

export function Figures(source: Source) {
  const rows = rowsOf(source);
  const asText = () => rows.map((row) => [row.name, row.text, row.rests].join("\t")).join("\n");
  return (
    <section className="figures" aria-labelledby="figures-title">
      <h2 id="figures-title">
        Figures <CopyButton text={asText} keyName="t" does="copy the table of figures" />
      </h2>
      <table>
        <thead>
          <tr>
            <th scope="col">figure</th>
            <th scope="col">value ± standard uncertainty</th>
            <th scope="col">rests on</th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <FigureRow key={row.name} row={row} />
          ))}
        </tbody>
      </table>
      <Caution />
    </section>
  );
}

function FigureRow({ row }: { row: Row }) {
  const copy = useCopy();
  return (
    <tr className={row.text === dash ? "missing" : undefined}>
      <th scope="row">{row.name}</th>
      <td className="tabular">
        {row.text === dash ? (
          dash
        ) : (
          <button
            type="button"
            className="value"
            title={`copy ${row.name}`}
            onClick={() => copy(row.text, `Copied ${row.text}.`)}
          >
            {row.text}
          </button>
        )}
      </td>
      <td>
        {row.rests}
        {row.budget && row.budget.length > 0 && <Budget lines={row.budget} unit={row.unit} />}
      </td>
    </tr>
  );
}

function Budget({ lines, unit }: { lines: BudgetLine[]; unit: string }) {
  const largest = Math.max(...lines.map((line) => line.u));
  return (
    <details>
      <summary>what adds how much</summary>
      <ul className="budget">
        {lines
          .toSorted((a, b) => b.u - a.u)
          .map((line) => (
            <li key={line.source}>
              <span className="budget-bar" style={{ width: `${Math.max((line.u / largest) * 8, 0.1)}em` }} />
              <span className="tabular">{plain(line.u, unit, 2)}</span> {line.source}
            </li>
          ))}
      </ul>
    </details>
  );
}

const why = (figure: unknown, text: string, missing: string) =>
  figure === null || figure === undefined ? missing : text;

function rowsOf({ reading, pulse, setup }: Source): Row[] {
  const { ring, ramp, energy_J: energy, budget, u } = pulse;
  const mode = ring?.modes[0] ?? null;
  const refused =
    ring?.reason ?? reading.notes.find((note) => note.pulse === pulse.index)?.text ?? "not in this capture";
  const row = (
    name: string,
    figure: Figure | undefined,
    unit: string,
    rests: string,
    missing = refused,
    key = "",
  ): Row => ({
    name,
    text: figure?.u === 0 ? plain(figure.value, unit) : figureText(figure, unit),
    rests: why(figure, rests, missing),
    budget: budget?.[key],
    unit,
  });
  const spread = (value: number | null, key: string): Figure =>
    value === null ? null : { value, u: u[key] ?? 0 };
  const capacitor = setup.capacitor_F ? `the stated capacitor ${capacitorText(setup)}` : "the ring";
  const noCapacitor = setup.capacitor_F ? refused : "state the capacitor on the card";
  const noRating = setup.switchRating_V ? refused : "state the switch’s rating on the card";
  return [
    row("ring frequency", mode?.frequency_Hz, "Hz", "the fitted ring", refused, "frequency_Hz"),
    row("quality Q", mode?.q, "", "the fitted ring", refused, "q"),
    row("damping", mode?.decay_per_s, "/s", "the fitted ring", refused, "decay_per_s"),
    row("inductance L", pulse.inductance_H, "H", `ring and ${capacitor}`, noCapacitor, "inductance_H"),
    row(
      "capacitance C",
      pulse.capacitance_F,
      "F",
      setup.knownInductance_H ? "ring and stated inductance" : capacitor,
      noCapacitor,
      "capacitance_F",
    ),
    row("series resistance", pulse.resistance_ohm, "Ω", "ring damping and L", noCapacitor, "resistance_ohm"),
    row(
      "kick at the switch",
      spread(pulse.peak_V, "peak_V"),
      "V",
      "highest sample after switch-off",
      pulse.peakAtLeast_V === undefined
        ? refused
        : `cut off by the screen: at least ${plain(pulse.peakAtLeast_V, "V")}`,
    ),
    {
      name: "margin to the rating",
      text: percent(pulse.margin),
      rests: why(pulse.margin, `the switch’s ${stated(setup.switchRating_V, "V")}`, noRating),
      unit: "",
    },
    row(
      "ramp inductance",
      ramp?.inductance_H,
      "H",
      "coil current while conducting",
      ramp?.reason ?? "no current channel",
    ),
    row(
      "ramp resistance",
      ramp?.resistance_ohm,
      "Ω",
      "coil current while conducting",
      ramp?.reason ?? "no current channel",
    ),
    row(
      "current at switch-off",
      ramp?.finalCurrent_A,
      "A",
      "coil current while conducting",
      ramp?.reason ?? "no current channel",
    ),
    row(
      "energy in the coil",
      spread(energy.coil, "energy_J.coil"),
      "J",
      "L and the current at switch-off",
      "needs L and a current",
    ),
    row(
      "energy in the capacitor",
      spread(energy.capacitor, "energy_J.capacitor"),
      "J",
      "C and the kick",
      noCapacitor,
    ),
    row(
      "energy the arc took",
      spread(energy.spark, "energy_J.spark"),
      "J",
      "ring before and after the spark",
      "no spark, or not to be had",
    ),
  ];
}

function capacitorText({ capacitor_F }: Setup): string {
  if (typeof capacitor_F === "number") return stated(capacitor_F, "F");
  const tolerance = capacitor_F?.tolerance ? ` ± ${percent(capacitor_F.tolerance)}` : "";
  return stated(capacitor_F?.value, "F") + tolerance;
}
