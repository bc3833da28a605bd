import { error } from '@sveltejs/kit';
import { readCaughtLetters } from '$lib/server/caught-letters';
import type { PageServerLoad } from './$types';

/** Reads letters that nobody delivered: there is such a page only where the mail catcher runs. */
export const load: PageServerLoad = async ({ url }) => {
  const letters = await readCaughtLetters();
  if (!letters) error(404, 'There is no page at this address.');
  const chosenId = Number(url.searchParams.get('letter') ?? letters[0]?.id);
  return {
    letters: letters.map(({ id, at, to, subject }) => ({ id, at, to, subject })),
    chosen: letters.find(({ id }) => id === chosenId) ?? null,
  };
};
