/** The files of one molecule in a bundle. */
import { writeSdf } from '../engine';
import { profilePlot } from '../charts/profile-plot';
import { csvTable } from '../domain/csv';
import { readConformers } from '../domain/conformers-reading';
import { createNamer } from '../domain/file-names';
import { readProfile } from '../domain/profile-reading';
import type { Answer, StoredProfile } from './answers';
import { FREE_ENERGY_COLUMNS, freeEnergyCells } from './bundle-free-energies';
import { mapFiles } from './bundle-map-files';
import { opinionFiles } from './bundle-opinion-files';
import { atomName, energy, type BundledMolecule, type BundleFile } from './bundle-parts';

/** Every file of a molecule, answer by answer. */
export function filesOf(bundled: BundledMolecule): BundleFile[] {
  const nameFor = createNamer();
  return bundled.answers.flatMap((answer) => {
    const base = nameFor(baseName(bundled, answer));
    const path = (ending: string): string => `${bundled.folder}/${base}.${ending}`;
    return [
      ...tableAndGeometries(bundled, answer, path),
      { path: path('json'), content: `${JSON.stringify(asJson(bundled, answer), null, 2)}\n` },
    ];
  });
}

function baseName({ molecule }: BundledMolecule, { kind, profiles, map }: Answer): string {
  if (map) {
    const bonds = map.torsions.map(([, j, k]) => [j, k].map((atom) => atomName(molecule, atom)));
    return `map_${bonds.map((bond) => bond.join('-')).join('_')}`;
  }
  const [profile] = profiles;
  if (!profile) return kind;
  return `${kind}_${profile.torsion.map((atom) => atomName(molecule, atom)).join('-')}${profile.relaxed ? '' : '_rigid'}`;
}

function tableAndGeometries(
  bundled: BundledMolecule,
  answer: Answer,
  path: (ending: string) => string,
): BundleFile[] {
  if (answer.conformers.length > 0) return conformerFiles(bundled, answer, path);
  if (answer.kind === 'opinion') return opinionFiles(bundled, answer, path);
  if (answer.profiles.length > 0) {
    return answer.profiles.flatMap((profile) => profileFiles(bundled, answer, profile, path));
  }
  if (answer.map) return mapFiles(bundled, answer, answer.map, path);
  if (answer.kind === 'conjugation')
    return [{ path: path('csv'), content: conjugationTable(bundled, answer) }];
  if (answer.kind === 'heat') return [{ path: path('mol'), content: answer.molfile }];
  return [
    { path: path('csv'), content: strainTable(bundled, answer) },
    { path: path('mol'), content: answer.molfile },
  ];
}

/** The conformers of an answer with their energies and populations. */
export function conformersSdf(
  { name, smiles, molecule }: Pick<BundledMolecule, 'name' | 'smiles' | 'molecule'>,
  answer: Answer,
): string {
  return writeSdf(
    answer.conformers.map((conformer) => ({
      molecule,
      coordinates: conformer.coordinates,
      title: `${name} conformer ${conformer.rank + 1}`,
      data: {
        SMILES: smiles,
        ENERGY_KCAL_PER_MOL: energy(conformer.energy),
        RELATIVE_KCAL_PER_MOL: energy(conformer.relative),
        DEGENERACY: conformer.degeneracy,
        POPULATION: conformer.population.toPrecision(6),
        MODEL: answer.model,
      },
    })),
  );
}

function conformerFiles(
  bundled: BundledMolecule,
  answer: Answer,
  path: (ending: string) => string,
): BundleFile[] {
  const { free } = readConformers(answer.conformers, answer.settings.temperature as number);
  const csv = csvTable(
    [
      'conformer',
      'energy_kcal_per_mol',
      'relative_kcal_per_mol',
      'degeneracy',
      'population',
      'rmsd_to_lowest_angstrom',
      'population_by_free_energy',
      ...FREE_ENERGY_COLUMNS,
    ],
    answer.conformers.map((conformer, n) => [
      ...[
        conformer.rank + 1,
        energy(conformer.energy),
        energy(conformer.relative),
        conformer.degeneracy,
        conformer.population.toPrecision(6),
        conformer.rmsdToLowest.toFixed(4),
      ].map(Number),
      significant(free?.populations[n]),
      ...freeEnergyCells(conformer.vibrations, free?.relative[n]),
    ]),
  );
  return [
    { path: path('sdf'), content: conformersSdf(bundled, answer) },
    { path: path('csv'), content: csv },
  ];
}

function significant(value: number | null | undefined): number | null {
  return value === null || value === undefined ? null : Number(value.toPrecision(6));
}

function profileFiles(
  { name, smiles, molecule }: BundledMolecule,
  { settings, details }: Answer,
  profile: StoredProfile,
  path: (ending: string) => string,
): BundleFile[] {
  const torsion = profile.torsion.map((atom) => atomName(molecule, atom)).join('-');
  const symmetry = details.symmetry as { readonly mirror: boolean };
  const { freeEnergies } = readProfile({ ...profile, symmetry }, settings.temperature as number);
  const points = [
    ...profile.points.map((point) => ({ ...point, label: '', kind: 'grid', free: null })),
    ...profile.stationary.map((point, n) => ({
      ...point,
      reached: point.angle,
      free: freeEnergies?.[n] ?? null,
    })),
  ];
  const sdf = writeSdf(
    points.map((point) => ({
      molecule,
      coordinates: point.coordinates,
      title: `${name} ${torsion} ${point.angle.toFixed(1)}`,
      data: {
        SMILES: smiles,
        TORSION_ATOMS: profile.torsion.map((atom) => atom + 1).join(' '),
        ANGLE_DEGREES: point.angle.toFixed(3),
        KIND: point.kind,
        ...(point.label ? { LABEL: point.label } : {}),
        ENERGY_KCAL_PER_MOL: energy(point.energy),
        RELATIVE_KCAL_PER_MOL: energy(point.relative),
        MODEL: profile.model,
      },
    })),
  );
  const csv = csvTable(
    [
      'kind',
      'angle_degrees',
      'reached_degrees',
      'energy_kcal_per_mol',
      'relative_kcal_per_mol',
      'label',
      ...FREE_ENERGY_COLUMNS,
    ],
    points.map((point) => [
      point.kind,
      Number(point.angle.toFixed(3)),
      Number(point.reached.toFixed(3)),
      Number(energy(point.energy)),
      Number(energy(point.relative)),
      point.label,
      ...freeEnergyCells('vibrations' in point ? point.vibrations : null, point.free),
    ]),
  );
  const plot = profilePlot({
    title: `${name}: ${torsion} (${profile.model}${profile.relaxed ? '' : ', rigid'})`,
    points: profile.points,
    stationary: profile.stationary,
  });
  return [
    { path: path('sdf'), content: sdf },
    { path: path('csv'), content: csv },
    { path: path('svg'), content: plot },
  ];
}

function conjugationTable({ molecule }: BundledMolecule, { details }: Answer): string {
  const bonds = details.bonds as readonly Record<string, number | string | boolean | null>[];
  const columns = [
    'twist',
    'difference',
    'sCisFraction',
    'planarSCisCost',
    'barrier',
    'meanOverlap',
  ] as const;
  return csvTable(
    [
      'bond',
      'kind',
      'twist_degrees',
      's_cis_minus_s_trans_kcal_per_mol',
      's_cis_fraction',
      'planar_s_cis_cost_kcal_per_mol',
      'barrier_kcal_per_mol',
      'mean_overlap',
    ],
    bonds.map((bond) => [
      (bond.bond as unknown as readonly number[]).map((atom) => atomName(molecule, atom)).join('-'),
      bond.kind,
      ...columns.map((column) => {
        const value = bond[column];
        return typeof value === 'number' ? Number(value.toPrecision(6)) : null;
      }),
    ]),
  );
}

function strainTable({ molecule }: BundledMolecule, { details }: Answer): string {
  const torsions = details.torsions as readonly {
    bond: readonly number[];
    angle: number;
    strain: number;
    preferredAngle: number;
  }[];
  return csvTable(
    ['bond', 'angle_degrees', 'strain_kcal_per_mol', 'preferred_angle_degrees'],
    [
      ['whole molecule', null, Number(energy(details.strain as number)), null],
      ...torsions.map(({ bond, angle, strain, preferredAngle }) => [
        bond.map((atom) => atomName(molecule, atom)).join('-'),
        Number(angle.toFixed(3)),
        Number(energy(strain)),
        Number(preferredAngle.toFixed(3)),
      ]),
    ],
  );
}

/** An answer as JSON, with full coordinates; the schema is beside it in the bundle. */
export function asJson({ name, smiles }: Pick<BundledMolecule, 'name' | 'smiles'>, answer: Answer) {
  const { conformers, profiles, map, id: _id, ...rest } = answer;
  const plain = (coordinates: Float64Array): number[] => [...coordinates];
  return {
    name,
    smiles,
    ...rest,
    warnings: [...answer.warnings],
    conformers: conformers.map((conformer) => ({
      ...conformer,
      coordinates: plain(conformer.coordinates),
    })),
    profiles: profiles.map((profile) => ({
      ...profile,
      torsion: [...profile.torsion],
      points: profile.points.map((point) => ({ ...point, coordinates: plain(point.coordinates) })),
      stationary: profile.stationary.map((point) => ({
        ...point,
        coordinates: plain(point.coordinates),
      })),
    })),
    map: map && {
      ...map,
      torsions: map.torsions.map((torsion) => [...torsion]),
      cells: map.cells.map((cell) => ({
        ...cell,
        angles: [...cell.angles],
        coordinates: cell.coordinates && plain(cell.coordinates),
      })),
      minima: map.minima.map((minimum) => ({
        ...minimum,
        angles: [...minimum.angles],
        coordinates: plain(minimum.coordinates),
      })),
    },
  };
}
