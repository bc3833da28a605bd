/** The conformers of a molecule. */
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { conformerVibrations } from '../thermo/minimum-vibrations';
import { freePopulations, relativeFreeEnergies } from '../thermo/shape-free-energies';
import { withMolfile } from './geometry-text';
import { incompleteSearch } from './prepare';
import type { ConformersTask } from './request';
import type { ConformersFields, Outcome } from './result';

/** Share of the work after which vibrations begin, for progress. */
const SEARCH_SHARE = 0.92;

/** Searches them, and weighs them by model energy and by free energy at the temperature. */
export async function searchForConformers(
  forceField: ForceField,
  { limit, window, temperature, seed, effort }: ConformersTask,
  control: Control,
): Promise<Outcome<ConformersFields>> {
  const options = { limit, window, temperature, seed, effort };
  const { conformers, complete, ended, settled } = await searchConformers(
    forceField,
    options,
    control.part(0, SEARCH_SHARE),
  );
  const analyses = await conformerVibrations(forceField, conformers, control.part(SEARCH_SHARE, 1));
  const shapes = conformers.map((conformer, n) => ({ ...conformer, vibrations: analyses[n] }));
  const free = relativeFreeEnergies(shapes, temperature);
  const shares = freePopulations(shapes, temperature);
  return {
    fields: {
      conformers: shapes.map((shape, n) =>
        withMolfile(forceField.molecule, {
          ...shape,
          freeEnergy: free[n],
          freePopulation: shares?.[n] ?? null,
        }),
      ),
      complete,
      ended,
    },
    coordinates: conformers[0].coordinates,
    warnings: settled ? [] : [incompleteSearch],
  };
}
