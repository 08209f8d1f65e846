/**
 * Natural frequencies and decays of two coupled tanks from the eigenvalues of their state equations
 * (ml-matrix): L·di/dt = −R·i − v, C·dv/dt = i for both windings, with mutual inductance k·√(L1·L2).
 */
import { EigenvalueDecomposition, inverse, Matrix } from "ml-matrix";

export interface CoupledTanks {
  l1_H: number;
  r1_ohm: number;
  c1_F: number;
  l2_H: number;
  r2_ohm: number;
  c2_F: number;
  coupling: number;
}

/** Lowest frequency first. */
export function eigenmodes(tanks: CoupledTanks): { frequency_Hz: number; decay_per_s: number }[] {
  const { l1_H, r1_ohm, c1_F, l2_H, r2_ohm, c2_F, coupling } = tanks;
  const mutual = coupling * Math.sqrt(l1_H * l2_H);
  const reluctance = inverse(
    new Matrix([
      [l1_H, mutual],
      [mutual, l2_H],
    ]),
  );
  const state = Matrix.zeros(4, 4);
  for (let r = 0; r < 2; r++)
    for (let c = 0; c < 2; c++) {
      state.set(r, c, -reluctance.get(r, c) * [r1_ohm, r2_ohm][c]);
      state.set(r, 2 + c, -reluctance.get(r, c));
    }
  state.set(2, 0, 1 / c1_F);
  state.set(3, 1, 1 / c2_F);
  // Volts of either side brought to the size of amperes, so that the eigenvalues keep their digits.
  const scale = [
    1,
    Math.sqrt(l1_H / l2_H),
    Math.sqrt(l1_H / c1_F),
    Math.sqrt(l2_H / c2_F) * Math.sqrt(l1_H / l2_H),
  ];
  const balanced = Matrix.zeros(4, 4);
  for (let r = 0; r < 4; r++)
    for (let c = 0; c < 4; c++) balanced.set(r, c, (state.get(r, c) * scale[c]) / scale[r]);
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(balanced);
  return realEigenvalues
    .map((re, k) => ({ frequency_Hz: imaginaryEigenvalues[k] / (2 * Math.PI), decay_per_s: -re }))
    .filter((mode) => mode.frequency_Hz > 0)
    .toSorted((a, b) => a.frequency_Hz - b.frequency_Hz);
}

/** The same tanks for the circuit simulator, current in the first winding at t = 0. */
export const ringNetlist = (
  tanks: CoupledTanks,
  current_A: number,
  end_s: number,
  maxStep_s: number,
): string =>
  [
    "two coupled tanks ring down",
    `L1 x node ${tanks.l1_H} ic=${current_A}`,
    `R1 0 x ${tanks.r1_ohm}`,
    `C1 node 0 ${tanks.c1_F} ic=0`,
    `L2 y hv ${tanks.l2_H} ic=0`,
    `R2 0 y ${tanks.r2_ohm}`,
    `C2 hv 0 ${tanks.c2_F} ic=0`,
    `K1 L1 L2 ${tanks.coupling}`,
    `.tran ${maxStep_s} ${end_s} 0 ${maxStep_s} uic`,
    ".end",
  ].join("\n");
