/** Rotatable bonds, the torsions that stand for them, and the atoms a turn moves. */
import { InputError } from '../errors';
import { atomLabel } from './elements';
import { bondBetween, type Molecule } from './molecule';
import { isLinear, isPi, hasLonePair, linkageOf, type Linkage } from './pi-systems';
import { rankedSubstituents, createPriorities } from './priority';

/** A single bond about which a molecule turns. */
export interface RotatableBond {
  readonly bond: number;
  readonly j: number;
  readonly k: number;
  /** Reference torsion i-j-k-l by the highest-priority substituents. */
  readonly torsion: readonly [number, number, number, number];
  /** One end bears hydrogens only, or three equal single atoms (methyl, hydroxyl, amino, CF3). */
  readonly terminal: boolean;
  /** Both ends belong to π systems, or a lone pair of one faces the π system of the other. */
  readonly conjugated: boolean;
  /** What the bond is called where the trade has a name for it. */
  readonly linkage: Linkage | null;
}

/**
 * The rotatable bonds of a molecule: single bonds outside rings between two atoms that each bear another neighbor,
 * neither of them linear. Terminal rotors only on request.
 */
export function rotatableBonds(
  molecule: Molecule,
  { terminal = false }: { readonly terminal?: boolean } = {},
): RotatableBond[] {
  const found: RotatableBond[] = [];
  const priorities = createPriorities(molecule);
  molecule.bonds.forEach(({ a, b, order }, bond) => {
    if (order !== 1 || molecule.ringBonds[bond] === 1) return;
    if (molecule.neighbors[a].length < 2 || molecule.neighbors[b].length < 2) return;
    if (isLinear(molecule, a) || isLinear(molecule, b)) return;
    const isTerminal = isRotor(molecule, a, b) || isRotor(molecule, b, a);
    if (isTerminal && !terminal) return;
    // The same bond gets the same direction however the input numbers its atoms, symmetry apart.
    const [j, k] = priorities.compare(a, b) <= 0 ? [a, b] : [b, a];
    found.push({
      bond,
      j,
      k,
      torsion: referenceTorsion(molecule, priorities, j, k),
      terminal: isTerminal,
      conjugated: isConjugated(molecule, a, b),
      linkage: linkageOf(molecule, a, b),
    });
  });
  return found;
}

/**
 * The reference torsion i-j-k-l of any single bond. Throws InputError 'no-such-bond' when the atoms are not bonded,
 * 'bad-torsion' when no torsion can be turned there.
 */
export function torsionOfBond(
  molecule: Molecule,
  j: number,
  k: number,
): [number, number, number, number] {
  checkTurnable(molecule, j, k);
  return referenceTorsion(molecule, createPriorities(molecule), j, k);
}

/** The atoms on k's side of the bond j-k, k itself first. Throws InputError 'bad-torsion' for a ring bond. */
export function movedAtoms(molecule: Molecule, j: number, k: number): Int32Array {
  checkBond(molecule, j, k);
  const seen = new Uint8Array(molecule.atomCount);
  seen[j] = seen[k] = 1;
  const side = [k];
  for (const current of side) {
    for (const { atom } of molecule.neighbors[current]) {
      if (seen[atom]) continue;
      seen[atom] = 1;
      side.push(atom);
    }
  }
  return Int32Array.from(side);
}

/**
 * Checks a torsion i-j-k-l chosen by hand: four different atoms bonded in a row, about a bond that can turn. Throws
 * InputError 'bad-torsion' or 'no-such-bond'.
 */
export function checkTorsion(
  molecule: Molecule,
  [i, j, k, l]: readonly [number, number, number, number],
): void {
  for (const atom of [i, j, k, l]) checkAtom(molecule, atom);
  if (new Set([i, j, k, l]).size < 4) {
    throw new InputError('bad-torsion', 'A torsion needs four different atoms.');
  }
  for (const [a, b] of [
    [i, j],
    [k, l],
  ]) {
    if (bondBetween(molecule, a, b) >= 0) continue;
    throw new InputError(
      'bad-torsion',
      `${label(molecule, a)} and ${label(molecule, b)} are not bonded, as the atoms of a torsion must be.`,
      { atom: a },
    );
  }
  checkTurnable(molecule, j, k);
}

function label(molecule: Molecule, atom: number): string {
  return atomLabel(molecule.atomicNumbers[atom], atom);
}

function checkAtom(molecule: Molecule, atom: number): void {
  if (Number.isInteger(atom) && atom >= 0 && atom < molecule.atomCount) return;
  throw new InputError(
    'bad-torsion',
    `There is no atom ${atom}; the molecule's ${molecule.atomCount} atoms count from 0.`,
  );
}

/** Refuses pairs that are not bonded and ring bonds. */
function checkBond(molecule: Molecule, j: number, k: number): void {
  checkAtom(molecule, j);
  checkAtom(molecule, k);
  const bond = bondBetween(molecule, j, k);
  if (bond < 0) {
    throw new InputError(
      'no-such-bond',
      `${label(molecule, j)} and ${label(molecule, k)} are not bonded.`,
      { atom: j },
    );
  }
  if (molecule.ringBonds[bond] === 1) {
    throw new InputError(
      'bad-torsion',
      `The bond ${label(molecule, j)}–${label(molecule, k)} is in a ring and cannot turn freely.`,
      { atom: j },
    );
  }
}

function checkTurnable(molecule: Molecule, j: number, k: number): void {
  checkBond(molecule, j, k);
  const { order } = molecule.bonds[bondBetween(molecule, j, k)];
  const problem = (sentence: string, atom: number): InputError =>
    new InputError('bad-torsion', sentence, { atom });
  if (order !== 1) {
    throw problem(
      `${label(molecule, j)}–${label(molecule, k)} is a ${order === 2 ? 'double' : 'triple'} bond; only single bonds turn.`,
      j,
    );
  }
  for (const atom of [j, k]) {
    if (molecule.neighbors[atom].length < 2) {
      throw problem(
        `${label(molecule, atom)} has no further neighbor, so no torsion is defined.`,
        atom,
      );
    }
    if (isLinear(molecule, atom)) {
      throw problem(`${label(molecule, atom)} is linear, so no torsion is defined.`, atom);
    }
  }
}

function referenceTorsion(
  molecule: Molecule,
  priorities: ReturnType<typeof createPriorities>,
  j: number,
  k: number,
): [number, number, number, number] {
  return [
    rankedSubstituents(molecule, priorities, j, k)[0],
    j,
    k,
    rankedSubstituents(molecule, priorities, k, j)[0],
  ];
}

/** Whether turning `end` against `rest` only turns hydrogens or three equal single atoms round. */
function isRotor(molecule: Molecule, end: number, rest: number): boolean {
  const others = molecule.neighbors[end].filter(({ atom }) => atom !== rest);
  if (!others.every(({ atom }) => molecule.neighbors[atom].length === 1)) return false;
  const elements = new Set(others.map(({ atom }) => molecule.atomicNumbers[atom]));
  return elements.size === 1 && (elements.has(1) || others.length === 3);
}

function isConjugated(molecule: Molecule, a: number, b: number): boolean {
  const [piA, piB] = [isPi(molecule, a), isPi(molecule, b)];
  return (piA && (piB || hasLonePair(molecule, b))) || (piB && hasLonePair(molecule, a));
}
