/** Relaxed scans: constrained minimization from the same starts, and our whole scan, per grid point. */
import { createForceField } from '$lib/engine/forcefield/create';
import { rotateAbout, torsion as torsionAngle } from '$lib/engine/geometry';
import { unattended } from '$lib/engine/control';
import { minimize } from '$lib/engine/minimizer/minimize';
import { SEARCHING_GRADIENT_RMS } from '$lib/engine/minimizer/minimizer';
import { torsionRestraint } from '$lib/engine/minimizer/restraints';
import type { Molecule } from '$lib/engine/molecule/molecule';
import { readMolecule } from '$lib/engine/molecule/read';
import { writeMolfile } from '$lib/engine/molecule/write';
import { compute } from '../support/compute';
import { askRdkit } from './rdkit';
import { openchemlibStarts } from './starts';
import { ENERGIES_HEAD, comparedEnergies, markdownTable, ratio } from './report';
import { fastest, milliseconds } from './timing';

const RDKIT_PASSES = 3;
const STEP = 15;

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

/** Our constrained minimization from every start; set-up left out on both sides but for the restraint. */
async function constrainedOurs(
  starts: readonly { angle: number; molfile: string }[],
  torsion: readonly number[],
  gradientRms: readonly number[],
) {
  const molecules = starts.map(({ molfile }) => readMolecule({ molfile }));
  const forceField = createForceField(molecules[0]);
  return fastest(async () => {
    const energies: number[] = [];
    for (const [n, { angle }] of starts.entries()) {
      const x = Float64Array.from(molecules[n].coordinates!);
      const restraint = torsionRestraint(torsion, angle);
      await minimize(
        (at, gradient) => forceField.energy(at, gradient) + restraint.energy(at, gradient),
        x,
        {
          gradientRms: gradientRms[n],
          maxEvaluations: 10_000,
          curvature: (at, hessian) => {
            forceField.curvature(at, hessian);
            restraint.curvature(at, hessian);
          },
        },
        unattended,
      );
      energies.push(forceField.energy(x, new Float64Array(x.length)));
    }
    return energies;
  });
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
      milliseconds(ours.seconds / starts.length),
      milliseconds(whole.seconds / starts.length),
      theirs ? milliseconds(theirs.seconds / starts.length) : 'no RDKit',
      theirs ? ratio(theirs.seconds, ours.seconds) : '',
      theirs ? ratio(theirs.seconds, whole.seconds) : '',
      theirs ? comparedEnergies(ours.value, theirs.energies) : '',
      theirs ? comparedEnergies(wholeEnergies, theirs.energies) : '',
    ]);
  }
  const head = ['molecule', 'atoms', 'ours from the same start, ms', 'our whole scan, ms', 'RDKit from the same start, ms', '× RDKit, same start', '× RDKit, whole scan', `same start: ${ENERGIES_HEAD}`, `whole scan: ${ENERGIES_HEAD}`]; // prettier-ignore
  return `## Relaxed scan, MMFF94s, per grid point of ${STEP}°\n\n${markdownTable(head, rows)}`;
}
