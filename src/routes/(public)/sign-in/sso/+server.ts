/** Leads to the identity provider. A link, not a form: a page may send its forms to this product only. */
import { error, redirect } from '@sveltejs/kit';
import { findProvider } from '$lib/server/identity-provider';
import { localPath } from '$lib/server/local-path';
import { clientNetwork, limitRate } from '$lib/server/rate-limits';
import type { RequestHandler } from './$types';
import { findProviderUrl } from '../../../../auth';

export const GET: RequestHandler = async (event) => {
  if (!findProvider()) error(404, 'Single sign-on is not set up on this server.');
  const network = clientNetwork(event.getClientAddress());
  const wait = await limitRate(['single sign-on from a client', network]);
  if (wait !== null) error(429, `Too many tries. Wait ${wait} seconds.`);
  const next = encodeURIComponent(localPath(event.url.searchParams.get('next'), '/desk'));
  // Also after a wrong turn: who is signed in there as somebody else can choose again.
  const isAgain = event.url.searchParams.has('again');
  const isSignedIn = event.locals.user !== null;
  const arrival =
    isAgain && isSignedIn ? `/again?tried&next=${next}` : `/sign-in/arrived?next=${next}`;
  const url = await findProviderUrl(event, arrival, isAgain);
  if (!url) redirect(303, isSignedIn ? `/again?fault=away&next=${next}` : '/sign-in?fault=away');
  event.setHeaders({ 'cache-control': 'no-store' });
  redirect(303, url);
};
