/**
 * Out-of-plane bending (Halgren, J. Comput. Chem. 1996, 17, 490, equation 6):
 * EOOP = 0.043844/2 · koop · χ², χ in degrees the Wilson angle between the bond j-l and the plane i-j-k.
 */
import type { CurvatureTerm, EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import { COLLINEAR_GUARD, KCAL_PER_MDYN_ANGSTROM } from './constants';
import { addOuterProduct } from './curvature-blocks';

/** The out-of-plane energy of all trigonal centers, kcal/mol. */
export function outOfPlaneTerm({ atoms, force }: Interactions['outOfPlanes']): EnergyTerm {
  const count = force.length;
  return (x, gradient) => {
    let energy = 0;
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[4 * n];
      const j = 3 * atoms[4 * n + 1];
      const k = 3 * atoms[4 * n + 2];
      const l = 3 * atoms[4 * n + 3];
      const ux = x[i] - x[j];
      const uy = x[i + 1] - x[j + 1];
      const uz = x[i + 2] - x[j + 2];
      const vx = x[k] - x[j];
      const vy = x[k + 1] - x[j + 1];
      const vz = x[k + 2] - x[j + 2];
      const wx = x[l] - x[j];
      const wy = x[l + 1] - x[j + 1];
      const wz = x[l + 2] - x[j + 2];
      // Normal of the plane i-j-k; χ = atan2(height, level) with both scaled by |normal| |w|.
      const nx = uy * vz - uz * vy;
      const ny = uz * vx - ux * vz;
      const nz = ux * vy - uy * vx;
      const nn = nx * nx + ny * ny + nz * nz;
      const ww = wx * wx + wy * wy + wz * wz;
      const height = nx * wx + ny * wy + nz * wz;
      const square = nn * ww + COLLINEAR_GUARD;
      const level = Math.sqrt(Math.max(square - height * height, COLLINEAR_GUARD));
      const chi = Math.atan2(height, level);
      const stiffness = KCAL_PER_MDYN_ANGSTROM * force[n] * chi;
      energy += 0.5 * stiffness * chi;
      const slope = stiffness / level;
      const tilt = (slope * height) / square;
      // Derivatives by the normal, then by the atoms.
      const px = slope * wx - tilt * ww * nx;
      const py = slope * wy - tilt * ww * ny;
      const pz = slope * wz - tilt * ww * nz;
      const ix = vy * pz - vz * py;
      const iy = vz * px - vx * pz;
      const iz = vx * py - vy * px;
      const kx = py * uz - pz * uy;
      const ky = pz * ux - px * uz;
      const kz = px * uy - py * ux;
      const lx = slope * nx - tilt * nn * wx;
      const ly = slope * ny - tilt * nn * wy;
      const lz = slope * nz - tilt * nn * wz;
      gradient[i] += ix;
      gradient[i + 1] += iy;
      gradient[i + 2] += iz;
      gradient[k] += kx;
      gradient[k + 1] += ky;
      gradient[k + 2] += kz;
      gradient[l] += lx;
      gradient[l + 1] += ly;
      gradient[l + 2] += lz;
      gradient[j] -= ix + kx + lx;
      gradient[j + 1] -= iy + ky + ly;
      gradient[j + 2] -= iz + kz + lz;
    }
    return energy;
  };
}

/** Below this product of |normal|² |w|², in Å⁶, the plane is too ill-defined to steer by. */
const SMALLEST_STEERING_SQUARE = 0.05;

/** Out-of-plane stiffness times the outer product of the Wilson angle's derivatives. */
export function outOfPlaneCurvature({ atoms, force }: Interactions['outOfPlanes']): CurvatureTerm {
  const count = force.length;
  const offsets = new Int32Array(4);
  const derivative = new Float64Array(12);
  return (x, hessian) => {
    for (let n = 0; n < count; n++) {
      for (let a = 0; a < 4; a++) offsets[a] = 3 * atoms[4 * n + a];
      if (!wilsonDerivative(x, offsets, derivative)) continue;
      const stiffness = KCAL_PER_MDYN_ANGSTROM * Math.max(0, force[n]);
      addOuterProduct(hessian, x.length, offsets, derivative, 4, stiffness);
    }
  };
}

/** Writes the derivatives of the Wilson angle by i, j, k, l; false where the angle is ill-defined. */
function wilsonDerivative(x: Float64Array, offsets: Int32Array, derivative: Float64Array): boolean {
  const i = offsets[0];
  const j = offsets[1];
  const k = offsets[2];
  const l = offsets[3];
  const ux = x[i] - x[j];
  const uy = x[i + 1] - x[j + 1];
  const uz = x[i + 2] - x[j + 2];
  const vx = x[k] - x[j];
  const vy = x[k + 1] - x[j + 1];
  const vz = x[k + 2] - x[j + 2];
  const wx = x[l] - x[j];
  const wy = x[l + 1] - x[j + 1];
  const wz = x[l + 2] - x[j + 2];
  const nx = uy * vz - uz * vy;
  const ny = uz * vx - ux * vz;
  const nz = ux * vy - uy * vx;
  const nn = nx * nx + ny * ny + nz * nz;
  const ww = wx * wx + wy * wy + wz * wz;
  const height = nx * wx + ny * wy + nz * wz;
  const square = nn * ww;
  const level = Math.sqrt(Math.max(square - height * height, 0));
  if (level * level < SMALLEST_STEERING_SQUARE) return false;
  const px = (wx - (height * ww * nx) / square) / level;
  const py = (wy - (height * ww * ny) / square) / level;
  const pz = (wz - (height * ww * nz) / square) / level;
  derivative[0] = vy * pz - vz * py;
  derivative[1] = vz * px - vx * pz;
  derivative[2] = vx * py - vy * px;
  derivative[6] = py * uz - pz * uy;
  derivative[7] = pz * ux - px * uz;
  derivative[8] = px * uy - py * ux;
  derivative[9] = (nx - (height * nn * wx) / square) / level;
  derivative[10] = (ny - (height * nn * wy) / square) / level;
  derivative[11] = (nz - (height * nn * wz) / square) / level;
  for (let p = 0; p < 3; p++) {
    derivative[3 + p] = -derivative[p] - derivative[6 + p] - derivative[9 + p];
  }
  return true;
}
