/** Answers 200 when the database answers and has this build's tables, else 503: for whoever decides where requests go. */
import { readDatabaseState } from '$lib/server/ready';
import type { RequestHandler } from './$types';

const words = {
  ready: 'ready\n',
  away: 'the database does not answer\n',
  'not migrated': 'the database misses migrations of this build\n',
};

export const GET: RequestHandler = async () => {
  const state = await readDatabaseState();
  return new Response(words[state], {
    status: state === 'ready' ? 200 : 503,
    headers: { 'cache-control': 'no-store' },
  });
};
