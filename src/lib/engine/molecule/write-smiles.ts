/** Writes SMILES (OpenSMILES specification 1.0) in a given order of the atoms: canonical when the order is. */
import { allowedValences, ELEMENT_SYMBOLS } from './elements';
import type { Molecule, Neighbor, Stereobond, Stereocenter } from './molecule';
import { isOddPermutation } from './parity';
import { directBonds } from './smiles-directions';

/** What the writer needs besides the molecule. */
export interface SmilesView {
  /** Order of the atoms, each different; -1 for hydrogens that are written with their atom. */
  readonly ranks: ArrayLike<number>;
  /** Per atom and per bond: 1 when written as aromatic. */
  readonly aromaticAtoms: ArrayLike<number>;
  readonly aromaticBonds: ArrayLike<number>;
  readonly stereocenters: readonly Stereocenter[];
  readonly stereobonds: readonly Stereobond[];
}

/** An atom of the spanning tree along which the text runs. */
interface Branch {
  readonly atom: number;
  readonly parent: Neighbor | null;
  readonly children: Branch[];
  /** Ring bonds in the order of their digits; `opens` where this atom comes first. */
  readonly closures: { readonly to: Neighbor; readonly opens: boolean }[];
  size: number;
}

/** Elements that may stand outside brackets. */
const ORGANIC = new Set([5, 6, 7, 8, 9, 15, 16, 17, 35, 53]);
const HALOGENS = new Set([9, 17, 35, 53]);
const BOND_SYMBOLS = ['', '', '=', '#'];

/** The SMILES of a connected molecule, hydrogens with rank -1 left implicit. */
export function writeSmiles(molecule: Molecule, view: SmilesView): string {
  const root = growTree(molecule, view);
  const order = textOrder(root);
  const directions = directBonds(
    molecule,
    view.stereobonds,
    order.map(({ atom }) => atom),
  );
  const centers = new Map(view.stereocenters.map((center) => [center.atom, center]));
  const digits = new Map<number, number>();
  const parts: string[] = [];

  const bondText = ({ bond }: Neighbor, from: number): string => {
    const direction = directions.get(bond);
    if (direction !== undefined) {
      const along = molecule.bonds[bond].a === from ? direction : -direction;
      return along > 0 ? '/' : '\\';
    }
    if (view.aromaticBonds[bond]) return '';
    const { a, b, order: bondOrder } = molecule.bonds[bond];
    const betweenRings = bondOrder === 1 && view.aromaticAtoms[a] && view.aromaticAtoms[b];
    return betweenRings ? '-' : BOND_SYMBOLS[bondOrder];
  };
  const write = (branch: Branch): void => {
    const { atom, closures, children } = branch;
    parts.push(atomText(molecule, view, branch, centers.get(atom)));
    for (const { to, opens } of closures) {
      const digit = opens ? lowestFree(digits) : (digits.get(to.bond) ?? 0);
      if (opens) digits.set(to.bond, digit);
      else digits.delete(to.bond);
      parts.push(opens ? bondText(to, atom) : '', digit > 9 ? `%${digit}` : String(digit));
    }
    children.forEach((child, n) => {
      const last = n === children.length - 1;
      const bond = child.parent
        ? bondText({ atom: child.atom, bond: child.parent.bond }, atom)
        : '';
      parts.push(last ? '' : '(', bond);
      write(child);
      parts.push(last ? '' : ')');
    });
  };
  write(root);
  return parts.join('');
}

/** A depth-first tree from the first atom, shorter branches first. */
function growTree(molecule: Molecule, view: SmilesView): Branch {
  const { ranks } = view;
  const visited = new Map<number, Branch>();
  const grow = (atom: number, parent: Neighbor | null): Branch => {
    const branch: Branch = { atom, parent, children: [], closures: [], size: 1 };
    visited.set(atom, branch);
    const around = molecule.neighbors[atom]
      .filter((to) => ranks[to.atom] >= 0 && to.bond !== parent?.bond)
      .sort((left, right) => ranks[left.atom] - ranks[right.atom]);
    for (const to of around) {
      const other = visited.get(to.atom);
      if (!other) {
        const child = grow(to.atom, { atom, bond: to.bond });
        branch.children.push(child);
        branch.size += child.size;
      } else if (!other.closures.some((closure) => closure.to.bond === to.bond)) {
        // Found from its later end: the earlier atom opens the ring.
        other.closures.push({ to: { atom, bond: to.bond }, opens: true });
        branch.closures.push({ to, opens: false });
      }
    }
    branch.children.sort(
      (left, right) => left.size - right.size || ranks[left.atom] - ranks[right.atom],
    );
    // Digits that are closed come first, so that they are free again.
    branch.closures.sort(
      (left, right) =>
        Number(left.opens) - Number(right.opens) || ranks[left.to.atom] - ranks[right.to.atom],
    );
    return branch;
  };
  return grow(firstAtom(molecule, view), null);
}

/**
 * The atom of lowest rank among the ends of chains, or among all where there is no end. Programs disagree on where the
 * lone pair of a first atom stands, so centers that have one do not come first.
 */
function firstAtom(molecule: Molecule, { ranks, stereocenters }: SmilesView): number {
  const isWritten = (atom: number): boolean => ranks[atom] >= 0;
  const withPair = stereocenters.filter(({ neighbors }) => neighbors[3] < 0);
  const atoms = Array.from({ length: molecule.atomCount }, (_, atom) => atom).filter(
    (atom) => isWritten(atom) && !withPair.some((center) => center.atom === atom),
  );
  const ends = atoms.filter(
    (atom) => molecule.neighbors[atom].filter((to) => isWritten(to.atom)).length < 2,
  );
  return (ends.length > 0 ? ends : atoms).reduce((least, atom) =>
    ranks[atom] < ranks[least] ? atom : least,
  );
}

function textOrder(root: Branch): Branch[] {
  return [root, ...root.children.flatMap(textOrder)];
}

function lowestFree(digits: ReadonlyMap<number, number>): number {
  const used = new Set(digits.values());
  let digit = 1;
  while (used.has(digit)) digit++;
  return digit;
}

function atomText(
  molecule: Molecule,
  view: SmilesView,
  branch: Branch,
  center: Stereocenter | undefined,
): string {
  const { atom } = branch;
  const element = molecule.atomicNumbers[atom];
  const charge = molecule.formalCharges[atom];
  const hydrogens = molecule.neighbors[atom].filter((to) => view.ranks[to.atom] < 0).length;
  const aromatic = view.aromaticAtoms[atom] > 0;
  const symbol = aromatic ? ELEMENT_SYMBOLS[element].toLowerCase() : ELEMENT_SYMBOLS[element];
  const plain = ORGANIC.has(element) && charge === 0 && molecule.massNumbers[atom] === 0 && !center;
  if (plain && hasDefaultHydrogens(molecule, atom, hydrogens, aromatic)) return symbol;
  const isotope = molecule.massNumbers[atom] || '';
  const count = hydrogens === 0 ? '' : hydrogens === 1 ? 'H' : `H${hydrogens}`;
  const size = Math.abs(charge) > 1 ? Math.abs(charge) : '';
  const sign = charge === 0 ? '' : `${charge > 0 ? '+' : '-'}${size}`;
  return `[${isotope}${symbol}${center ? chiralityMark(center, branch, view) : ''}${count}${sign}]`;
}

/** Whether a reader fills in just these hydrogens. */
function hasDefaultHydrogens(
  molecule: Molecule,
  atom: number,
  hydrogens: number,
  aromatic: boolean,
): boolean {
  const element = molecule.atomicNumbers[atom];
  if (aromatic && element !== 6) return hydrogens === 0;
  const total = molecule.neighbors[atom].reduce(
    (sum, { bond }) => sum + molecule.bonds[bond].order,
    0,
  );
  const valences = HALOGENS.has(element) ? [1] : allowedValences(element, 0);
  return valences?.find((valence) => valence >= total - hydrogens) === total;
}

/** @@ when, seen from the first neighbor in the text, the others run clockwise. */
function chiralityMark(center: Stereocenter, branch: Branch, view: SmilesView): string {
  const isImplicit = (atom: number): boolean => atom < 0 || view.ranks[atom] < 0;
  const implicit = center.neighbors.filter(isImplicit);
  const written = [
    ...(branch.parent ? [branch.parent.atom] : []),
    ...implicit,
    ...branch.closures.map(({ to }) => to.atom),
    ...branch.children.map((child) => child.atom),
  ];
  const places = written.map((atom) => center.neighbors.indexOf(atom));
  return center.clockwise !== isOddPermutation(places) ? '@@' : '@';
}
