/** Types of hydrogen, which follow from the atom that bears it (MMFF94 part I, table III). */
import { AtomType } from './atom-types';
import { hasDoubleTo } from './bonding';
import type { Structure } from './structure';
import { inAromaticRing } from './structure';

const HYDROGEN = 1;
const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const SILICON = 14;
const PHOSPHORUS = 15;
const SULFUR = 16;

/** By the type of the nitrogen. */
const onNitrogen: Readonly<Record<number, number>> = {
  [AtomType.amineNitrogen]: AtomType.hydrogenOnAmine,
  [AtomType.pyrroleNitrogen]: AtomType.hydrogenOnAmine,
  [AtomType.anionicNitrogen]: AtomType.hydrogenOnAmine,
  [AtomType.nitroneNitrogen]: AtomType.hydrogenOnAmine,
  [AtomType.amineOxideNitrogen]: AtomType.hydrogenOnAmine,
  [AtomType.imineNitrogen]: AtomType.hydrogenOnImine,
  [AtomType.amideNitrogen]: AtomType.hydrogenOnAmide,
  [AtomType.enamineNitrogen]: AtomType.hydrogenOnAmide,
  [AtomType.sulfonamideNitrogen]: AtomType.hydrogenOnAmide,
  [AtomType.sulfoximineNitrogen]: AtomType.hydrogenOnAmide,
  [AtomType.ammoniumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.iminiumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.amidiniumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.guanidiniumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.pyridiniumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.diazoniumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
  [AtomType.imidazoliumNitrogen]: AtomType.hydrogenOnCationicNitrogen,
};

/** By the type of the oxygen; the hydroxyl oxygen needs a look at its other neighbor. */
const onOxygen: Readonly<Record<number, number>> = {
  [AtomType.oxideOxygen]: AtomType.hydroxylHydrogen,
  [AtomType.oxoniumOxygen]: AtomType.oxoniumHydrogen,
  [AtomType.oxeniumOxygen]: AtomType.oxeniumHydrogen,
  [AtomType.waterOxygen]: AtomType.waterHydrogen,
};

/** The type of a hydrogen, given the types of the heavy atoms; undefined when MMFF94 has none. */
export function hydrogenType(
  structure: Structure,
  heavyTypes: Readonly<Int32Array>,
  atom: number,
): number | undefined {
  if (structure.neighbors[atom].length !== 1) return undefined;
  const bearer = structure.neighbors[atom][0].atom;
  switch (structure.elements[bearer]) {
    case CARBON:
    case SILICON:
      return AtomType.hydrogenOnCarbon;
    case NITROGEN:
      return onNitrogen[heavyTypes[bearer]];
    case OXYGEN:
      return heavyTypes[bearer] === AtomType.divalentOxygen
        ? hydroxylType(structure, bearer)
        : onOxygen[heavyTypes[bearer]];
    case PHOSPHORUS:
    case SULFUR:
      return AtomType.hydrogenOnSulfur;
    default:
      return undefined;
  }
}

function hydroxylType(structure: Structure, oxygen: number): number {
  const other = structure.neighbors[oxygen]
    .map((neighbor) => neighbor.atom)
    .find((atom) => structure.elements[atom] !== HYDROGEN)!;
  switch (structure.elements[other]) {
    case PHOSPHORUS:
      return AtomType.acidHydrogen;
    case SULFUR:
      return AtomType.hydrogenOnSulfurAcid;
    case CARBON:
      if (hasDoubleTo(structure, other, OXYGEN)) return AtomType.acidHydrogen;
      return inAromaticRing(structure, other) || hasDoubleTo(structure, other, CARBON, NITROGEN)
        ? AtomType.hydrogenOnEnol
        : AtomType.hydroxylHydrogen;
    default:
      return AtomType.hydroxylHydrogen;
  }
}
