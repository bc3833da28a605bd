/** How a torsion changes with the coordinates. */
import { torsionDerivative } from '../forcefield/terms/torsion-derivative';
import type { TorsionAtoms } from './scan-symmetry';

/** The torsion's derivative by all coordinates (3N, rad/Å) at a geometry (Å, 3N). */
export function torsionGradient(atoms: TorsionAtoms, x: Float64Array): Float64Array {
  const ends = new Float64Array(12);
  const offsets = Int32Array.from(atoms, (atom) => 3 * atom);
  torsionDerivative(x, offsets, ends);
  const gradient = new Float64Array(x.length);
  atoms.forEach((atom, n) => gradient.set(ends.subarray(3 * n, 3 * n + 3), 3 * atom));
  return gradient;
}
