/** The files of a second opinion in a bundle: one table with a column a model, and the geometries of each. */
import { csvTable } from '../domain/csv';
import { aboveOwnLowest, consensusOf } from '../domain/model-curves';
import type { OpinionDepth } from '../domain/second-opinions';
import { writeSdf } from '../engine';
import type { Answer, StoredProfile } from './answers';
import { atomName, energy, type BundledMolecule, type BundleFile } from './bundle-parts';

/** Energies above each model's own lowest point; a gap is an empty cell. */
export function opinionFiles(
  bundled: BundledMolecule,
  answer: Answer,
  path: (ending: string) => string,
): BundleFile[] {
  const [scan, ...others] = answer.profiles;
  if (!scan) return [];
  const depth = answer.details.depth as OpinionDepth;
  const curves = answer.profiles.map((profile) => aboveOwnLowest(onAngles(profile, scan)));
  const consensus = consensusOf(curves);
  const cell = (value: number | null) => (value === null ? null : Number(energy(value)));
  const table = csvTable(
    [
      'angle_degrees',
      ...curves.map(({ model }) => `${model}${nameEnding(model, scan, depth)}_kcal_per_mol`),
      ...(depth === 'relaxed' ? ['consensus_kcal_per_mol'] : []),
      'lowest_kcal_per_mol',
      'highest_kcal_per_mol',
    ],
    consensus.points.map(({ angle, mean, low, high }, n) => [
      Number(angle.toFixed(3)),
      ...curves.map(({ points }) => cell(points[n].relative)),
      ...(depth === 'relaxed' ? [cell(mean)] : []),
      cell(low),
      cell(high),
    ]),
  );
  return [
    { path: path(`${depth}.csv`), content: table },
    ...others.map((profile) => ({
      path: path(`${depth}_${profile.model}.sdf`),
      content: geometriesOf(bundled, profile),
    })),
  ];
}

/** A quick look rests on the geometries of another model, and says so wherever it goes. */
function nameEnding(model: string, scan: StoredProfile, depth: OpinionDepth): string {
  return depth === 'quick' && model !== scan.model ? `_on_${scan.model}_geometries` : '';
}

function onAngles({ model, points }: StoredProfile, scan: StoredProfile) {
  return {
    model,
    points: scan.points.map(({ angle }) => ({
      angle,
      energy: points.find((point) => point.angle === angle)?.energy ?? null,
    })),
  };
}

function geometriesOf(
  { name, smiles, molecule }: BundledMolecule,
  { torsion, model, points }: StoredProfile,
): string {
  const turned = torsion.map((atom) => atomName(molecule, atom)).join('-');
  return writeSdf(
    points.map((point) => ({
      molecule,
      coordinates: point.coordinates,
      title: `${name} ${turned} ${point.angle.toFixed(1)} ${model}`,
      data: {
        SMILES: smiles,
        TORSION_ATOMS: torsion.map((atom) => atom + 1).join(' '),
        ANGLE_DEGREES: point.angle.toFixed(3),
        ENERGY_KCAL_PER_MOL: energy(point.energy),
        RELATIVE_KCAL_PER_MOL: energy(point.relative),
        MODEL: model,
      },
    })),
  );
}
