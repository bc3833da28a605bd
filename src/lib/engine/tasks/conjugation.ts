/** The conjugated bonds of a molecule. */
import { analyzeConjugation } from '../conjugation/analyze';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ConjugationTask } from './request';
import type { ConjugationFields, Outcome } from './result';

export async function describeConjugation(
  forceField: ForceField,
  { temperature, seed }: ConjugationTask,
  control: Control,
): Promise<Outcome<ConjugationFields>> {
  const { molecule } = forceField;
  const { bonds, lowest, complete } = await analyzeConjugation(
    forceField,
    { temperature, seed },
    control,
  );
  return {
    fields: {
      bonds: bonds.map((bond) => ({
        ...bond,
        sCis: bond.sCis && withMolfile(molecule, bond.sCis),
        sTrans: bond.sTrans && withMolfile(molecule, bond.sTrans),
      })),
      complete,
    },
    coordinates: lowest.coordinates,
    warnings: complete ? [] : [incompleteSearch],
  };
}
