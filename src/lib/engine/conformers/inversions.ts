/** Moves that turn the pyramid of an amine inside out. */
import type { Molecule } from '../molecule/molecule';
import { atomShapes } from './ideal-geometry';
import { collectSide } from './drives';

/** A pyramidal nitrogen and the branch that swings to its other side. */
export interface Inversion {
  readonly nitrogen: number;
  /** The two neighbors that stay. */
  readonly base: readonly [number, number];
  /** The first atom of the branch. */
  readonly tip: number;
  /** The whole branch. */
  readonly moving: Int32Array;
}

/**
 * Finds the amines whose inversion makes a different conformer: not those with two equal branches, where turning
 * about a bond does the same, nor those whose three bonds all lie in rings, nor configured ones.
 */
export function findInversions(molecule: Molecule, classes: ArrayLike<number>): Inversion[] {
  const shapes = atomShapes(molecule);
  const inversions: Inversion[] = [];
  for (let nitrogen = 0; nitrogen < molecule.atomCount; nitrogen++) {
    const neighbors = molecule.neighbors[nitrogen];
    if (molecule.atomicNumbers[nitrogen] !== 7 || neighbors.length !== 3) continue;
    if (shapes[nitrogen] !== 'tetrahedral') continue;
    if (molecule.stereocenters.some(({ atom }) => atom === nitrogen)) continue;
    const branches = neighbors
      .filter(({ bond }) => !molecule.ringBonds[bond])
      .map(({ atom }) => ({ atom, side: collectSide(molecule, nitrogen, [atom]) }))
      .sort((a, b) => a.side.length - b.side.length || a.atom - b.atom);
    const kinds = new Set(branches.map(({ atom }) => classes[atom]));
    if (branches.length === 0 || kinds.size < branches.length) continue;
    const [{ atom: tip, side }] = branches;
    const [first, second] = neighbors.map(({ atom }) => atom).filter((atom) => atom !== tip);
    inversions.push({ nitrogen, base: [first, second], tip, moving: Int32Array.from(side) });
  }
  return inversions;
}

/** Six times the signed volume of the nitrogen's pyramid over the product of its edges; its sign tells the two forms. */
export function pyramid(x: Float64Array, { nitrogen, base, tip }: Inversion): number {
  const [u, v, w] = [base[0], base[1], tip].map((atom) => unitBond(x, nitrogen, atom));
  return dot(cross(u, v), w);
}

/** Swings the branch to its mirror position through the plane of the nitrogen and its base, in place. */
export function invert(x: Float64Array, { nitrogen, base, tip, moving }: Inversion): void {
  const normal = normalize(cross(unitBond(x, nitrogen, base[0]), unitBond(x, nitrogen, base[1])));
  const from = unitBond(x, nitrogen, tip);
  const height = dot(from, normal);
  const axis = cross(from, normal);
  const length = Math.hypot(...axis);
  if (length < 1e-6) return;
  const unit = axis.map((value) => value / length);
  // The branch goes from its height above the base's plane to the same height below.
  const turn = -2 * Math.asin(Math.max(-1, Math.min(1, height)));
  const [cosine, sine] = [Math.cos(turn), Math.sin(turn)];
  for (const atom of moving) {
    const p = [0, 1, 2].map((d) => x[3 * atom + d] - x[3 * nitrogen + d]);
    const side = cross(unit, p);
    const along = dot(unit, p) * (1 - cosine);
    for (let d = 0; d < 3; d++) {
      x[3 * atom + d] = x[3 * nitrogen + d] + p[d] * cosine + side[d] * sine + unit[d] * along;
    }
  }
}

function unitBond(x: Float64Array, from: number, to: number): number[] {
  return normalize([0, 1, 2].map((d) => x[3 * to + d] - x[3 * from + d]));
}

function normalize(vector: readonly number[]): number[] {
  const length = Math.hypot(...vector);
  return vector.map((value) => value / length);
}

function cross(u: readonly number[], v: readonly number[]): number[] {
  return [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
}

function dot(u: readonly number[], v: readonly number[]): number {
  return u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
}
