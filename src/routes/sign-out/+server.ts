import { redirect } from '@sveltejs/kit';
import type { RequestHandler } from './$types';
import { endSignIn } from '../../auth';

export const POST: RequestHandler = async (event) => {
  const isThroughProvider = event.locals.proof?.method === 'single sign-on';
  await endSignIn(event);
  // Drawings and geometries never change, so browsers keep them; whoever comes next must not find them.
  event.setHeaders({ 'clear-site-data': '"cache"' });
  redirect(303, isThroughProvider ? '/signed-out?provider' : '/');
};
