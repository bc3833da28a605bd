/** Where a configuration that the graph seems to allow is no choice at all. */
import { InputError } from '../errors';
import { atomLabel } from './elements';
import { bondBetween, type Molecule, type Stereobond } from './molecule';

/** Smallest ring in which both forms of a double bond can be kept (trans-cyclooctene). */
const SMALLEST_RING_WITH_TRANS = 8;

/**
 * False for a nitrogen with three neighbors, which inverts (or, as a bridgehead, follows the rest of its cage), and for
 * centers with two terminal neighbors of one kind, which resonance or a proton's move makes equal whatever was drawn:
 * the oxygens of a phosphate or sulfonate, two hydrogens.
 */
export function canBeStereocenter(molecule: Molecule, atom: number): boolean {
  const around = molecule.neighbors[atom];
  // Amines invert, and carbanions invert or lie flat.
  if ([6, 7].includes(molecule.atomicNumbers[atom]) && around.length === 3) return false;
  const ends = around
    .map((neighbor) => neighbor.atom)
    .filter((neighbor) => molecule.neighbors[neighbor].length === 1)
    .map((end) => `${molecule.atomicNumbers[end]}-${molecule.massNumbers[end]}`);
  return new Set(ends).size === ends.length;
}

/** True for double bonds in rings too small to be anything but cis. */
export function isHeldByRing(molecule: Molecule, { bond }: Stereobond): boolean {
  return smallestRing(molecule, bond).length < SMALLEST_RING_WITH_TRANS;
}

/** The smallest ring around a bond; without one, an endless row of atoms stands for the chain. */
function smallestRing(
  molecule: Molecule,
  bond: number,
): { length: number; atoms: readonly number[] } {
  const { a, b } = molecule.bonds[bond];
  if (molecule.ringBonds[bond] === 0) return { length: Infinity, atoms: [] };
  const rings = molecule.rings.filter((ring) => ring.includes(a) && ring.includes(b));
  const atoms = rings.reduce((least, ring) => (ring.length < least.length ? ring : least));
  return { length: atoms.length, atoms };
}

/** Refuses double bonds stated to be trans within a ring of less than eight atoms. */
export function refuseSmallTransRings(
  molecule: Molecule,
  doubleBonds: readonly Stereobond[],
): void {
  for (const { bond, atoms, cis } of doubleBonds) {
    const ring = smallestRing(molecule, bond);
    const [first, left, right, last] = atoms;
    const swapped = ring.atoms.includes(first) !== ring.atoms.includes(last);
    if (ring.length >= SMALLEST_RING_WITH_TRANS || cis !== swapped) continue;
    throw new InputError(
      'unsupported-environment',
      `The double bond ${atomLabel(molecule.atomicNumbers[left], left)}=${atomLabel(molecule.atomicNumbers[right], right)} is trans within a ring of ${ring.length}; that is handled from rings of ${SMALLEST_RING_WITH_TRANS} on.`,
      { atom: left },
    );
  }
}

/**
 * True for ring atoms two of whose neighbors look alike and that a cage leaves no choice: bicyclo[2.2.2]octane,
 * adamantane, cubane. Such a ring runs through a bridgehead, or every two ring neighbors of the atom meet again.
 */
export function isHeldByCage(
  molecule: Molecule,
  classes: ArrayLike<number>,
  atom: number,
): boolean {
  const around = molecule.neighbors[atom];
  if (new Set(around.map((to) => classes[to.atom])).size === around.length) return false;
  const rings = molecule.rings.filter((ring) => ring.includes(atom));
  if (rings.some((ring) => ring.some((member) => isBridgehead(molecule, member)))) return true;
  const inRings = around.filter(({ bond }) => molecule.ringBonds[bond] === 1);
  const meetAgain = (one: number, other: number): boolean =>
    molecule.neighbors[one].some(
      (to) => to.atom !== atom && (to.atom === other || bondBetween(molecule, to.atom, other) >= 0),
    );
  return (
    inRings.length > 2 &&
    inRings.every((one, n) =>
      inRings.slice(n + 1).every((other) => meetAgain(one.atom, other.atom)),
    )
  );
}

/**
 * True at either end of a row of two or more bonds that two small rings share; the atoms at which decalin's rings are
 * fused share one only.
 */
function isBridgehead(molecule: Molecule, atom: number): boolean {
  const rings = molecule.rings.filter((ring) => ring.includes(atom));
  return rings.some((ring) =>
    rings.some((other) => {
      if (other === ring) return false;
      const shared = ring.filter((member) => other.includes(member));
      const continues = molecule.neighbors[atom].filter((to) => shared.includes(to.atom));
      return shared.length > 2 && continues.length === 1;
    }),
  );
}

/**
 * True for C=N-H with two different substituents on carbon and a hydrogen that was given, not added: a configuration
 * that is kept when stated, though SMILES without explicit hydrogens cannot say it.
 */
export function isImineConfiguration(
  molecule: Molecule,
  classes: ArrayLike<number>,
  { atoms: [first, left, right, last] }: Stereobond,
): boolean {
  return [
    { hydrogen: first, nitrogen: left, carbon: right },
    { hydrogen: last, nitrogen: right, carbon: left },
  ].some(({ hydrogen, nitrogen, carbon }) => {
    if (molecule.atomicNumbers[hydrogen] !== 1 || molecule.atomicNumbers[nitrogen] !== 7)
      return false;
    if (hydrogen >= molecule.givenAtomCount || molecule.neighbors[nitrogen].length !== 2)
      return false;
    const others = molecule.neighbors[carbon].filter((to) => to.atom !== nitrogen);
    return others.length === 2 && classes[others[0].atom] !== classes[others[1].atom];
  });
}
