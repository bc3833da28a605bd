/** Compares the configuration of a geometry with what the molecule says. */
import { torsion } from '../geometry';
import type { Molecule, Stereobond, Stereocenter } from './molecule';

/** A stereocenter or double bond whose geometry is not as the molecule has it. */
export type StereoViolation =
  | { readonly kind: 'stereocenter'; readonly atom: number; readonly found: 'inverted' | 'flat' }
  | { readonly kind: 'stereobond'; readonly bond: number; readonly found: 'cis' | 'trans' };

/**
 * Handedness below which a center counts as flat. It is the triple product of unit vectors along the bonds: 3.08 for a
 * regular tetrahedron, about 1 for three bonds and a lone pair.
 */
const FLAT_CENTER = 0.15;

/** Every stereocenter and stereobond of a geometry (Å, 3N) that is not as in the molecule; empty when all are right. */
export function stereoOf(molecule: Molecule, coordinates: Float64Array): StereoViolation[] {
  const violations: StereoViolation[] = [];
  for (const center of molecule.stereocenters) {
    const found = handedness(coordinates, center.atom, center.neighbors);
    if (Math.abs(found) < FLAT_CENTER) {
      violations.push({ kind: 'stereocenter', atom: center.atom, found: 'flat' });
    } else if (found > 0 !== center.clockwise) {
      violations.push({ kind: 'stereocenter', atom: center.atom, found: 'inverted' });
    }
  }
  for (const { bond, atoms, cis } of molecule.stereobonds) {
    const found = isCis(coordinates, atoms);
    if (found !== cis)
      violations.push({ kind: 'stereobond', bond, found: found ? 'cis' : 'trans' });
  }
  return violations;
}

/** True when a geometry (Å, 3N) has the configuration of the molecule. */
export function hasRightStereo(molecule: Molecule, coordinates: Float64Array): boolean {
  return stereoOf(molecule, coordinates).length === 0;
}

/**
 * Handedness of a center's four neighbors in their order: positive when, seen from the first, the others run
 * clockwise; near 0 when the center is flat. The lone pair (-1, last) points away from the three bonds.
 */
export function handedness(
  x: Readonly<Float64Array>,
  center: number,
  neighbors: Stereocenter['neighbors'],
): number {
  const [p, q, r, s] = neighbors.map((atom) => unitVector(x, center, atom));
  const ux = q[0] - p[0];
  const uy = q[1] - p[1];
  const uz = q[2] - p[2];
  const vx = r[0] - p[0];
  const vy = r[1] - p[1];
  const vz = r[2] - p[2];
  const wx = s[0] - p[0];
  const wy = s[1] - p[1];
  const wz = s[2] - p[2];
  return ux * (vy * wz - vz * wy) + uy * (vz * wx - vx * wz) + uz * (vx * wy - vy * wx);
}

/** From the center to a neighbor; for the lone pair the center itself, which lies on the pair's side of the others. */
function unitVector(
  x: Readonly<Float64Array>,
  center: number,
  atom: number,
): readonly [number, number, number] {
  if (atom < 0) return [0, 0, 0];
  const dx = x[3 * atom] - x[3 * center];
  const dy = x[3 * atom + 1] - x[3 * center + 1];
  const dz = x[3 * atom + 2] - x[3 * center + 2];
  const length = Math.hypot(dx, dy, dz) || 1;
  return [dx / length, dy / length, dz / length];
}

/** Whether a-b=c-d is cis in a geometry: its torsion is below 90° in size. */
export function isCis(x: Float64Array, atoms: Stereobond['atoms']): boolean {
  return Math.abs(torsion(x, atoms[0], atoms[1], atoms[2], atoms[3])) < 90;
}
