/** How the book is meant to be used, and the cautions. Inside the program: it needs no network. */
import { SheetHead } from "../shell/SheetHead.tsx";

export function Help() {
  return (
    <article className="help">
      <SheetHead title="How to use this book" plainTitle="Help" page="help" />
      <section>
        <h2>The road from coil to page</h2>
        <p>
          Hit the coil with a pulse or a train of them, record the switch node (and what else you have: coil
          current, gate, secondary), save the capture as CSV and drop it here, or let the book watch the
          folder. Captures of one folder make a run. Every conduction with its switch-off is a pulse.
        </p>
      </section>
      <section>
        <h2>Reading the line of a run</h2>
        <p>
          Each small drawing is the ring of one pulse as it died away. A filled lozenge stands where a spark
          broke it; an open circle below says that there was none; a question mark that the trace does not
          decide it. A short rule under the mark is your own verdict, and it wins in the counts. The rate is
          given with its exact interval, and unclear pulses widen it to both sides.
        </p>
      </section>
      <section>
        <h2>Reading a pulse</h2>
        <p>
          The trace is drawn in ink. The thick line is the fitted ring, the dashed one what it would have gone
          on to do. Notes in the margin say what was concluded and point to the place. Below stand the other
          channels, what the fit leaves over, and the peaks of the ring on a logarithmic scale, where a steady
          ring is a straight line and a spark breaks it.
        </p>
        <p>
          Click the drawing, then the wheel looks closer; drag moves it; a double click takes it back. Or use
          + − 0 and Shift with the arrows.
        </p>
      </section>
      <section>
        <h2>Figures</h2>
        <p>
          A figure is given with one standard uncertainty: 5.82 ± 0.04 mH. Two of them to either side hold the
          truth in about 95 of 100 cases. A dash means that the figure could not be had; the reason stands
          beside it. Nearly always the capacitor’s tolerance is what limits L: measure the capacitor and state
          it.
        </p>
      </section>
      <section>
        <h2>The setup card</h2>
        <p>
          Its face shows what is stated, its back every field, what it is for and where its value came from:
          stated here, the file’s setup, the folder’s setup, or guessed. Guesses are underlined. A probe’s
          factor is stated only where the scope did not multiply already.
        </p>
      </section>
      <section id="cautions">
        <h2>Cautions</h2>
        <ul>
          <li>
            A coil at work stores energy, and its secondary reaches tens of kilovolts. A few joules can injure
            or kill.
          </li>
          <li>Use probes and dividers rated for the kick and the secondary, not for the supply.</li>
          <li>
            Discharge the capacitor and the secondary before touching anything. Keep one hand away. Stand on
            an insulated floor.
          </li>
          <li>Arcs give off ozone and ultraviolet light: ventilate, and shield your eyes.</li>
          <li>Keep people with pacemakers or other implanted devices away.</li>
          <li>Follow your local codes; where they ask for a licensed person, that person does the work.</li>
          <li>
            From 80 % of a stated rating on, the book warns. It can only judge what was recorded and stated:
            it is a measuring aid, never a safety device.
          </li>
        </ul>
      </section>
    </article>
  );
}
