/** The model's value for one row of the reference table, through the engine's front door. */
import { torsion } from '$lib/engine/geometry';
import type { Molecule } from '$lib/engine/molecule/molecule';
import { readMolecule } from '$lib/engine/molecule/read';
import { GAS_CONSTANT, ROOM_TEMPERATURE, turnBetween } from '$lib/engine/units';
import type { Result } from '$lib/engine/tasks/result';
import { compute } from '../support/compute';
import type { AtomName, Measurement } from './barrier-rows';

type Scan = Result<'scan'>;
type Stationary = Scan['stationary'][number];
type Conformer = Result<'conformers'>['conformers'][number];

/** Farthest a stationary point may lie from the angle that names it, degrees. */
const NEARBY = 35;

// Several rows measure one profile or one ensemble.
const scans = new Map<string, Promise<Scan>>();
const searches = new Map<string, Promise<{ molecule: Molecule; conformers: Conformer[] }>>();

function remembered<Value>(
  store: Map<string, Promise<Value>>,
  key: string,
  make: () => Promise<Value>,
) {
  const known = store.get(key) ?? make();
  store.set(key, known);
  return known;
}

function atomIndex(molecule: Molecule, name: AtomName): number {
  if (typeof name === 'number') return name;
  const hydrogen = molecule.neighbors[Number(name.slice(1))].find(
    ({ atom }) => molecule.atomicNumbers[atom] === 1,
  );
  if (!hydrogen) throw new Error(`no hydrogen ${name}`);
  return hydrogen.atom;
}

function scanTorsion(smiles: string, atoms: readonly AtomName[]): Promise<Scan> {
  return remembered(scans, `${smiles} ${atoms.join()}`, () => {
    const molecule = readMolecule({ smiles });
    const [i, j, k, l] = atoms.map((name) => atomIndex(molecule, name));
    return compute({ smiles }, 'scan', { torsion: [i, j, k, l] });
  });
}

function stationaryNear({ stationary }: Scan, angle: number): Stationary {
  // A profile that is the same both ways round is named by one of its sides.
  const away = (point: Stationary): number =>
    Math.min(Math.abs(turnBetween(point.angle, angle)), Math.abs(turnBetween(point.angle, -angle)));
  const nearest = [...stationary].sort((a, b) => away(a) - away(b))[0];
  if (!nearest || away(nearest) > NEARBY)
    throw new Error(
      `no stationary point near ${angle}: ${stationary.map((point) => `${point.kind} ${point.angle}`).join(', ')}`,
    );
  return nearest;
}

function search(smiles: string) {
  return remembered(searches, smiles, async () => ({
    molecule: readMolecule({ smiles }),
    conformers: (await compute({ smiles }, 'conformers', {})).conformers,
  }));
}

function coordinatesOf(conformer: Conformer): Float64Array {
  const { coordinates } = readMolecule({ molfile: conformer.molfile });
  if (!coordinates) throw new Error('a conformer without coordinates');
  return Float64Array.from(coordinates);
}

/** A chain's torsions as letters: t, and g or x for a turn to the first gauche's side or the other; least of both ends. */
function chainPattern(conformer: Conformer, carbons: number): string {
  const x = coordinatesOf(conformer);
  const angles = Array.from({ length: carbons - 3 }, (_, i) => torsion(x, i, i + 1, i + 2, i + 3));
  const letters = (ordered: number[]): string => {
    const first = ordered.find((angle) => Math.abs(angle) < 120) ?? 1;
    return ordered
      .map((angle) => (Math.abs(angle) >= 120 ? 't' : angle * first > 0 ? 'g' : 'x'))
      .join('');
  };
  return [letters(angles), letters([...angles].reverse())].sort()[0];
}

async function alkaneDifference(smiles: string, of: string, above: string): Promise<number> {
  const { conformers } = await search(smiles);
  const lowest = (pattern: string): number => {
    const wanted = [pattern, [...pattern].reverse().join('')];
    const found = conformers.filter((conformer) =>
      wanted.includes(chainPattern(conformer, smiles.length)),
    );
    if (found.length === 0) throw new Error(`no conformer ${pattern} of ${smiles}`);
    return Math.min(...found.map(({ relative }) => relative));
  };
  return lowest(of) - lowest(above);
}

/** Free energy of the axial forms above the equatorial ones, from the populations. */
async function axialPreference(smiles: string): Promise<number> {
  const { molecule, conformers } = await search(smiles);
  const ring = molecule.rings.find((atoms) =>
    atoms.every((atom) => molecule.neighbors[atom].length === 4),
  );
  if (!ring) throw new Error(`no saturated ring in ${smiles}`);
  const bearer = ring.find((atom) =>
    molecule.neighbors[atom].some(
      (near) => molecule.atomicNumbers[near.atom] !== 1 && !ring.includes(near.atom),
    ),
  )!;
  const at = ring.indexOf(bearer);
  const substituent = molecule.neighbors[bearer].find(
    (near) => molecule.atomicNumbers[near.atom] !== 1 && !ring.includes(near.atom),
  )!.atom;
  const [next, second] = [ring[(at + 1) % 6], ring[(at + 2) % 6]];
  const populations = { axial: 0, equatorial: 0 };
  for (const conformer of conformers) {
    const x = coordinatesOf(conformer);
    const ringTurns = ring.map((_, n) =>
      Math.abs(torsion(x, ring[n], ring[(n + 1) % 6], ring[(n + 2) % 6], ring[(n + 3) % 6])),
    );
    // Only chairs are counted: every ring torsion near 55 degrees.
    if (ringTurns.some((turn) => turn < 40 || turn > 70)) continue;
    const side = Math.abs(torsion(x, substituent, bearer, next, second)) < 120;
    populations[side ? 'axial' : 'equatorial'] += conformer.population;
  }
  return GAS_CONSTANT * ROOM_TEMPERATURE * Math.log(populations.equatorial / populations.axial);
}

/** The model's value in kcal/mol, or degrees for a twist. */
export async function measureRow(smiles: string, measure: Measurement): Promise<number> {
  switch (measure.kind) {
    case 'highest': {
      const { stationary } = await remembered(scans, `${smiles} ${measure.bond.join()}`, () =>
        compute({ smiles }, 'scan', { bond: measure.bond }),
      );
      return Math.max(...stationary.map(({ relative }) => relative));
    }
    case 'between': {
      const scan = await scanTorsion(smiles, measure.torsion);
      return (
        stationaryNear(scan, measure.at).relative - stationaryNear(scan, measure.above).relative
      );
    }
    case 'twist': {
      const { angle } = stationaryNear(await scanTorsion(smiles, measure.torsion), measure.near);
      return Math.abs(turnBetween(measure.from, angle));
    }
    case 'alkane':
      return alkaneDifference(smiles, measure.of, measure.above);
    case 'axial':
      return axialPreference(smiles);
    case 'twist-boat': {
      const { conformers } = await search(smiles);
      return conformers[1].relative;
    }
  }
}
