/** The conformers of a molecule. */
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ConformersTask } from './request';
import type { ConformersFields, Outcome } from './result';

export async function searchForConformers(
  forceField: ForceField,
  { limit, window, temperature, seed, effort }: ConformersTask,
  control: Control,
): Promise<Outcome<ConformersFields>> {
  const options = { limit, window, temperature, seed, effort };
  const { conformers, complete, ended, settled } = await searchConformers(
    forceField,
    options,
    control,
  );
  return {
    fields: {
      conformers: conformers.map((conformer) => withMolfile(forceField.molecule, conformer)),
      complete,
      ended,
    },
    coordinates: conformers[0].coordinates,
    warnings: settled ? [] : [incompleteSearch],
  };
}
