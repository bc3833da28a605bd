/** Harmonic vibrations of a geometry: the mass-weighted Hessian without translations and rotations, and its frequencies. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { differenceHessian } from '../minimizer/hessian';
import { atomicMass } from '../molecule/atomic-weights';
import type { Molecule } from '../molecule/molecule';
import { SPEED_OF_LIGHT } from '../units';
import type { Vibrations } from './free-energy';
import { rigidFrame } from './rigid-frame';
import type { RigidFrame } from './rigid-frame';
import { eigenvaluesOf, eigenvectorsOf, tridiagonalize } from './tridiagonal-form';
import type { TridiagonalForm } from './tridiagonal-form';

/** cm⁻¹ of a mode with a force constant of 1 kcal/mol/Å² and a mass of 1 g/mol: √(k/m) / 2πc. */
const WAVENUMBER = Math.sqrt(4184 * 1e20 * 1e3) / (2 * Math.PI * SPEED_OF_LIGHT);

/** The curvature of the energy round a geometry, in mass-weighted coordinates. */
export interface VibrationalForm {
  readonly masses: readonly number[];
  readonly frame: RigidFrame;
  /** The mass-weighted Hessian, rigid motions lifted far above all vibrations. */
  readonly form: TridiagonalForm;
}

/**
 * Masses of the atoms, g/mol: the average of the natural mixture, as for a substance in a flask, unless the molecule names an
 * isotope. With the most abundant isotopes instead, frequencies would rise by some 0.05 %.
 */
export function massesOf({ atomicNumbers, massNumbers }: Molecule): number[] {
  return Array.from(atomicNumbers, (number, atom) => atomicMass(number, massNumbers[atom]));
}

/** Takes the second derivatives of the energy at `x` (Å, 3N): 6N gradients and some (3N)³ operations. */
export async function vibrationalForm(
  { energy, molecule }: ForceField,
  x: Readonly<Float64Array>,
  control: Control,
): Promise<VibrationalForm> {
  const masses = massesOf(molecule);
  const frame = rigidFrame(x, masses);
  const hessian = await differenceHessian(energy, x, control);
  weigh(hessian, masses);
  liftMotions(hessian, frame.motions);
  return { masses, frame, form: await tridiagonalize(hessian, x.length, control) };
}

/** Frequencies and what else free energies rest on. */
export function vibrationsOf({ masses, frame, form }: VibrationalForm): Vibrations {
  const { moments, axes, motions } = frame;
  const squares = eigenvaluesOf(form).subarray(0, form.size - motions.length);
  return {
    frequencies: Array.from(squares, (square) =>
      rounded(Math.sign(square) * Math.sqrt(Math.abs(square)) * WAVENUMBER, 3),
    ),
    moments: moments.slice(3 - axes).map((moment) => rounded(moment, 6)),
    mass: rounded(
      masses.reduce((sum, mass) => sum + mass, 0),
      6,
    ),
  };
}

/** The softest mode as a direction in Å, its fastest atom moving by 1: at a saddle, the way down. */
export function softestDirection({ form, masses }: VibrationalForm): Float64Array {
  const [mode] = eigenvectorsOf(form, eigenvaluesOf(form).subarray(0, 1));
  const direction = overRootMass(mode, masses);
  const longest = farthestMove(direction);
  return direction.map((value) => value / longest);
}

/** The longest way of an atom, in the unit of the step. */
export function farthestMove(step: Readonly<Float64Array>): number {
  let longest = 0;
  for (let a = 0; a < step.length; a += 3) {
    longest = Math.max(longest, Math.hypot(step[a], step[a + 1], step[a + 2]));
  }
  return longest;
}

/** Components over the root of their mass: a gradient into mass-weighted coordinates, or a step out of them. */
export function overRootMass(
  vector: Readonly<Float64Array>,
  masses: readonly number[],
): Float64Array {
  return Float64Array.from(vector, (value, a) => value / Math.sqrt(masses[Math.floor(a / 3)]));
}

function weigh(hessian: Float64Array, masses: readonly number[]): void {
  const size = 3 * masses.length;
  const inverse = Float64Array.from({ length: size }, (_, a) => masses[Math.floor(a / 3)] ** -0.5);
  for (let a = 0; a < size; a++) {
    for (let b = 0; b < size; b++) hessian[a * size + b] *= inverse[a] * inverse[b];
  }
}

/**
 * H ← (1 - D Dᵀ) H (1 - D Dᵀ) + s D Dᵀ with the rigid motions D and s above every eigenvalue of H: rotations, which have a share
 * of the gradient's remainder, can then not be taken for soft vibrations.
 */
function liftMotions(hessian: Float64Array, motions: readonly Float64Array[]): void {
  const size = Math.sqrt(hessian.length);
  const above = 2 * Math.max(1, largestRowSum(hessian, size));
  for (const motion of motions) {
    const product = new Float64Array(size);
    for (let a = 0; a < size; a++) {
      let sum = 0;
      for (let b = 0; b < size; b++) sum += hessian[a * size + b] * motion[b];
      product[a] = sum;
    }
    const along = product.reduce((sum, value, a) => sum + value * motion[a], 0);
    for (let a = 0; a < size; a++) {
      for (let b = 0; b < size; b++) {
        hessian[a * size + b] +=
          (along + above) * motion[a] * motion[b] - motion[a] * product[b] - product[a] * motion[b];
      }
    }
  }
}

/** A bound of the largest eigenvalue (Gershgorin). */
function largestRowSum(matrix: Float64Array, size: number): number {
  let largest = 0;
  for (let a = 0; a < size; a++) {
    let sum = 0;
    for (let b = 0; b < size; b++) sum += Math.abs(matrix[a * size + b]);
    largest = Math.max(largest, sum);
  }
  return largest;
}

function rounded(value: number, digits: number): number {
  return Number(value.toFixed(digits));
}
