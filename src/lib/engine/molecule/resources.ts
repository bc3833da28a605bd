/** openchemlib's own tables, handed in by the program because the engine reads no files. */
import { Resources } from 'openchemlib';

let tables: Readonly<Record<string, string>> | null = null;

/** Takes the parsed content of openchemlib's resources.json; needed once before anything is computed. */
export function registerResources(content: Readonly<Record<string, string>>): void {
  Resources.register(content);
  tables = content;
}

/** True when the tables are there. */
export function hasResources(): boolean {
  return tables !== null;
}

/** The text of one table by its key; throws plainly when it is missing, which is a bug of the program. */
export function resourceTable(key: string): string {
  const table = tables?.[key];
  if (table === undefined) throw new Error(`openchemlib table ${key} is not registered`);
  return table;
}
