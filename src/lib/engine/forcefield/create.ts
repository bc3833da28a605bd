/** Compiles a molecule into its force field. */
import type { Molecule } from '../molecule/molecule';
import { findSkeleton } from '../molecule/skeleton';
import { assembleInteractions } from './assemble';
import { compileInteractions } from './compile';
import { defaultForceFieldSettings } from './forcefield';
import type { ForceField, ForceFieldSettings } from './forcefield';

/**
 * Types the molecule, looks its parameters up and compiles them. Throws an InputError that names the atom where MMFF94
 * has no parameters for an environment.
 */
export function createForceField(
  molecule: Molecule,
  settings: ForceFieldSettings = defaultForceFieldSettings,
): ForceField {
  const { atomTypes, charges, interactions } = assembleInteractions(molecule, settings.variant);
  const compiled = compileInteractions(molecule.atomCount, interactions, settings.dielectric);
  const skeleton = findSkeleton(molecule);
  return { molecule, settings, atomTypes, charges, skeleton, ...compiled };
}
