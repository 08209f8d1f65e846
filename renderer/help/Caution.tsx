/** Where voltages and energies are shown: the cautions in a line, the whole of them one step away. */
import { hrefOf } from "../state/route.ts";

export const Caution = () => (
  <p className="caution">
    <span aria-hidden="true">! </span>High voltage: rated probes and dividers only, discharge before touching,
    one hand. A measuring aid, never a safety device. <a href={hrefOf({ view: "help" })}>All cautions</a>
  </p>
);
