/**
 * Angle bending (Halgren, J. Comput. Chem. 1996, 17, 490, equation 3), and its form for linear vertices (equation 4):
 * EA = 0.043844/2 · ka · Δθ² · (1 + cb Δθ), Δθ = θ - θ0 in degrees, cb = -0.4 1/rad = -0.006981317 1/degree;
 * EA = 143.9325 · ka · (1 + cos θ).
 */
import type { CurvatureTerm, EnergyTerm } from '../../energy-term';
import type { Interactions } from '../interactions';
import {
  COLLINEAR_GUARD,
  CUBIC_BEND as cb,
  KCAL_PER_MDYN_ANGSTROM,
  RADIANS_PER_DEGREE,
} from './constants';
import { addOuterProduct } from './curvature-blocks';

/** The bending energy of all angles, kcal/mol. */
export function angleTerm({ atoms, angle, force, linear }: Interactions['angles']): EnergyTerm {
  const count = force.length;
  return (x, gradient) => {
    let energy = 0;
    for (let n = 0; n < count; n++) {
      const i = 3 * atoms[3 * n];
      const j = 3 * atoms[3 * n + 1];
      const k = 3 * atoms[3 * n + 2];
      const ux = x[i] - x[j];
      const uy = x[i + 1] - x[j + 1];
      const uz = x[i + 2] - x[j + 2];
      const vx = x[k] - x[j];
      const vy = x[k + 1] - x[j + 1];
      const vz = x[k + 2] - x[j + 2];
      const uu = ux * ux + uy * uy + uz * uz;
      const vv = vx * vx + vy * vy + vz * vz;
      const uv = ux * vx + uy * vy + uz * vz;
      // Here θ = atan2(sine, uv), and its derivatives are ∂θ/∂u = (uv vv/square · u - v)/sine and the same for v.
      const square = uu * vv + COLLINEAR_GUARD;
      const sine = Math.sqrt(Math.max(square - uv * uv, COLLINEAR_GUARD));
      const stiffness = KCAL_PER_MDYN_ANGSTROM * force[n];
      let slope: number;
      if (linear[n] === 0) {
        const change = Math.atan2(sine, uv) - angle[n] * RADIANS_PER_DEGREE;
        energy += 0.5 * stiffness * change * change * (1 + cb * change);
        slope = (stiffness * change * (1 + 1.5 * cb * change)) / sine;
      } else {
        const length = Math.sqrt(square);
        energy += stiffness * (1 + uv / length);
        slope = -stiffness / length;
      }
      const onU = (slope * uv * vv) / square;
      const onV = (slope * uv * uu) / square;
      const fx = onU * ux - slope * vx;
      const fy = onU * uy - slope * vy;
      const fz = onU * uz - slope * vz;
      const hx = onV * vx - slope * ux;
      const hy = onV * vy - slope * uy;
      const hz = onV * vz - slope * uz;
      gradient[i] += fx;
      gradient[i + 1] += fy;
      gradient[i + 2] += fz;
      gradient[k] += hx;
      gradient[k + 1] += hy;
      gradient[k + 2] += hz;
      gradient[j] -= fx + hx;
      gradient[j + 1] -= fy + hy;
      gradient[j + 2] -= fz + hz;
    }
    return energy;
  };
}

/** Bending stiffness times the outer product of the angle's derivatives; never below a tenth of the force constant. */
export function angleCurvature(table: Interactions['angles']): CurvatureTerm {
  const { atoms, angle, force, linear } = table;
  const count = force.length;
  const offsets = new Int32Array(3);
  const derivative = new Float64Array(9);
  return (x, hessian) => {
    for (let n = 0; n < count; n++) {
      const value = angleDerivative(x, atoms, 3 * n, offsets, derivative);
      const change = value - angle[n] * RADIANS_PER_DEGREE;
      const softening = linear[n] === 0 ? Math.max(0.1, 1 + 3 * cb * change) : 1;
      const stiffness = KCAL_PER_MDYN_ANGSTROM * force[n] * softening;
      addOuterProduct(hessian, x.length, offsets, derivative, 3, stiffness);
    }
  };
}

/** Smallest sine, times both lengths in Å², that still steers: closer to a line the derivative of θ blows up. */
const SMALLEST_STEERING_SINE = 0.05;

/**
 * Writes the offsets of the atoms of the angle at `atoms[start]` and the derivatives of θ (i, j, k) and returns θ in
 * radians.
 */
export function angleDerivative(
  x: Float64Array,
  atoms: Int32Array,
  start: number,
  offsets: Int32Array,
  derivative: Float64Array,
): number {
  const i = 3 * atoms[start];
  const j = 3 * atoms[start + 1];
  const k = 3 * atoms[start + 2];
  offsets[0] = i;
  offsets[1] = j;
  offsets[2] = k;
  let uu = 0;
  let vv = 0;
  let uv = 0;
  for (let p = 0; p < 3; p++) {
    const u = x[i + p] - x[j + p];
    const v = x[k + p] - x[j + p];
    uu += u * u;
    vv += v * v;
    uv += u * v;
  }
  const square = uu * vv + COLLINEAR_GUARD;
  const sine = Math.sqrt(Math.max(square - uv * uv, COLLINEAR_GUARD));
  const steering = Math.max(sine, SMALLEST_STEERING_SINE);
  for (let p = 0; p < 3; p++) {
    const u = x[i + p] - x[j + p];
    const v = x[k + p] - x[j + p];
    derivative[p] = ((uv * vv * u) / square - v) / steering;
    derivative[6 + p] = ((uv * uu * v) / square - u) / steering;
    derivative[3 + p] = -derivative[p] - derivative[6 + p];
  }
  return Math.atan2(sine, uv);
}
