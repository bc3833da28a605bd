/** Remembers how a person reads results. */
import { error, redirect } from '@sveltejs/kit';
import { unitChoiceSchema } from '$lib/domain/unit-choice';
import { readForm } from '$lib/server/forms';
import { localPath } from '$lib/server/local-path';
import { whoIsSignedIn } from '$lib/server/teams';
import * as users from '$lib/server/users';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ request, locals }) => {
  const { user } = whoIsSignedIn(locals);
  const form = await readForm(request, unitChoiceSchema);
  if (!form.data) error(400, form.faults.errors['unit'] ?? 'Choose a unit.');
  await users.chooseUnit(user.id, form.data.unit);
  // A page with script has changed its numbers already; without, the form's page is asked for again.
  if (request.headers.get('accept') === 'application/json')
    return new Response(null, { status: 204 });
  redirect(303, localPath(form.data.page, '/desk'));
};
