/** The conjugated bonds of a molecule. */
import { analyzeConjugation } from '../conjugation/analyze';
import type { BondConjugation } from '../conjugation/conjugation';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import type { Molecule } from '../molecule/molecule';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ConjugationTask } from './request';
import type { ConjugationFields, Outcome } from './result';

/** What a bond in a ring does not have. */
const ringBondHasNo = {
  sCis: null,
  sTrans: null,
  difference: null,
  sCisFraction: null,
  planarSCisCost: null,
  barrier: null,
  meanOverlap: null,
  profile: null,
  complete: null,
};

export async function describeConjugation(
  forceField: ForceField,
  { temperature, seed }: ConjugationTask,
  control: Control,
): Promise<Outcome<ConjugationFields>> {
  const { bonds, lowest, complete } = await analyzeConjugation(
    forceField,
    { temperature, seed },
    control,
  );
  return {
    fields: { bonds: bonds.map((bond) => bondFields(forceField.molecule, bond)), complete },
    coordinates: lowest.coordinates,
    warnings: complete ? [] : [incompleteSearch],
  };
}

function bondFields(molecule: Molecule, bond: BondConjugation): ConjugationFields['bonds'][number] {
  if (bond.inRing) return { ...bond, ...ringBondHasNo };
  return {
    ...bond,
    sCis: bond.sCis && withMolfile(molecule, bond.sCis),
    sTrans: bond.sTrans && withMolfile(molecule, bond.sTrans),
  };
}
