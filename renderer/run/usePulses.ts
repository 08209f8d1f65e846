/** All pulses of a run, page after page, in order; kept while the run grows. */
import { useEffect, useState } from "react";
import type { Page, PulseRow } from "../../app/bridge.ts";
import { messageOf, useDesk } from "../state/bench.tsx";

interface Pulses {
  run: number | null;
  revision: number;
  rows: PulseRow[];
  complete: boolean;
  error: string | null;
}

const none: Pulses = { run: null, revision: -1, rows: [], complete: false, error: null };
const pageSize = 1000;

export function usePulses(run: number): Pulses {
  const { bench, runs } = useDesk();
  const revision = runs[run] ?? 0;
  const [pulses, setPulses] = useState(none);

  useEffect(() => {
    let wanted = true;
    const read = async () => {
      const rows: PulseRow[] = [];
      let cursor: string | null = null;
      do {
        const page: Page<PulseRow> = await bench.call("pulses", { run, cursor, limit: pageSize });
        if (!wanted) return;
        rows.push(...page.rows);
        cursor = page.cursor;
        // A longer list stays on the page until the new one has caught up with it.
        setPulses((old) => {
          if (old.run === run && old.rows.length > rows.length && cursor !== null) return old;
          return { run, revision, rows: [...rows], complete: cursor === null, error: null };
        });
      } while (cursor !== null);
    };
    read().catch(
      (error: unknown) => wanted && setPulses({ ...none, run, revision, error: messageOf(error) }),
    );
    return () => {
      wanted = false;
    };
  }, [bench, run, revision]);

  return pulses.run === run ? pulses : none;
}
