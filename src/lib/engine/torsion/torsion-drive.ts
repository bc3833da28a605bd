/** Turns torsions of a molecule to target angles and relaxes everything else. */
import type { Control } from '../control';
import { InputError } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import { angle, rotateAbout, torsion } from '../geometry';
import { minimize } from '../minimizer/minimize';
import type { Molecule } from '../molecule/molecule';
import { checkTorsion, movedAtoms } from '../molecule/rotatable';
import { turnBetween } from '../units';
import type { TorsionAtoms } from './scan-symmetry';
import { createSoftKick } from './soft-kick';

/** A geometry held at target angles and relaxed otherwise. */
export interface HeldGeometry {
  readonly coordinates: Float64Array;
  /** kcal/mol */
  readonly energy: number;
  readonly converged: boolean;
  /** Energy evaluations spent. */
  readonly evaluations: number;
}

export interface TorsionDrive {
  readonly torsions: readonly TorsionAtoms[];
  /** The torsions' angles in a geometry, degrees. */
  measure(x: Float64Array): number[];
  /** Turns one side about each bond, rigidly and in place, until the torsions have these angles. */
  turnTo(x: Float64Array, angles: readonly number[]): void;
  /** Relaxes a copy of `start` with the torsions held exactly; a start at rest already is pushed once, off a saddle. */
  relax(
    start: Float64Array,
    angles: readonly number[],
    settings: RelaxSettings,
    control: Control,
  ): Promise<HeldGeometry>;
}

export interface RelaxSettings {
  /** kcal/mol/Å */
  readonly gradientRms: number;
  readonly maxEvaluations: number;
}

/** A start from which no atom moves farther than this was at rest already, Å. */
const STILL = 0.02;
/** kcal/mol within which two energies are the same. */
const SAME_ENERGY = 1e-4;
/** Straighter than this, an end has no direction to count a torsion from; degrees. */
const LINEAR_ANGLE = 172;

/** Prepares the drive. Throws InputError for what is no torsion about a bond that can turn. */
export function createTorsionDrive(
  forceField: ForceField,
  torsions: readonly TorsionAtoms[],
): TorsionDrive {
  const { molecule } = forceField;
  torsions.forEach((atoms) => checkTorsion(molecule, atoms));
  const sides = torsions.map(([, j, k]) => smallerSide(molecule, j, k));

  const push = createSoftKick(forceField.curvature, 3 * molecule.atomCount, 1);

  const turned = new Float64Array(3 * molecule.atomCount);

  const measure = (x: Float64Array): number[] =>
    torsions.map(([i, j, k, l]) => torsion(x, i, j, k, l));
  const turnTo = (x: Float64Array, angles: readonly number[]): void => {
    torsions.forEach(([i, j, k, l], t) => {
      const turn = turnBetween(torsion(x, i, j, k, l), angles[t]);
      rotateAbout(x, sides[t].atoms, j, k, sides[t].isFront ? -turn : turn);
    });
  };
  const relax = async (
    start: Float64Array,
    angles: readonly number[],
    { gradientRms, maxEvaluations }: RelaxSettings,
    control: Control,
  ): Promise<HeldGeometry> => {
    const x = start.slice();
    turnTo(x, angles);
    const { energy, curvature, skeleton } = forceField;
    const held = torsions.map((atoms, t) => ({ atoms, target: angles[t] }));
    const options = { gradientRms, maxEvaluations, curvature, skeleton, torsions: held };
    const result = await minimize(energy, x, options, control);
    // Turned again rather than kept: a copy for each point would cost more than a turn.
    turned.set(start);
    turnTo(turned, angles);
    if (!result.converged || farthestMove(turned, x) > STILL) return { coordinates: x, ...result };
    // Nothing moved: the start may sit on a saddle, as by symmetry it often does, and no gradient would tell.
    const [pushed] = push(x);
    const other = await minimize(energy, pushed, options, control);
    const evaluations = result.evaluations + other.evaluations;
    return other.converged && other.energy < result.energy - SAME_ENERGY
      ? { coordinates: pushed, ...other, evaluations }
      : { coordinates: x, ...result, evaluations };
  };
  return { torsions, measure, turnTo, relax };
}

/** Refuses a torsion whose ends are straight in a geometry (Å, 3N): it has no angle there. */
export function checkBent(x: Float64Array, [i, j, k, l]: TorsionAtoms): void {
  if (angle(x, i, j, k) < LINEAR_ANGLE && angle(x, j, k, l) < LINEAR_ANGLE) return;
  throw new InputError(
    'bad-torsion',
    `Atoms ${i + 1}, ${j + 1}, ${k + 1}, ${l + 1} are in line at one end and have no torsion angle.`,
    { atom: j },
  );
}

/** The longest way of any atom from one geometry to another, Å. */
function farthestMove(from: Float64Array, to: Float64Array): number {
  let square = 0;
  for (let a = 0; a < from.length; a += 3) {
    const dx = to[a] - from[a];
    const dy = to[a + 1] - from[a + 1];
    const dz = to[a + 2] - from[a + 2];
    square = Math.max(square, dx * dx + dy * dy + dz * dz);
  }
  return Math.sqrt(square);
}

/** The atoms on the bond's smaller side. */
function smallerSide(
  molecule: Molecule,
  j: number,
  k: number,
): { atoms: Int32Array; isFront: boolean } {
  const front = movedAtoms(molecule, k, j);
  const rear = movedAtoms(molecule, j, k);
  return front.length < rear.length
    ? { atoms: front, isFront: true }
    : { atoms: rear, isFront: false };
}
