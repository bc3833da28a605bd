import { error, redirect } from '@sveltejs/kit';
import { TEAM_COOKIE } from '$lib/server/teams';
import type { RequestHandler } from './$types';

const ONE_YEAR_SECONDS = 31_536_000;

/** Chooses the team whose work the pages show. */
export const POST: RequestHandler = async ({ request, locals, cookies, url }) => {
  const teamId = (await request.formData()).get('team');
  const chosen = locals.memberships.find((membership) => membership.teamId === teamId);
  if (!chosen) error(404, 'You belong to no such team.');
  cookies.set(TEAM_COOKIE, chosen.teamId, {
    path: '/',
    maxAge: ONE_YEAR_SECONDS,
    secure: url.protocol === 'https:',
  });
  redirect(303, '/desk');
};
