/** Answers 200 when the database answers and has its tables, else 503: for whoever decides where requests go. */
import { isDatabaseReady } from '$lib/server/ready';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async () => {
  const isReady = await isDatabaseReady();
  return new Response(isReady ? 'ready\n' : 'the database does not answer\n', {
    status: isReady ? 200 : 503,
  });
};
