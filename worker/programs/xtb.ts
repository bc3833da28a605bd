/**
 * GFN2-xTB and GFN1-xTB by the program xtb (C. Bannwarth et al., J. Chem. Theory Comput. 2019, 15, 1652; S. Grimme et al.,
 * J. Chem. Theory Comput. 2017, 13, 1989). Every call starts afresh in its own folder, so that none depends on another.
 */
import { readXyz, writeXyz } from './geometry-text';
import {
  changedBond,
  isGap,
  KCAL_PER_HARTREE,
  type InstalledProgram,
  type PointOrGap,
  type ProgramLimits,
  type ProgramMolecule,
} from './program';
import { runProgram, type ProgramOutput } from './run-program';

/** Which of the two parametrizations. */
export type Parametrization = 1 | 2;

/**
 * Force constant of the held torsion, Eh/rad². So strong that the angle reached is within 0.1° of its target on the
 * steepest slopes, and not so strong that the optimizer stops converging.
 */
const HOLD = 20;

/** The energy of a geometry, nothing moved. */
export async function singlePoint(
  xtb: InstalledProgram,
  molecule: ProgramMolecule,
  coordinates: Float64Array,
  parametrization: Parametrization,
  limits: ProgramLimits,
): Promise<PointOrGap> {
  const run = await runProgram({
    path: xtb.path,
    args: [...commonArguments(molecule, parametrization), '--sp'],
    files: { 'geometry.xyz': writeXyz(molecule.symbols, coordinates) },
    reads: ['xtbout.json'],
    ...limits,
  });
  const gap = gapOf(run);
  if (gap !== null) return { gap };
  const energy = energyOf(run.files['xtbout.json']);
  return energy === null ? { gap: unreadable } : { energy, coordinates };
}

/** A torsion that is held while all else relaxes. */
export interface HeldTorsion {
  /** Four atoms, counted from 0. */
  readonly atoms: readonly number[];
  /** degrees */
  readonly angle: number;
}

/**
 * Relaxes a geometry by GFN2-xTB, with a torsion held where one is given. The energy is that of the geometry reached,
 * computed again without the constraint.
 */
export async function relax(
  xtb: InstalledProgram,
  molecule: ProgramMolecule,
  coordinates: Float64Array,
  held: HeldTorsion | null,
  limits: ProgramLimits,
): Promise<PointOrGap> {
  const run = await runProgram({
    path: xtb.path,
    args: [
      ...commonArguments(molecule, 2),
      '--opt',
      'tight',
      ...(held ? ['--input', 'constraint.inp'] : []),
    ],
    files: {
      'geometry.xyz': writeXyz(molecule.symbols, coordinates),
      ...(held ? { 'constraint.inp': constraint(held) } : {}),
    },
    reads: ['xtbopt.xyz'],
    ...limits,
  });
  const gap = gapOf(run);
  if (gap !== null) return { gap };
  if (!run.output.includes('GEOMETRY OPTIMIZATION CONVERGED')) {
    return { gap: 'the geometry did not converge' };
  }
  const relaxed = readXyz(molecule.symbols, run.files['xtbopt.xyz'] ?? '');
  if (!relaxed) return { gap: unreadable };
  const broken = changedBond(molecule, coordinates, relaxed);
  if (broken) return { gap: broken };
  const point = await singlePoint(xtb, molecule, relaxed, 2, limits);
  return isGap(point) ? point : { energy: point.energy, coordinates: relaxed };
}

const unreadable = 'its answer could not be read';

function commonArguments({ charge, unpaired }: ProgramMolecule, parametrization: Parametrization) {
  return [
    'geometry.xyz',
    '--gfn',
    String(parametrization),
    '--chrg',
    String(charge),
    '--uhf',
    String(unpaired),
    '--json',
  ];
}

function constraint({ atoms, angle }: HeldTorsion): string {
  const numbers = atoms.map((atom) => atom + 1).join(',');
  return `$constrain\n  force constant=${HOLD}\n  dihedral: ${numbers},${angle.toFixed(6)}\n$end\n`;
}

/** Why a run gives no number; null when it ended well and its charges converged. */
function gapOf({ exitCode, stopped, output, errors }: ProgramOutput): string | null {
  if (stopped !== null) return stopped;
  if (/did not converge|cannot be satisfied within/.test(output + errors)) {
    return /FAILED TO CONVERGE GEOMETRY/.test(output)
      ? 'the geometry did not converge'
      : 'the charges did not converge';
  }
  if (/FAILED TO CONVERGE GEOMETRY/.test(output)) return 'the geometry did not converge';
  if (exitCode !== 0 || !errors.includes('normal termination of xtb')) {
    const line = /^.*(?:-\d-|#ERROR!).*$/m.exec(output + errors)?.[0].trim();
    return line ? `xtb failed: ${line.slice(0, 160)}` : 'xtb failed';
  }
  return output.includes('convergence criteria satisfied') ? null : 'the charges did not converge';
}

/** The total energy in kcal/mol; null unless it is there and a finite number. */
function energyOf(text: string | undefined): number | null {
  try {
    const energy: unknown = JSON.parse(text ?? '')['total energy'];
    return typeof energy === 'number' && Number.isFinite(energy) ? energy * KCAL_PER_HARTREE : null;
  } catch {
    return null;
  }
}
