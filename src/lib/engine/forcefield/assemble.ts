/** From a molecule to its MMFF94 atom types, partial charges and parameterized interactions. */
import type { Molecule } from '../molecule/molecule';
import { bondedInteractions } from './bonded-interactions';
import { partialCharges } from './charges';
import type { Variant } from './forcefield';
import { findBondClasses } from './interaction-classes';
import type { Interactions } from './interactions';
import { nonbondedInteractions } from './nonbonded-interactions';
import { parametersOf } from './parameters';
import { perceiveStructure } from './structure';
import { torsionInteractions } from './torsion-interactions';
import { assignAtomTypes } from './typing';

/** A molecule typed and parameterized. */
export interface AssembledMolecule {
  /** Numeric atom types, one an atom. */
  readonly atomTypes: Int32Array;
  /** Partial charges in electron charges, one an atom. */
  readonly charges: Float64Array;
  readonly interactions: Interactions;
}

/**
 * Types and parameterizes a molecule.
 * @throws InputError `unsupported-environment` that names the atom MMFF94 does not cover
 */
export function assembleInteractions(molecule: Molecule, variant: Variant): AssembledMolecule {
  const parameters = parametersOf(variant);
  const structure = perceiveStructure(molecule);
  const atomTypes = assignAtomTypes(structure);
  const bondClasses = findBondClasses(structure, atomTypes, parameters);
  const context = { structure, types: atomTypes, bondClasses, parameters };
  const charges = partialCharges(context);
  return {
    atomTypes,
    charges,
    interactions: {
      ...bondedInteractions(context),
      torsions: torsionInteractions(context),
      ...nonbondedInteractions(context, charges),
    },
  };
}
