/** Assigns MMFF94 numeric atom types (Halgren, J. Comput. Chem. 1996, 17, 490, table III). */
import { InputError } from '../errors';
import { ELEMENT_SYMBOLS } from '../molecule/elements';
import { AtomType } from './atom-types';
import { coordination } from './bonding';
import { carbonType } from './carbon-types';
import { oxygenType, phosphorusType, sulfurType } from './chalcogen-types';

import { aromaticType } from './heteroaromatic-types';
import { hydrogenType } from './hydrogen-types';
import { nitrogenType } from './nitrogen-types';
import type { Structure } from './structure';

/** Monatomic ions by atomic number and charge. */
const ionTypes: Readonly<Record<string, number>> = {
  '26:2': 87,
  '26:3': 88,
  '9:-1': 89,
  '17:-1': 90,
  '35:-1': 91,
  '3:1': 92,
  '11:1': 93,
  '19:1': 94,
  '30:2': 95,
  '20:2': 96,
  '29:1': 97,
  '29:2': 98,
  '12:2': 99,
};

const halogenTypes: Readonly<Record<number, number>> = {
  9: AtomType.fluorine,
  17: AtomType.chlorine,
  35: AtomType.bromine,
  53: AtomType.iodine,
};

/**
 * The atom types of a structure, one an atom.
 * @throws InputError `unsupported-environment` for an atom that MMFF94 has no type for
 */
export function assignAtomTypes(structure: Structure): Int32Array {
  const { atomCount } = structure.molecule;
  const types = new Int32Array(atomCount);
  const assign = (atom: number, type: number | undefined): void => {
    if (type === undefined) throw unsupported(structure, atom);
    types[atom] = type;
  };
  for (let atom = 0; atom < atomCount; atom++) {
    if (structure.elements[atom] !== 1) assign(atom, heavyType(structure, atom));
  }
  for (let atom = 0; atom < atomCount; atom++) {
    if (structure.elements[atom] === 1) assign(atom, hydrogenType(structure, types, atom));
  }
  return types;
}

/** The error for an atom MMFF94 does not cover; a person finds it by element and number. */
export function unsupported(structure: Structure, atom: number): InputError {
  const symbol = ELEMENT_SYMBOLS[structure.elements[atom]];
  return new InputError(
    'unsupported-environment',
    `MMFF94 has no parameters for atom ${atom + 1} (${symbol}) as it is bonded here.`,
    { atom },
  );
}

function heavyType(structure: Structure, atom: number): number | undefined {
  const element = structure.elements[atom];
  if (coordination(structure, atom) === 0) {
    const ion = ionTypes[`${element}:${structure.charges[atom]}`];
    if (ion !== undefined) return ion;
  }
  const aromatic = aromaticType(structure, atom);
  if (aromatic !== undefined) return aromatic;
  switch (element) {
    case 6:
      return carbonType(structure, atom);
    case 7:
      return nitrogenType(structure, atom);
    case 8:
      return oxygenType(structure, atom);
    case 14:
      return coordination(structure, atom) === 4 ? AtomType.silicon : undefined;
    case 15:
      return phosphorusType(structure, atom);
    case 16:
      return sulfurType(structure, atom);
    case 17:
      if (coordination(structure, atom) === 4) return AtomType.perchlorateChlorine;
  }
  return coordination(structure, atom) === 1 ? halogenTypes[element] : undefined;
}
