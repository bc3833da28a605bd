/** Free minimization from openchemlib's conformers: ours, openchemlib's and RDKit's, from the same molfiles. */
import { ForceFieldMMFF94, Molecule as OpenchemlibMolecule } from 'openchemlib';
import { unattended } from '$lib/engine/control';
import { createForceField } from '$lib/engine/forcefield/create';
import { minimize } from '$lib/engine/minimizer/minimize';
import { REPORTED_GRADIENT_RMS } from '$lib/engine/minimizer/minimizer';
import { readMolecule } from '$lib/engine/molecule/read';
import { benchMolecules } from './molecules';
import { askRdkit } from './rdkit';
import { openchemlibStarts } from './starts';
import { ENERGIES_HEAD, comparedEnergies, markdownTable, ratio } from './report';
import { fastest, milliseconds, processorSeconds } from './timing';

const STARTS = 4;
const RDKIT_PASSES = 3;

/** Ours from every start, each to its own gradient; the time leaves typing and compiling out, as RDKit's does. */
async function minimizeOurs(molfiles: readonly string[], gradientRms: readonly number[]) {
  const molecules = molfiles.map((molfile) => readMolecule({ molfile }));
  const setup = await fastest(() => molecules.map((molecule) => createForceField(molecule)));
  const timed = await fastest(async () => {
    const results = [];
    for (const [n, forceField] of setup.value.entries()) {
      const x = Float64Array.from(molecules[n].coordinates!);
      results.push(
        await minimize(
          forceField.energy,
          x,
          {
            gradientRms: gradientRms[n],
            maxEvaluations: 20_000,
            curvature: forceField.curvature,
          },
          unattended,
        ),
      );
    }
    return results;
  });
  return { setup: setup.seconds, seconds: timed.seconds, results: timed.value };
}

/** openchemlib's from every start, with its own defaults; a force field is bound to one geometry, so none is reused. */
function minimizeOpenchemlib(molfiles: readonly string[]) {
  let seconds = 0;
  const energies: number[] = [];
  for (const molfile of molfiles) {
    const molecule = OpenchemlibMolecule.fromMolfile(molfile);
    const forceField = new ForceFieldMMFF94(molecule, 'MMFF94s');
    const start = processorSeconds();
    forceField.minimise();
    seconds += processorSeconds() - start;
    energies.push(forceField.getTotalEnergy());
  }
  return { seconds, energies };
}

/** The section's report in Markdown. */
export async function minimizationSection(rdkit: boolean): Promise<string> {
  const rows: string[][] = [];
  // Once unmeasured, so that openchemlib's code is compiled too.
  minimizeOpenchemlib(openchemlibStarts(benchMolecules[0].smiles, STARTS));
  for (const { name, smiles } of benchMolecules) {
    const molfiles = openchemlibStarts(smiles, STARTS);
    const theirs = rdkit ? askRdkit('minimize', { molfiles, repeats: RDKIT_PASSES }) : null;
    // Same or tighter convergence: never looser than where RDKit stopped from the same start.
    const gradientRms = molfiles.map((_, n) =>
      Math.min(REPORTED_GRADIENT_RMS, theirs?.gradientRms[n] ?? REPORTED_GRADIENT_RMS),
    );
    const ours = await minimizeOurs(molfiles, gradientRms);
    const openchemlib = minimizeOpenchemlib(molfiles);
    const energies = ours.results.map(({ energy }) => energy);
    const unconverged = ours.results.filter(({ converged }) => !converged).length;
    rows.push([
      name,
      String(readMolecule({ smiles }).atomCount),
      String(molfiles.length),
      milliseconds(ours.seconds / molfiles.length) + (unconverged > 0 ? ` (${unconverged} unconverged)` : ''),
      milliseconds(ours.setup / molfiles.length),
      (ours.results.reduce((sum, { evaluations }) => sum + evaluations, 0) / molfiles.length).toFixed(0),
      Math.max(...gradientRms).toExponential(1),
      ratio(openchemlib.seconds, ours.seconds),
      comparedEnergies(energies, openchemlib.energies),
      ...(theirs
        ? [
            milliseconds(theirs.seconds / molfiles.length),
            ratio(theirs.seconds, ours.seconds),
            comparedEnergies(energies, theirs.energies),
          ]
        : ['', 'no RDKit', '']),
    ]); // prettier-ignore
  }
  const head = ['molecule', 'atoms', 'starts', 'ours, ms', 'set-up, ms', 'evaluations', 'RMS gradient', '× openchemlib', ENERGIES_HEAD, 'RDKit, ms', '× RDKit', ENERGIES_HEAD]; // prettier-ignore
  return `## Free minimization, MMFF94s, per start\n\n${markdownTable(head, rows)}`;
}
