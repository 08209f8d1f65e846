/**
 * Resolution of a channel: the spacing of the levels its values stand on. null where the values lie on
 * no ladder (averaged, filtered) or on too few rungs to tell.
 */
const looked = 40_000;
const fewestLevels = 4;

export function estimateLsb(values: Float64Array): number | null {
  const spacings = levelSpacings(values);
  if (spacings.length < fewestLevels - 1) return null;
  const ordered = spacings.toSorted();
  // Float noise of a zero ("-4.76837e-07" among steps of 0.4) must not set the resolution.
  const typical = ordered[ordered.length >> 1];
  const rungs = ordered.filter((spacing) => spacing > 1e-3 * typical);
  return fitLadder(rungs);
}

function levelSpacings(values: Float64Array): Float64Array {
  const levels = pick(values).toSorted();
  let count = 0;
  for (let i = 1; i < levels.length; i++) {
    const spacing = levels[i] - levels[i - 1];
    // In place: a spacing stands left of the levels it is taken from.
    if (spacing > 0) levels[count++] = spacing;
  }
  return levels.subarray(0, count);
}

/** Finite values, of blocks spread over the record: neighbours show small spacings, spread shows all of it. */
function pick(values: Float64Array): Float64Array {
  const whole = values.length <= looked;
  const block = whole ? values.length : 400;
  const blocks = whole ? 1 : looked / block;
  const picked = new Float64Array(block * blocks);
  let count = 0;
  for (let b = 0; b < blocks; b++) {
    const from = Math.floor((b * (values.length - block)) / Math.max(1, blocks - 1));
    for (let i = from; i < from + block; i++) if (Number.isFinite(values[i])) picked[count++] = values[i];
  }
  return picked.subarray(0, count);
}

/** The smallest spacing that (almost) all are whole multiples of, refined over them. */
function fitLadder(spacings: ArrayLike<number>): number | null {
  const all = Array.from(spacings);
  let step = all[Math.floor(all.length * 0.02)];
  // Written digits round the rungs: spacings of one rung differ a little, their mean is the rung.
  for (let pass = 0; pass < 3; pass++) {
    let sum = 0;
    let rungs = 0;
    let off = 0;
    for (const spacing of all) {
      const steps = Math.round(spacing / step);
      if (steps < 1 || steps > 1000) continue;
      if (Math.abs(spacing / step - steps) > 0.25) off++;
      else {
        sum += spacing;
        rungs += steps;
      }
    }
    if (rungs === 0 || off > 0.1 * all.length) return null;
    step = sum / rungs;
  }
  return step;
}
