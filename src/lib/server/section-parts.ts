/** What the sections of a molecule's page have in common. */
import { atomLabel, type Molecule } from '../engine';
import type { Answer } from './answers';

/** Atoms in a row as people read them: "C2–C3". */
export function bondName(molecule: Molecule, atoms: readonly number[]): string {
  return atoms.map((atom) => atomLabel(molecule.atomicNumbers[atom], atom)).join('–');
}

/** The atoms that are not hydrogen. */
export function heavyAtoms({ atomicNumbers }: Molecule): number[] {
  return [...atomicNumbers.keys()].filter((atom) => atomicNumbers[atom] > 1);
}

/** What every answer says of where it came from. */
export function provenance({ id, model, engineVersion, settings, seconds, warnings }: Answer) {
  return { id, model, engineVersion, settings, seconds, warnings };
}
