/** Where people arrive from the identity provider: signed in, or with the code of the second factor still to be given. */
import { redirect } from '@sveltejs/kit';
import { localPath } from '$lib/server/local-path';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = ({ locals, url }) => {
  const next = localPath(url.searchParams.get('next'), '/desk');
  const isWaiting = !locals.user && locals.stepId !== null;
  redirect(303, isWaiting ? `/sign-in/code?next=${encodeURIComponent(next)}` : next);
};
