/** Finds the single bonds across which π systems, or a lone pair and a π system, are conjugated. */
import { bondedBy, coordination } from '../forcefield/bonding';
import { inAromaticRing, perceiveStructure } from '../forcefield/structure';
import type { Structure } from '../forcefield/structure';
import type { Molecule } from '../molecule/molecule';

/** What a conjugated bond is; "other" where the trade has no short name for it. */
export type ConjugationKind =
  | 'diene'
  | 'enone'
  | 'dicarbonyl'
  | 'heterodiene'
  | 'vinylarene'
  | 'aryl carbonyl'
  | 'biaryl'
  | 'amide'
  | 'ester'
  | 'carboxylic acid'
  | 'aniline'
  | 'aryl ether'
  | 'phenol'
  | 'enamine'
  | 'enol ether'
  | 'enol'
  | 'amidine'
  | 'other';

export interface ConjugatedBond {
  /** The bond's index in the molecule. */
  readonly bond: number;
  readonly j: number;
  readonly k: number;
  readonly kind: ConjugationKind;
  /** In a ring: it has a twist, but nothing turns about it. */
  readonly inRing: boolean;
  /** The torsion X=j-k=Y where both ends bear a double bond of their own: s-cis at 0. Null elsewhere. */
  readonly dieneTorsion: readonly [number, number, number, number] | null;
}

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const SULFUR = 16;

/** How an end of the bond takes part. */
type End =
  | { readonly by: 'double bond'; readonly atom: number; readonly partner: number }
  | { readonly by: 'arene'; readonly atom: number }
  | { readonly by: 'lone pair'; readonly atom: number };

/**
 * The conjugated single bonds of a molecule in the order of its bonds: between two atoms of π systems (double bonds or
 * aromatic rings) or between such an atom and an N, O or S with a lone pair. Bonds inside an aromatic ring are not
 * single, and at linear atoms (alkynes, nitriles, cumulenes) there is no twist to speak of; both are left out.
 */
export function findConjugatedBonds(molecule: Molecule): ConjugatedBond[] {
  const structure = perceiveStructure(molecule);
  const found: ConjugatedBond[] = [];
  molecule.bonds.forEach(({ a, b }, bond) => {
    if (structure.orders[bond] !== 1 || structure.aromaticBonds[bond]) return;
    const first = endAt(structure, a);
    const second = endAt(structure, b);
    if (!first || !second) return;
    if (first.by === 'lone pair' && second.by === 'lone pair') return;
    found.push({
      bond,
      j: a,
      k: b,
      kind: kindOf(structure, first, second),
      inRing: molecule.ringBonds[bond] === 1,
      dieneTorsion:
        first.by === 'double bond' && second.by === 'double bond'
          ? [first.partner, a, b, second.partner]
          : null,
    });
  });
  return found;
}

function endAt(structure: Structure, atom: number): End | null {
  const neighborCount = coordination(structure, atom);
  if (neighborCount < 2 || neighborCount > 3) return null;
  if (inAromaticRing(structure, atom)) return { by: 'arene', atom };
  const element = structure.elements[atom];
  const partners = bondedBy(structure, atom, 2);
  if (bondedBy(structure, atom, 3).length > 0 || partners.length > 1) return null;
  if (partners.length === 1) {
    const bearsPi = element === CARBON || element === NITROGEN;
    return bearsPi ? { by: 'double bond', atom, partner: partners[0] } : null;
  }
  const bearsLonePair =
    structure.charges[atom] <= 0 &&
    (element === NITROGEN || ((element === OXYGEN || element === SULFUR) && neighborCount === 2));
  return bearsLonePair ? { by: 'lone pair', atom } : null;
}

function kindOf(structure: Structure, first: End, second: End): ConjugationKind {
  if (first.by === 'lone pair') return donorKind(structure, first, second);
  if (second.by === 'lone pair') return donorKind(structure, second, first);
  if (first.by === 'double bond' && second.by === 'double bond') {
    return dieneKind(structure, [first.partner, first.atom, second.atom, second.partner]);
  }
  if (first.by === 'arene' && second.by === 'arene') return 'biaryl';
  const side = first.by === 'double bond' ? first : second;
  if (side.by !== 'double bond' || structure.elements[side.atom] !== CARBON) return 'other';
  const arene = side === first ? second.atom : first.atom;
  // The lone pair of an N-acylpyrrole is shared between its ring and the carbonyl group.
  const donatesLonePair = structure.elements[arene] === NITROGEN;
  const element = structure.elements[side.partner];
  if (element === CARBON) return donatesLonePair ? 'enamine' : 'vinylarene';
  if (element !== OXYGEN) return 'other';
  return donatesLonePair ? 'amide' : 'aryl carbonyl';
}

/** Names X=C-C=Y by its elements. */
function dieneKind(structure: Structure, atoms: readonly number[]): ConjugationKind {
  const [x, j, k, y] = atoms.map((atom) => structure.elements[atom]);
  if (j !== CARBON || k !== CARBON) return 'heterodiene';
  if (x === CARBON && y === CARBON) return 'diene';
  if (x === OXYGEN && y === OXYGEN) return 'dicarbonyl';
  const isEnone = (x === CARBON && y === OXYGEN) || (x === OXYGEN && y === CARBON);
  return isEnone ? 'enone' : 'heterodiene';
}

/** Names a bond from a lone pair into a π system by the donor and what it donates into. */
function donorKind(structure: Structure, donor: End, acceptor: End): ConjugationKind {
  const names = donorNames(structure, donor.atom);
  if (!names) return 'other';
  if (acceptor.by === 'arene') return names.arene;
  if (acceptor.by !== 'double bond' || structure.elements[acceptor.atom] !== CARBON) return 'other';
  const element = structure.elements[acceptor.partner];
  if (element === OXYGEN) return names.carbonyl;
  if (element === CARBON) return names.alkene;
  return element === NITROGEN ? names.imine : 'other';
}

interface DonorNames {
  readonly arene: ConjugationKind;
  readonly carbonyl: ConjugationKind;
  readonly alkene: ConjugationKind;
  readonly imine: ConjugationKind;
}

function donorNames(structure: Structure, donor: number): DonorNames | null {
  const element = structure.elements[donor];
  if (element === NITROGEN) {
    return { arene: 'aniline', carbonyl: 'amide', alkene: 'enamine', imine: 'amidine' };
  }
  if (element !== OXYGEN) return null;
  const isHydroxyl = structure.neighbors[donor].some(({ atom }) => structure.elements[atom] === 1);
  return isHydroxyl
    ? { arene: 'phenol', carbonyl: 'carboxylic acid', alkene: 'enol', imine: 'other' }
    : { arene: 'aryl ether', carbonyl: 'ester', alkene: 'enol ether', imine: 'other' };
}
