/** What the sections of a molecule's page have in common. */
import type { Molecule } from '../engine';
import type { Answer } from './answers';

/** An answer, with what tells it from others about the same; empty where it is alone. */
export type ToldApart = Answer & { readonly distinction: string };

/** The atoms that are not hydrogen. */
export function heavyAtoms({ atomicNumbers }: Molecule): number[] {
  return [...atomicNumbers.keys()].filter((atom) => atomicNumbers[atom] > 1);
}

/** What every answer says of where it came from. */
export function provenance(answer: ToldApart) {
  const { id, model, engineVersion, createdAt, settings, seconds, warnings, distinction } = answer;
  return { id, model, engineVersion, createdAt, settings, seconds, warnings, distinction };
}
