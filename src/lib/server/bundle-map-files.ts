/** The files of a map of two bonds in a bundle: its grid, its minima and its picture. */
import { writeSdf } from '../engine';
import { mapPlot } from '../charts/map-plot';
import { csvTable } from '../domain/csv';
import type { Answer } from './answers';
import { atomName, energy, type BundledMolecule, type BundleFile } from './bundle-parts';
import type { StoredMap } from './stored-maps';

export function mapFiles(
  { name, smiles, molecule }: BundledMolecule,
  answer: Answer,
  map: StoredMap,
  path: (ending: string) => string,
): BundleFile[] {
  const [first, second] = map.torsions.map((torsion) =>
    torsion.map((atom) => atomName(molecule, atom)).join('-'),
  );
  const written = (value: number | null): number | null =>
    value === null ? null : Number(energy(value));
  const grid = csvTable(
    [`${first}_degrees`, `${second}_degrees`, 'energy_kcal_per_mol', 'relative_kcal_per_mol'],
    map.cells.map((cell) => [...cell.angles, written(cell.energy), written(cell.relative)]),
  );
  const minima = writeSdf(
    map.minima.map((minimum, n) => ({
      molecule,
      coordinates: minimum.coordinates,
      title: `${name} minimum ${n + 1}`,
      data: {
        SMILES: smiles,
        TORSION_ATOMS: map.torsions
          .map((torsion) => torsion.map((atom) => atom + 1).join(' '))
          .join('; '),
        ANGLES_DEGREES: minimum.angles.map((angle) => angle.toFixed(3)).join(' '),
        ENERGY_KCAL_PER_MOL: energy(minimum.energy),
        RELATIVE_KCAL_PER_MOL: energy(minimum.relative),
        MODEL: answer.model,
      },
    })),
  );
  const plot = mapPlot({
    title: `${name} (${answer.model})`,
    axes: [first, second],
    perAxis: map.perAxis,
    step: map.step,
    energies: map.cells.map(({ relative }) => relative),
    minima: map.minima,
  });
  return [
    { path: path('csv'), content: grid },
    { path: path('sdf'), content: minima },
    { path: path('svg'), content: plot },
  ];
}
