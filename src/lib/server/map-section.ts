/** A map of two bonds as its molecule's page shows it. */
import { createTorsionNamer, writeMolfile, type Molecule } from '../engine';
import { bondName } from './molecules';
import { provenance, type ToldApart } from './section-parts';
import type { StoredMap } from './stored-maps';

/** The geometries of a map: cell by cell, empty where one was not reached, then the minima. */
export function mapGeometries(molecule: Molecule, { cells, minima }: StoredMap): string[] {
  return [...cells, ...minima].map(({ coordinates }) =>
    coordinates ? writeMolfile(molecule, coordinates) : '',
  );
}

/** The page's view of the answers that hold a map. */
export function describeMaps(molecule: Molecule, answers: readonly ToldApart[]) {
  return answers.flatMap((answer) =>
    answer.map ? [describeMap(molecule, answer, answer.map)] : [],
  );
}

function describeMap(molecule: Molecule, answer: ToldApart, map: StoredMap) {
  const { torsions, step, perAxis, cells, minima } = map;
  const namers = torsions.map(([i, j, k, l]) => createTorsionNamer(molecule, [i, j, k, l]));
  return {
    ...provenance(answer),
    complete: answer.details.complete as boolean,
    torsions: torsions.map((atoms) => ({
      atoms,
      name: bondName(molecule, atoms),
      bond: bondName(molecule, atoms.slice(1, 3)),
    })),
    step,
    perAxis,
    /** kcal/mol, row by row as the engine has them; null where a cell was not reached. */
    energies: cells.map(({ relative }) => relative),
    minima: minima.map(({ angles, relative, cell, coordinates }) => ({
      angles,
      relative,
      cell,
      labels: namers.map((namer) => namer.name(coordinates).label),
    })),
  };
}
