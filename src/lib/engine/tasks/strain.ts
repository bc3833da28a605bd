/** The strain of the geometry a molecule came with. */
import type { Control } from '../control';
import type { InputWarning } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import { writeMolfile } from '../molecule/write';
import { analyzeStrain } from '../strain/analyze';
import { givenGeometry, incompleteSearch, notConverged } from './prepare';
import type { StrainTask } from './request';
import type { Outcome, StrainFields } from './result';

export async function measureStrain(
  forceField: ForceField,
  { tether, seed }: StrainTask,
  control: Control,
): Promise<Outcome<StrainFields>> {
  const { molecule } = forceField;
  const { strain, strainTerms, givenEnergy, relaxed, lowest, torsions, complete } =
    await analyzeStrain(forceField, { tether, seed }, control);
  const warnings: InputWarning[] = [];
  if (!relaxed.converged) warnings.push(notConverged('Relaxing the geometry in place'));
  if (!complete) warnings.push(incompleteSearch);
  return {
    fields: {
      strain,
      strainTerms,
      given: givenEnergy,
      relaxed: relaxed.energy,
      lowest: lowest.energy,
      largestDisplacement: relaxed.largestDisplacement,
      farthestAtom: relaxed.farthestAtom,
      torsions,
      complete,
      relaxedMolfile: writeMolfile(molecule, relaxed.coordinates),
      lowestMolfile: writeMolfile(molecule, lowest.coordinates),
    },
    // Strain without a geometry is refused, so there is one.
    coordinates: givenGeometry(forceField) ?? relaxed.coordinates,
    warnings,
  };
}
