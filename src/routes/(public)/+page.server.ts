import { frontPageExample } from '$lib/server/example';
import type { PageServerLoad } from './$types';

/** Seconds for which a visitor's browser need not ask again. */
const KEPT_SECONDS = 300;

export const load: PageServerLoad = async ({ locals, setHeaders }) => {
  // The head of the page names who is signed in; the cookie tells the two apart.
  if (!locals.user) {
    setHeaders({ 'cache-control': `public, max-age=${KEPT_SECONDS}`, vary: 'Cookie' });
  }
  return { example: await frontPageExample() };
};
