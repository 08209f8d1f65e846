/**
 * Long work in steps: a generator that yields between them, so that whoever drives it may say how it goes,
 * let others have their turn, or stop. The work itself knows no clock.
 */
export type Steps<T> = Generator<undefined, T, undefined>;

/** A step over so many samples takes some milliseconds. */
export const stepSamples = 2 ** 20;

/** Visits [0, length) a step at a time. */
export function* overSamples(
  length: number,
  visit: (from: number, to: number) => void,
  step = stepSamples,
): Steps<void> {
  for (let from = 0; from < length; from += step) {
    visit(from, Math.min(length, from + step));
    yield;
  }
}

/** For whoever can wait: all steps at once. */
export function atOnce<T>(steps: Steps<T>): T {
  for (;;) {
    const { done, value } = steps.next();
    if (done) return value;
  }
}
