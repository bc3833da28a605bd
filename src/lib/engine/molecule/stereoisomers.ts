/** The stereoisomers that a structure with undefined configurations may stand for. */
import { createMolecule } from './build';
import { resolveConfiguration, type Configuration } from './configuration';
import { isLinear } from './pi-systems';
import type { Molecule, Stereobond, Stereocenter } from './molecule';

/**
 * Every distinct stereoisomer that agrees with what a molecule states, ordered by canonical SMILES; the molecule itself where nothing
 * is open. Returns null when there are more than `limit`. Geometries are dropped: they belong to one isomer only.
 */
export function stereoisomers(molecule: Molecule, limit: number): Molecule[] | null {
  const found = new Map<string, Molecule>();
  const open: Configuration[] = [
    resolveConfiguration(molecule, molecule.stereocenters, molecule.stereobonds),
  ];
  // Settling one center can make or unmake others (pseudoasymmetric ones), so the choice is made one at a time.
  for (let next = open.pop(); next; next = open.pop()) {
    const choices = chooseNext(molecule, next);
    if (choices.length === 0) {
      found.set(next.smiles, withConfiguration(molecule, next));
      if (found.size > limit) return null;
      continue;
    }
    for (const { centers, doubleBonds } of choices) {
      open.push(resolveConfiguration(molecule, centers, doubleBonds));
    }
    // Each open branch leads to at least one isomer, though two may lead to the same one.
    if (open.length > 2 * limit) return null;
  }
  return [...found.keys()].sort().map((smiles) => found.get(smiles)!);
}

interface Choice {
  readonly centers: readonly Stereocenter[];
  readonly doubleBonds: readonly Stereobond[];
}

/** Both configurations of the first thing that is open; none where nothing is. */
function chooseNext(molecule: Molecule, configuration: Configuration): Choice[] {
  const { stereocenters, stereobonds, undefinedCenters, undefinedBonds } = configuration;
  // The middle of an allene is no tetrahedral center; its two forms cannot be written down yet.
  const atom = undefinedCenters.find((center) => !isLinear(molecule, center));
  if (atom !== undefined) {
    return [true, false].map((clockwise) => ({
      centers: [...stereocenters, { atom, neighbors: fourNeighbors(molecule, atom), clockwise }],
      doubleBonds: stereobonds,
    }));
  }
  if (undefinedBonds.length === 0) return [];
  const bond = undefinedBonds[0];
  const { a, b } = molecule.bonds[bond];
  const atoms = [otherNeighbor(molecule, a, b), a, b, otherNeighbor(molecule, b, a)] as const;
  return [true, false].map((cis) => ({
    centers: stereocenters,
    doubleBonds: [...stereobonds, { bond, atoms, cis }],
  }));
}

function fourNeighbors(molecule: Molecule, atom: number): Stereocenter['neighbors'] {
  const neighbors = molecule.neighbors[atom].map((neighbor) => neighbor.atom);
  return [
    ...neighbors,
    ...(neighbors.length < 4 ? [-1] : []),
  ] as unknown as Stereocenter['neighbors'];
}

function otherNeighbor(molecule: Molecule, atom: number, partner: number): number {
  return molecule.neighbors[atom].find((neighbor) => neighbor.atom !== partner)!.atom;
}

function withConfiguration(molecule: Molecule, configuration: Configuration): Molecule {
  const { stereocenters, stereobonds, smiles } = configuration;
  const warnings = molecule.warnings.filter(
    ({ code }) => code !== 'undefined-stereocenter' && code !== 'undefined-double-bond',
  );
  return createMolecule({
    ...molecule,
    stereocenters,
    stereobonds,
    smiles,
    coordinates: null,
    warnings,
  });
}
