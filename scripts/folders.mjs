/** Where things lie in this clone. */
import { createHash } from 'node:crypto';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

export const projectRoot = dirname(dirname(fileURLToPath(import.meta.url)));

/** Everything that belongs to this clone and not to git: secrets, the database, locks. */
export const windlassFolder = join(projectRoot, '.windlass');

/** Tells this clone from others on the same machine. */
export const cloneName = createHash('sha256').update(projectRoot).digest('hex').slice(0, 10);
