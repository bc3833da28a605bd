import { redirect } from '@sveltejs/kit';
import type { RequestHandler } from './$types';
import { endSignIn } from '../../auth';

export const POST: RequestHandler = async (event) => {
  await endSignIn(event);
  redirect(303, '/');
};
