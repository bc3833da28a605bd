import { fail, redirect } from '@sveltejs/kit';
import { signUpSchema } from '$lib/domain/accounts';
import { nothing, readForm } from '$lib/server/forms';
import { clientNetwork, limitRate } from '$lib/server/rate-limits';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => {
  if (locals.user) redirect(303, '/desk');
};

export const actions: Actions = {
  default: async ({ request, getClientAddress }) => {
    const form = await readForm(request, signUpSchema);
    if (!form.data) return fail(400, { ...form.faults, wait: null, sentTo: null });
    const wait = await limitRate(
      ['sign up from a client', clientNetwork(getClientAddress())],
      ['letter to an address', form.data.email],
    );
    if (wait !== null)
      return fail(429, { values: form.values, errors: nothing, wait, sentTo: null });
    await users.signUp(form.data);
    return { values: nothing, errors: nothing, wait: null, sentTo: form.data.email };
  },
};
