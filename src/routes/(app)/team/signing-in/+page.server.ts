import { fail } from '@sveltejs/kit';
import { requirementsSchema } from '$lib/domain/sign-in-strength';
import { readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import { findProvider } from '$lib/server/identity-provider';
import { listReadiness, setRequirements } from '$lib/server/team-requirements';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
  const member = whoAsks(locals);
  return {
    members: await listReadiness(member),
    requires: member.requires,
    provider: findProvider()?.name ?? null,
  };
};

const refusals = {
  'second factor':
    'You signed in without a second factor yourself, so you would lock yourself out. Set yours up under Account first.',
  'single sign-on':
    'You did not sign in by single sign-on yourself, so you would lock yourself out. Sign in that way first.',
};

export const actions: Actions = {
  default: async (event) => {
    const member = whoAsks(event.locals);
    requireFresh(event);
    const form = await readForm(event.request, requirementsSchema);
    if (!form.data) return fail(400, { isDone: false, message: 'Tick what the team requires.' });
    const missing = await setRequirements(member, form.data, event.locals.proof!);
    if (missing) return fail(409, { isDone: false, message: refusals[missing] });
    return { isDone: true, message: 'This is asked for from now on, at once.' };
  },
};
