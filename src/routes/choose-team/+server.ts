import { error, redirect } from '@sveltejs/kit';
import { rememberTeam } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** Chooses the team whose work the pages show. */
export const POST: RequestHandler = async (event) => {
  const teamId = (await event.request.formData()).get('team');
  const chosen = event.locals.memberships.find((membership) => membership.teamId === teamId);
  if (!chosen) error(404, 'You belong to no such team.');
  rememberTeam(event, chosen.teamId);
  redirect(303, '/desk');
};
