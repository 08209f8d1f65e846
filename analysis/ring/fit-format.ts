/** What a ring fit hands on: plain values, the covariance with its order, and why it stopped. */

/**
 * One damped mode. With t = (i − from)·step_s, i the sample number, the fitted curve is
 * y(t) = offset(t) + Σ exp(−decay·t)·(cosine·cos ωt + sine·sin ωt), ω = 2π·frequency.
 */
export interface FittedMode {
  frequency_Hz: number;
  decay_per_s: number;
  /** In the channel's unit, at t = 0 (the window's first sample). */
  cosine: number;
  sine: number;
}

export interface RingFit {
  /** Window in samples of the channel, [from, to). */
  from: number;
  to: number;
  step_s: number;
  /** Lowest frequency first; empty when nothing could be fitted. */
  modes: FittedMode[];
  /** Mains pick-up and other slow waves that the ring stands on, part of the model. */
  pickup: FittedMode[];
  /** Polynomial in t/(window length), lowest power first: offset, slope, …; offset(t) = Σ baseline[k]·(t/T)^k. */
  baseline: number[];
  /**
   * (4·modes)², row-major, order per mode: frequency_Hz, decay_per_s, cosine, sine.
   * Noise only; corrected for autocorrelated residuals.
   */
  covariance: Float64Array;
  /** Root mean square residual over the window's usable samples, in the channel's unit. */
  residual: number;
  /** Noise per sample, from the data without the ring model (differences and quiet stretches). */
  noise: number;
  /** Per mode, the noise's power density at its frequency over the mean density (1: white). */
  excess: number[];
  /** Samples averaged into one for the fit (block means; the model accounts for them exactly). */
  decimation: number;
  iterations: number;
  stopped: "converged" | "iterations" | "singular";
}
