/** What a person looks for among the molecules of a team, as the address of the search says it. */
import { z } from 'zod';

export const textPlaces = ['any', 'name', 'part', 'exact'] as const;
export type TextPlace = (typeof textPlaces)[number];

export const taskStates = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;
export const resultKinds = ['conformers', 'scan', 'conjugation', 'strain'] as const;

/** Longest text that is looked for, characters. */
export const LONGEST_SEARCH = 400;

/** One line of text; signs that nobody can type count as spaces. */
const line = z
  .string()
  // eslint-disable-next-line no-control-regex
  .transform((text) => text.replace(/[\u0000-\u001f\u007f]+/g, ' ').trim())
  .catch('');

/** Fields of the form; what is missing or odd in an address counts as not asked for. */
export const searchSchema = z.object({
  /** Part of a name, or a SMILES or part of one; `in` says which. */
  text: line,
  in: z.enum(textPlaces).catch('any'),
  /** SMILES or SMARTS that the molecules contain. */
  structure: line,
  /** Molecules with a task in this state. */
  state: z.enum(taskStates).nullable().catch(null),
  /** Molecules with an answer of this kind. */
  kind: z.enum(resultKinds).nullable().catch(null),
  batch: z.uuid().nullable().catch(null),
  /** Pages of a search without a structure, from 1. */
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
  /** The molecule after which a search for a structure goes on. */
  after: z.uuid().nullable().catch(null),
});
export type Search = z.output<typeof searchSchema>;

/** Reads a search out of an address. */
export function readSearch(parameters: URLSearchParams): Search {
  const names = Object.keys(searchSchema.shape);
  return searchSchema.parse(Object.fromEntries(names.map((name) => [name, parameters.get(name)])));
}

/** The address of a search; what is not asked for is left out. */
export function searchAddress(search: Search): string {
  const asked = Object.entries(search).filter(
    ([name, value]) =>
      value !== null &&
      value !== '' &&
      !(name === 'page' && value === 1) &&
      !(name === 'in' && value === 'any'),
  );
  const query = new URLSearchParams(asked.map(([name, value]) => [name, String(value)]));
  return asked.length > 0 ? `/search?${query}` : '/search';
}
