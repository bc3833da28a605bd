/** An approximate inverse Hessian from a curvature: regularized and factorized by Cholesky's method. */
import type { CurvatureTerm } from '../energy-term';
import { planElimination } from './elimination';
import type { EliminationPlan } from './elimination';
import { createFactor, factorize, solve } from './sparse-cholesky';
import type { BlockFactor } from './sparse-cholesky';

export interface Preconditioner {
  /** Forgets every curvature. */
  clear(): void;
  /** Computes and factorizes the curvature at `x`. */
  refresh(x: Float64Array, curvature: CurvatureTerm): void;
  /** Turns `vector` in place into the solution of (curvature + regularization) · solution = vector. */
  solve(vector: Float64Array): void;
}

/** Added to the diagonal, kcal/mol/Å²: about the stiffness of the softest modes a molecule has. */
const REGULARIZATION = 2;

/** Creates a preconditioner for `size` coordinates; before its first curvature it leaves vectors as they are. */
export function createPreconditioner(size: number): Preconditioner {
  const atoms = size / 3;
  let matrix = new Float64Array(0);
  const coupled = new Uint8Array(atoms * atoms);
  let factor: BlockFactor | null = null;
  let isFresh = false;
  return {
    clear: () => {
      coupled.fill(0);
      isFresh = false;
    },
    refresh: (x, curvature) => {
      if (matrix.length === 0) matrix = new Float64Array(size * size);
      else matrix.fill(0);
      curvature(x, matrix);
      // Couplings may appear as atoms move, so the pattern grows; it never shrinks.
      if (markCouplings(matrix, coupled, atoms) || !isFresh || factor === null) {
        const plan = planFor(coupled, atoms);
        if (factor?.plan !== plan) factor = createFactor(plan);
        isFresh = true;
      }
      factorize(factor, matrix, REGULARIZATION);
    },
    solve: (vector) => {
      if (isFresh && factor) solve(factor, vector);
    },
  };
}

/** The plan of the pattern met last: scans and searches ask for the same one again and again. */
let lastPattern = new Uint8Array(0);
let lastPlan: EliminationPlan | null = null;

function planFor(coupled: Uint8Array, atoms: number): EliminationPlan {
  if (lastPlan && isSame(coupled, lastPattern)) return lastPlan;
  lastPlan = planElimination(coupled, atoms);
  lastPattern = coupled.slice();
  return lastPlan;
}

function isSame(a: Uint8Array, b: Uint8Array): boolean {
  if (a.length !== b.length) return false;
  for (let n = 0; n < a.length; n++) if (a[n] !== b[n]) return false;
  return true;
}

/** Marks the pairs of atoms with a nonzero block; true when there are new ones. */
function markCouplings(matrix: Float64Array, coupled: Uint8Array, atoms: number): boolean {
  const size = 3 * atoms;
  let found = false;
  for (let a = 1; a < atoms; a++) {
    for (let b = 0; b < a; b++) {
      if (coupled[a * atoms + b] !== 0 || !hasBlock(matrix, 3 * a * size + 3 * b, size)) continue;
      coupled[a * atoms + b] = 1;
      coupled[b * atoms + a] = 1;
      found = true;
    }
  }
  return found;
}

function hasBlock(matrix: Float64Array, start: number, size: number): boolean {
  for (let row = start; row < start + 3 * size; row += size) {
    if (matrix[row] !== 0 || matrix[row + 1] !== 0 || matrix[row + 2] !== 0) return true;
  }
  return false;
}
