/** What the sections of a molecule's page have in common. */
import type { Answer } from './answers';

/** An answer, with what tells it from others about the same; empty where it is alone. */
export type ToldApart = Answer & { readonly distinction: string };

/** What every answer says of where it came from. */
export function provenance(answer: ToldApart) {
  const { id, model, engineVersion, createdAt, settings, seconds, warnings, distinction } = answer;
  return { id, model, engineVersion, createdAt, settings, seconds, warnings, distinction };
}
