/**
 * Torsion (Halgren, J. Comput. Chem. 1996, 17, 490, equation 7):
 * ET = 1/2 (V1 (1 + cos φ) + V2 (1 - cos 2φ) + V3 (1 + cos 3φ)), written as a polynomial in c = cos φ:
 * cos 2φ = 2c² - 1, cos 3φ = 4c³ - 3c. So there is nothing singular at 0 and 180 degrees.
 */
import type { CurvatureTerm, EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import { COLLINEAR_GUARD } from './constants';
import { addOuterProduct } from './curvature-blocks';
import { torsionParts } from './torsion-derivative';

/** The torsion energy, kcal/mol. */
export function torsionTerm({ atoms, v1, v2, v3 }: Interactions['torsions']): EnergyTerm {
  const count = v1.length;
  return (x, gradient) => {
    let energy = 0;
    for (let q = 0; q < count; q++) {
      const i = 3 * atoms[4 * q];
      const j = 3 * atoms[4 * q + 1];
      const k = 3 * atoms[4 * q + 2];
      const l = 3 * atoms[4 * q + 3];
      const ax = x[j] - x[i];
      const ay = x[j + 1] - x[i + 1];
      const az = x[j + 2] - x[i + 2];
      const bx = x[k] - x[j];
      const by = x[k + 1] - x[j + 1];
      const bz = x[k + 2] - x[j + 2];
      const dx = x[l] - x[k];
      const dy = x[l + 1] - x[k + 1];
      const dz = x[l + 2] - x[k + 2];
      const mx = ay * bz - az * by;
      const my = az * bx - ax * bz;
      const mz = ax * by - ay * bx;
      const nx = by * dz - bz * dy;
      const ny = bz * dx - bx * dz;
      const nz = bx * dy - by * dx;
      const mm = mx * mx + my * my + mz * mz;
      const nn = nx * nx + ny * ny + nz * nz;
      const inverse = 1 / Math.sqrt(mm * nn + COLLINEAR_GUARD);
      const c = (mx * nx + my * ny + mz * nz) * inverse;
      energy +=
        0.5 * (v1[q] * (1 + c) + v2[q] * (2 - 2 * c * c) + v3[q] * (1 + c * (4 * c * c - 3)));
      const slope = 0.5 * (v1[q] - 4 * v2[q] * c + v3[q] * (12 * c * c - 3)) * inverse;
      // Derivatives by the two normals m = a × b and n = b × d, then by the bond vectors.
      const onM = slope * c * nn * inverse;
      const onN = slope * c * mm * inverse;
      const px = slope * nx - onM * mx;
      const py = slope * ny - onM * my;
      const pz = slope * nz - onM * mz;
      const rx = slope * mx - onN * nx;
      const ry = slope * my - onN * ny;
      const rz = slope * mz - onN * nz;
      const gax = by * pz - bz * py;
      const gay = bz * px - bx * pz;
      const gaz = bx * py - by * px;
      const gbx = py * az - pz * ay + dy * rz - dz * ry;
      const gby = pz * ax - px * az + dz * rx - dx * rz;
      const gbz = px * ay - py * ax + dx * ry - dy * rx;
      const gdx = ry * bz - rz * by;
      const gdy = rz * bx - rx * bz;
      const gdz = rx * by - ry * bx;
      gradient[i] -= gax;
      gradient[i + 1] -= gay;
      gradient[i + 2] -= gaz;
      gradient[j] += gax - gbx;
      gradient[j + 1] += gay - gby;
      gradient[j + 2] += gaz - gbz;
      gradient[k] += gbx - gdx;
      gradient[k + 1] += gby - gdy;
      gradient[k + 2] += gbz - gdz;
      gradient[l] += gdx;
      gradient[l + 1] += gdy;
      gradient[l + 2] += gdz;
    }
    return energy;
  };
}

/**
 * The largest d²ET/dφ² that turning about a bond can meet times the outer products of the derivatives of its torsions. The
 * value at the place itself steers worse: steps turn torsions far enough to change it. But the torsions about a bond
 * cancel each other in part, as the twofold ones of a methyl group do, and what they would have one by one is far too stiff.
 */
export function torsionCurvature({ atoms, v1, v2, v3 }: Interactions['torsions']): CurvatureTerm {
  const count = v1.length;
  const { bonds, bondCount } = centralBonds(atoms, count);
  const alone = v1.map((v, q) => stiffnessOf(Math.abs(v), Math.abs(v2[q]), Math.abs(v3[q])));
  const offsets = Array.from({ length: count }, (_, q) =>
    atoms.slice(4 * q, 4 * q + 4).map((atom) => 3 * atom),
  );
  const parts = new Float64Array(2);
  const derivatives = Array.from({ length: count }, () => new Float64Array(12));
  /** For each bond the sums of V cos nφ and V sin nφ, n = 1 to 3, and of what its torsions have alone. */
  const sums = new Float64Array(7 * bondCount);
  return (x, hessian) => {
    sums.fill(0);
    for (let q = 0; q < count; q++) {
      torsionParts(x, offsets[q], derivatives[q], parts);
      const scale = 1 / Math.sqrt(parts[0] * parts[0] + parts[1] * parts[1] + COLLINEAR_GUARD);
      const c = scale * parts[0];
      const s = scale * parts[1];
      const c2 = c * c - s * s;
      const s2 = 2 * c * s;
      const bond = 7 * bonds[q];
      sums[bond] += v1[q] * c;
      sums[bond + 1] += v1[q] * s;
      sums[bond + 2] += v2[q] * c2;
      sums[bond + 3] += v2[q] * s2;
      sums[bond + 4] += v3[q] * (c * c2 - s * s2);
      sums[bond + 5] += v3[q] * (s * c2 + c * s2);
      sums[bond + 6] += alone[q];
    }
    for (let q = 0; q < count; q++) {
      const bond = 7 * bonds[q];
      if (sums[bond + 6] === 0) continue;
      const together = stiffnessOf(
        Math.sqrt(sums[bond] ** 2 + sums[bond + 1] ** 2),
        Math.sqrt(sums[bond + 2] ** 2 + sums[bond + 3] ** 2),
        Math.sqrt(sums[bond + 4] ** 2 + sums[bond + 5] ** 2),
      );
      const stiffness = (alone[q] * together) / sums[bond + 6];
      addOuterProduct(hessian, x.length, offsets[q], derivatives[q], 4, stiffness);
    }
  };
}

/** The largest second derivative of a torsion energy with these amplitudes, kcal/mol/radian². */
function stiffnessOf(v1: number, v2: number, v3: number): number {
  return 0.5 * (v1 + 4 * v2 + 9 * v3);
}

/** The number of the bond each torsion turns about. */
function centralBonds(
  atoms: Readonly<Int32Array>,
  count: number,
): { bonds: Int32Array; bondCount: number } {
  const known = new Map<string, number>();
  const bonds = Int32Array.from({ length: count }, (_, q) => {
    const [j, k] = [atoms[4 * q + 1], atoms[4 * q + 2]];
    const key = `${Math.min(j, k)} ${Math.max(j, k)}`;
    if (!known.has(key)) known.set(key, known.size);
    return known.get(key)!;
  });
  return { bonds, bondCount: known.size };
}
