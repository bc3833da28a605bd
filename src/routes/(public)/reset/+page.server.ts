import { fail, redirect } from '@sveltejs/kit';
import { resetPasswordSchema } from '$lib/domain/accounts';
import { readForm } from '$lib/server/forms';
import { limitTries } from '$lib/server/letter-limits';
import * as letterTokens from '$lib/server/letter-tokens';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';
import { forgetCookie } from '../../../auth';

export const load: PageServerLoad = async (event) => {
  const token = event.url.searchParams.get('token') ?? '';
  const wait = await limitTries(event);
  const owner = wait === null ? await letterTokens.findOwner(token, 'reset-password') : null;
  return { token, email: owner?.email ?? null };
};

export const actions: Actions = {
  default: async (event) => {
    const form = await readForm(event.request, resetPasswordSchema);
    if (!form.data) return fail(400, { error: form.faults.errors['password'] });
    const outcome = await users.resetPassword(form.data.token, form.data.password);
    if (outcome === 'done') {
      forgetCookie(event);
      redirect(303, '/sign-in?reset');
    }
    // After 'letter' the page says that the link does not work any more.
    return fail(400, { error: outcome === 'letter' ? undefined : outcome.fault });
  },
};
