import { redirect } from '@sveltejs/kit';
import { environment } from '$lib/server/environment';
import { findProvider, findSignOutUrl } from '$lib/server/identity-provider';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  if (locals.user) redirect(303, '/desk');
  const isAsked = url.searchParams.has('provider');
  const returnTo = new URL('/signed-out', environment.WINDLASS_ORIGIN).href;
  return {
    provider: findProvider()?.name ?? null,
    providerUrl: isAsked ? await findSignOutUrl(returnTo) : null,
  };
};
