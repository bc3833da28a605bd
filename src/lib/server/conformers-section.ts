/** The conformers of a molecule as its page shows them. */
import { createTorsionNamer, ringSystems, type Molecule } from '../engine';
import type { RankingSettings } from '../domain/second-opinions';
import type { Rotor } from '../domain/submission';
import type { Answer } from './answers';
import { bondName } from './molecules';
import type { RankingOutcome } from './rankings';
import { heavyAtoms, provenance, type ToldApart } from './section-parts';

/** Rows with the angle and the name of every rotatable bond, and the atoms on which conformers can be laid over one another. */
export function describeConformers(
  molecule: Molecule,
  rotors: readonly Rotor[],
  answer: ToldApart,
  rankings: readonly Answer[] = [],
) {
  const namers = rotors
    .filter(({ terminal }) => !terminal)
    .map(({ torsion }) => createTorsionNamer(molecule, torsion));
  return {
    ...provenance(answer),
    complete: answer.details.complete as boolean,
    window: answer.settings.window as number,
    temperature: answer.settings.temperature as number,
    torsions: namers.map(({ atoms }) => ({
      atoms,
      bond: bondName(molecule, atoms.slice(1, 3)),
      name: bondName(molecule, atoms),
    })),
    heavyAtoms: heavyAtoms(molecule),
    /** Atoms of the largest ring system; none where there is no ring. */
    ringSystem: ringSystems(molecule).at(0) ?? [],
    rows: answer.conformers.map(({ coordinates, ...conformer }) => ({
      ...conformer,
      torsions: namers.map((namer) => namer.name(coordinates)),
    })),
    rankings: rankings.filter(({ settings }) => settings.result === answer.id).map(describeRanking),
  };
}

/** The same conformers in the order of another model; ranks count from 0. */
function describeRanking({ id, model, settings, details, seconds, conformers }: Answer) {
  const { depth, window } = settings as RankingSettings;
  const { from, gaps, program } = details as {
    from: readonly (readonly number[])[];
    gaps: RankingOutcome['gaps'];
    program: string;
  };
  return {
    id,
    model,
    depth,
    window,
    program,
    seconds,
    gaps,
    rows: conformers.map(({ rank, relative, degeneracy }) => ({
      rank,
      relative,
      degeneracy,
      from: from[rank],
    })),
  };
}
