/** Relaxed scans: constrained minimization from the same starts, and our whole scan, per grid point. */
import { createForceField } from '$lib/engine/forcefield/create';
import { rotateAbout, torsion as torsionAngle } from '$lib/engine/geometry';
import { unattended } from '$lib/engine/control';
import { minimize } from '$lib/engine/minimizer/minimize';
import { SEARCHING_GRADIENT_RMS } from '$lib/engine/minimizer/minimizer';
import type { Molecule } from '$lib/engine/molecule/molecule';
import { readMolecule } from '$lib/engine/molecule/read';
import { writeMolfile } from '$lib/engine/molecule/write';
import { createTorsionDrive } from '$lib/engine/torsion/torsion-drive';
import type { HeldGeometry } from '$lib/engine/torsion/torsion-drive';
import { compute } from '../support/compute';
import { askRdkit } from './rdkit';
import { openchemlibStarts } from './starts';
import { ENERGIES_HEAD, comparedEnergies, isNotAbove, markdownTable, ratio } from './report';
import { fastest, milliseconds } from './timing';

const RDKIT_PASSES = 3;
const STEP = 15;
/** How many times as fast a constrained minimization must be. */
const TARGET = 10;

/** Torsions by the atoms of the SMILES. */
const scans: { name: string; smiles: string; torsion: [number, number, number, number] }[] = [
  { name: 'butane', smiles: 'CCCC', torsion: [0, 1, 2, 3] },
  { name: 'N-methylacetamide', smiles: 'CNC(C)=O', torsion: [0, 1, 2, 3] },
  { name: 'biphenyl', smiles: 'c1ccc(cc1)-c1ccccc1', torsion: [2, 3, 6, 7] },
  { name: 'ibuprofen', smiles: 'CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O', torsion: [6, 7, 10, 11] },
  {
    name: 'losartan',
    smiles: 'CCCCc1nc(Cl)c(CO)n1Cc1ccc(cc1)-c1ccccc1-c1nnn[nH]1',
    torsion: [15, 16, 19, 20],
  },
];

/** The atoms that turn with the far end of the bond. */
function farSide(molecule: Molecule, j: number, k: number): number[] {
  const side = new Set([k]);
  for (const atom of side)
    for (const near of molecule.neighbors[atom])
      if (!(atom === k && near.atom === j)) side.add(near.atom);
  return [...side];
}

/** One relaxed geometry turned rigidly to every angle of the grid: the starts both programs are given. */
async function turnedStarts(smiles: string, torsion: readonly [number, number, number, number]) {
  const molecule = readMolecule({ molfile: openchemlibStarts(smiles, 1)[0] });
  const forceField = createForceField(molecule);
  const relaxed = Float64Array.from(molecule.coordinates!);
  await minimize(
    forceField.energy,
    relaxed,
    { gradientRms: 0.001, maxEvaluations: 10_000, curvature: forceField.curvature },
    unattended,
  );
  const [, j, k] = torsion;
  const turning = farSide(molecule, j, k);
  return Array.from({ length: 360 / STEP }, (_, n) => {
    const angle = STEP * (n + 1) - 180;
    const x = relaxed.slice();
    rotateAbout(x, turning, j, k, angle - torsionAngle(x, ...torsion));
    return { angle, molfile: writeMolfile(molecule, x) };
  });
}

/** Our relaxation from every start, as a scan does it; force field and drive are set up before. */
async function constrainedOurs(
  starts: readonly { angle: number; molfile: string }[],
  torsion: readonly [number, number, number, number],
  gradientRms: readonly number[],
) {
  const molecules = starts.map(({ molfile }) => readMolecule({ molfile }));
  const drive = createTorsionDrive(createForceField(molecules[0]), [torsion]);
  const geometries = molecules.map(({ coordinates }) => Float64Array.from(coordinates!));
  const timed = await fastest(async () => {
    const relaxed: HeldGeometry[] = [];
    for (const [n, { angle }] of starts.entries()) {
      const settings = { gradientRms: gradientRms[n], maxEvaluations: 10_000 };
      relaxed.push(await drive.relax(geometries[n], [angle], settings, unattended));
    }
    return relaxed;
  });
  return {
    seconds: timed.seconds,
    energies: timed.value.map(({ energy }) => energy),
    evaluations: timed.value.reduce((sum, { evaluations }) => sum + evaluations, 0),
    converged: timed.value.every(({ converged }) => converged),
  };
}

/** The section's report in Markdown. */
export async function scanSection(rdkit: boolean): Promise<string> {
  const rows: string[][] = [];
  for (const { name, smiles, torsion } of scans) {
    const starts = await turnedStarts(smiles, torsion);
    const theirs = rdkit
      ? askRdkit('constrained', { starts, torsion, repeats: RDKIT_PASSES })
      : null;
    // Same or tighter convergence: never looser than where RDKit stopped from the same start.
    const gradientRms = starts.map((_, n) =>
      Math.min(SEARCHING_GRADIENT_RMS, theirs?.gradientRms[n] ?? SEARCHING_GRADIENT_RMS),
    );
    const ours = await constrainedOurs(starts, torsion, gradientRms);
    const whole = await fastest(() => compute({ smiles }, 'scan', { torsion, step: STEP }));
    const wholeEnergies = whole.value.points.map(({ energy }) => energy);
    rows.push([
      name,
      String(readMolecule({ smiles }).atomCount),
      (ours.evaluations / starts.length).toFixed(1),
      milliseconds(ours.seconds / starts.length),
      theirs ? milliseconds(theirs.seconds / starts.length) : 'no RDKit',
      theirs ? ratio(theirs.seconds, ours.seconds) : '',
      theirs ? comparedEnergies(ours.energies, theirs.energies) : '',
      theirs ? verdict(ours, theirs) : '',
      milliseconds(whole.seconds / starts.length),
      theirs ? ratio(theirs.seconds, whole.seconds) : '',
      theirs ? comparedEnergies(wholeEnergies, theirs.energies) : '',
    ]);
  }
  const head = ['molecule', 'atoms', 'energies, same start', 'ours, same start, ms', 'RDKit, same start, ms', '× RDKit, same start', `same start: ${ENERGIES_HEAD}`, `target: ${TARGET} × and no energy above`, 'our whole scan, ms', '× RDKit, whole scan', `whole scan: ${ENERGIES_HEAD}`]; // prettier-ignore
  return `## Relaxed scan, MMFF94s, per grid point of ${STEP}°\n\n${markdownTable(head, rows)}\n\nThe target is judged from the same starts. RDKit's time is that of the minimization alone. A whole scan also finds its own starts, runs from many of them both ways, and refines the stationary points.`;
}

/** Whether the target is met: fast enough, as tightly converged, and nowhere above. */
function verdict(
  ours: { seconds: number; energies: readonly number[]; converged: boolean },
  theirs: { seconds: number; energies: readonly number[] },
): string {
  const isFast = theirs.seconds >= TARGET * ours.seconds;
  const isLow = ours.energies.every((energy, n) => isNotAbove(energy, theirs.energies[n]));
  return isFast && isLow && ours.converged ? 'met' : 'missed';
}
