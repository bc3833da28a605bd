/** PM7 heats of formation by the program mopac (J. J. P. Stewart, J. Mol. Model. 2013, 19, 1). */
import {
  changedBond,
  type InstalledProgram,
  type PointOrGap,
  type ProgramLimits,
  type ProgramMolecule,
} from './program';
import { runProgram, type ProgramOutput } from './run-program';

/** The geometry is converged when the norm of its gradient is below this, kcal/mol/Å; mopac's own default is 20 times it. */
const GRADIENT_NORM = 0.05;

/** Relaxes a geometry by PM7; the energy is the heat of formation at 298 K. */
export async function relaxByPm7(
  mopac: InstalledProgram,
  molecule: ProgramMolecule,
  coordinates: Float64Array,
  limits: ProgramLimits,
): Promise<PointOrGap> {
  const run = await runProgram({
    path: mopac.path,
    args: ['molecule.mop'],
    files: { 'molecule.mop': deck(molecule, coordinates) },
    reads: ['molecule.out', 'molecule.aux'],
    ...limits,
  });
  const gap = gapOf(run);
  if (gap !== null) return { gap };
  const answer = readAnswer(molecule, run.files['molecule.aux'] ?? '');
  if (!answer) return { gap: 'its answer could not be read' };
  const { heat, norm, relaxed } = answer;
  if (norm > GRADIENT_NORM) return { gap: `the geometry did not converge: gradient norm ${norm}` };
  const broken = changedBond(molecule, coordinates, relaxed);
  return broken ? { gap: broken } : { energy: heat, coordinates: relaxed };
}

function deck({ symbols, charge, unpaired }: ProgramMolecule, coordinates: Float64Array): string {
  const keywords = [
    'PM7',
    'PRECISE',
    `GNORM=${GRADIENT_NORM}`,
    'XYZ',
    `CHARGE=${charge}`,
    ...(unpaired === 0 ? [] : ['UHF', 'DOUBLET']),
    'THREADS=1',
    'AUX(PRECISION=9,MOS=0,XP,XS)',
    'NOLOG',
  ];
  const atoms = symbols.map(
    (symbol, atom) =>
      `${symbol} ${[0, 1, 2].map((axis) => `${coordinates[3 * atom + axis].toFixed(8)} 1`).join(' ')}`,
  );
  return `${keywords.join(' ')}\nwindlass\n\n${atoms.join('\n')}\n\n`;
}

function gapOf({ exitCode, stopped, files }: ProgramOutput): string | null {
  if (stopped !== null) return stopped;
  const text = files['molecule.out'] ?? '';
  if (exitCode !== 0 || !text.includes('JOB ENDED NORMALLY')) return 'mopac failed';
  if (/SCF FIELD WAS NOT ACHIEVED|UNABLE TO ACHIEVE SELF-CONSISTENCE/.test(text)) {
    return 'the charges did not converge';
  }
  return text.includes('SCF FIELD WAS ACHIEVED') ? null : 'mopac gave no final energy';
}

/** Fortran's D for the power of ten. */
const number = (text: string): number => Number(text.replace('D', 'E'));

/** The last heat of formation, gradient and geometry of an AUX file; null unless all are there and finite. */
function readAnswer({ symbols }: ProgramMolecule, aux: string) {
  const final = aux.slice(aux.lastIndexOf('Final SCF results'));
  const heat = number(/^\s*HEAT_OF_FORMATION:KCAL\/MOL=(\S+)/m.exec(final)?.[1] ?? 'none');
  const norm = number(/^\s*GRADIENT_NORM:KCAL\/MOL\/ANGSTROM=(\S+)/m.exec(final)?.[1] ?? 'none');
  const block = /^\s*ATOM_X_OPT:ANGSTROMS\[0*(\d+)\]=\s*\n([-+.\dED\s]+)/m.exec(final);
  const values = (block?.[2] ?? '').trim().split(/\s+/).map(number);
  const isWhole =
    Number(block?.[1]) === 3 * symbols.length &&
    values.length === 3 * symbols.length &&
    [heat, norm, ...values].every(Number.isFinite);
  return isWhole ? { heat, norm, relaxed: Float64Array.from(values) } : null;
}
