/** Finds openchemlib's tables on disk and hands them to the engine, which reads no files itself. */
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { hasResources, registerResources } from '$lib/engine/molecule/resources';

/** Registers openchemlib's tables once in this process (force-field parameters, torsion statistics and the like). */
export function registerChemistryResources(): void {
  if (hasResources()) return;
  // The package's exports hide the file, so it is found beside the package's entry point.
  const entry = createRequire(import.meta.url).resolve('openchemlib');
  const path = join(dirname(entry), 'resources.json');
  registerResources(JSON.parse(readFileSync(path, 'utf8')) as Record<string, string>);
}
