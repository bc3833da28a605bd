/**
 * Torsion (Halgren, J. Comput. Chem. 1996, 17, 490, equation 7):
 * ET = 1/2 (V1 (1 + cos φ) + V2 (1 - cos 2φ) + V3 (1 + cos 3φ)), written as a polynomial in c = cos φ:
 * cos 2φ = 2c² - 1, cos 3φ = 4c³ - 3c. So there is nothing singular at 0 and 180 degrees.
 */
import type { CurvatureTerm, EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import { COLLINEAR_GUARD } from './constants';
import { addOuterProduct } from './curvature-blocks';
import { torsionDerivative } from './torsion-derivative';

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
 * The largest d²ET/dφ² a torsion can have times the outer product of its derivatives. The value at the place itself
 * steers worse: steps turn torsions far enough to change it.
 */
export function torsionCurvature({ atoms, v1, v2, v3 }: Interactions['torsions']): CurvatureTerm {
  const count = v1.length;
  const stiffness = v1.map(
    (v, q) => 0.5 * (Math.abs(v) + 4 * Math.abs(v2[q]) + 9 * Math.abs(v3[q])),
  );
  const offsets = new Int32Array(4);
  const derivative = new Float64Array(12);
  return (x, hessian) => {
    for (let q = 0; q < count; q++) {
      for (let a = 0; a < 4; a++) offsets[a] = 3 * atoms[4 * q + a];
      torsionDerivative(x, offsets, derivative);
      addOuterProduct(hessian, x.length, offsets, derivative, 4, stiffness[q]);
    }
  };
}
