/** Identifiers in addresses. */
import { z } from 'zod';

const uuid = z.uuid();
/** No row has it, so whoever asks for a malformed id gets the same "not found" as for any other id. */
const NOBODY = '00000000-0000-0000-0000-000000000000';

/** An id out of an address; what is no UUID becomes one that no row has. */
export function uuidParam(text: string): string {
  return uuid.safeParse(text).success ? text : NOBODY;
}
