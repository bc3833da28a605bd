/** What an external program is given and what comes back. Energies kcal/mol, lengths Å, angles degrees. */
import type { Molecule } from '../../src/lib/engine';

/** A program that was found on this machine. */
export interface InstalledProgram {
  readonly path: string;
  readonly version: string;
}

/** What the programs must know of a molecule; all of it follows from the engine's. */
export interface ProgramMolecule {
  readonly symbols: readonly string[];
  /** Sum of the formal charges, in electron charges. */
  readonly charge: number;
  /** 0, or 1 with an odd number of electrons. */
  readonly unpaired: number;
  readonly bonds: Molecule['bonds'];
}

/** A geometry with its energy. */
export interface ProgramPoint {
  /** kcal/mol; for PM7 the heat of formation at 298 K. */
  readonly energy: number;
  /** Å, 3N */
  readonly coordinates: Float64Array;
}

/** A point, or why there is none: an unconverged or failed point is a gap, never a number. */
export type PointOrGap = ProgramPoint | { readonly gap: string };

/** True where a point could not be computed. */
export function isGap(point: PointOrGap): point is { readonly gap: string } {
  return 'gap' in point;
}

/** What bounds every call. */
export interface ProgramLimits {
  /** Longest time of one call, s. */
  readonly seconds: number;
  readonly signal: AbortSignal;
}

/** 1 Eh in kcal/mol (CODATA 2018: 2625.4996394799 kJ/mol). */
export const KCAL_PER_HARTREE = 2625.4996394799 / 4.184;

/** How much longer or shorter a bond may become before it counts as broken or as another one, Å. */
const BOND_CHANGE = 0.4;

/** What another model made of a geometry may be another molecule: says so where a bond is no longer there. */
export function changedBond(
  { symbols, bonds }: ProgramMolecule,
  before: Float64Array,
  after: Float64Array,
): string | null {
  const length = (x: Float64Array, a: number, b: number) =>
    Math.hypot(x[3 * a] - x[3 * b], x[3 * a + 1] - x[3 * b + 1], x[3 * a + 2] - x[3 * b + 2]);
  for (const { a, b } of bonds) {
    if (Math.abs(length(after, a, b) - length(before, a, b)) > BOND_CHANGE) {
      return `the bond ${symbols[a]}${a + 1}–${symbols[b]}${b + 1} did not hold`;
    }
  }
  return null;
}
