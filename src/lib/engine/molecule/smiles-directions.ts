/** The slashes of SMILES: which single bonds are marked so that every double bond's configuration can be read off. */
import { bondBetween, type Molecule, type Stereobond } from './molecule';

/** One end of a stereobond: the marked bond, and whether its other atom lies on the side of the reference atom. */
interface End {
  readonly bond: number;
  /** +1 when the marked bond, taken from its `a` to its `b`, leads up for a reference atom above the double bond. */
  readonly sense: number;
}

/**
 * Direction by bond: +1 when b lies above a, as a slash written from a to b says. `order` lists the atoms as they are
 * written; bonds between two double bonds are marked once for both. The first mark of each system is a slash.
 */
export function directBonds(
  molecule: Molecule,
  stereobonds: readonly Stereobond[],
  order: readonly number[],
): Map<number, number> {
  const place = new Map(order.map((atom, n) => [atom, n]));
  const placeOf = (atom: number): number => place.get(atom) ?? Infinity;
  const ends = new Set(stereobonds.flatMap(({ atoms }) => [atoms[1], atoms[2]]));
  const links = stereobonds.map(({ atoms: [first, left, right, last], cis }) => ({
    left: markedEnd(molecule, ends, placeOf, left, right, first),
    right: markedEnd(molecule, ends, placeOf, right, left, last),
    cis,
    place: Math.min(placeOf(left), placeOf(right)),
  }));
  links.sort((one, other) => one.place - other.place);
  const directions = new Map<number, number>();
  const settle = ({ left, right, cis }: (typeof links)[number]): boolean => {
    const known = directions.get(left.bond);
    const other = directions.get(right.bond);
    if ((known === undefined) === (other === undefined)) return false;
    // Both reference atoms lie above the double bond when it is cis.
    const turn = left.sense * right.sense * (cis ? 1 : -1);
    if (known !== undefined) directions.set(right.bond, known * turn);
    else if (other !== undefined) directions.set(left.bond, other * turn);
    return true;
  };
  for (const link of links) {
    if (directions.has(link.left.bond) || directions.has(link.right.bond)) continue;
    const first = [link.left, link.right].sort(
      (one, other) => firstPlace(molecule, placeOf, one) - firstPlace(molecule, placeOf, other),
    )[0];
    const { a, b } = molecule.bonds[first.bond];
    directions.set(first.bond, placeOf(a) < placeOf(b) ? 1 : -1);
    // The marks of a conjugated row follow from one another.
    while (links.some(settle));
  }
  return directions;
}

function firstPlace(molecule: Molecule, placeOf: (atom: number) => number, { bond }: End): number {
  const { a, b } = molecule.bonds[bond];
  return Math.min(placeOf(a), placeOf(b));
}

/** Chooses the bond to mark at one end: one shared with another stereobond, else the first in the text. */
function markedEnd(
  molecule: Molecule,
  ends: ReadonlySet<number>,
  placeOf: (atom: number) => number,
  atom: number,
  other: number,
  reference: number,
): End {
  const choices = molecule.neighbors[atom]
    .filter((to) => to.atom !== other && placeOf(to.atom) < Infinity)
    .sort(
      (left, right) =>
        Number(ends.has(right.atom)) - Number(ends.has(left.atom)) ||
        placeOf(left.atom) - placeOf(right.atom),
    );
  const chosen = choices[0]?.atom ?? reference;
  const bond = bondBetween(molecule, atom, chosen);
  const away = molecule.bonds[bond].a === atom ? 1 : -1;
  return { bond, sense: chosen === reference ? away : -away };
}
