import { redirect } from '@sveltejs/kit';
import { findProvider } from '$lib/server/identity-provider';
import { localPath } from '$lib/server/local-path';
import * as secondFactor from '$lib/server/second-factor';
import { whoIsSignedIn } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const { user } = whoIsSignedIn(locals);
  const next = localPath(url.searchParams.get('next'), '/desk');
  if (!locals.barred) redirect(303, next);
  const { missing, membership } = locals.barred;
  return {
    next,
    missing,
    teamName: membership.teamName,
    hasSecondFactor: await secondFactor.isOn(user.id),
    provider: findProvider()?.name ?? null,
  };
};
