import { fail, redirect } from '@sveltejs/kit';
import { confirmFormSchema } from '$lib/domain/accounts';
import { readForm } from '$lib/server/forms';
import { limitTries } from '$lib/server/letter-limits';
import * as letterTokens from '$lib/server/letter-tokens';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../auth';

/** Opening the link changes nothing, because mail programs open links as well. */
export const load: PageServerLoad = async (event) => {
  const token = event.url.searchParams.get('token') ?? '';
  const wait = await limitTries(event);
  const owner = wait === null ? await letterTokens.findOwner(token, 'confirm-address') : null;
  return { token, email: owner?.email ?? null };
};

export const actions: Actions = {
  default: async (event) => {
    const form = await readForm(event.request, confirmFormSchema);
    if (!form.data) return fail(400, { error: form.faults.errors['password'], wait: null });
    const { token, password } = form.data;
    const owner = await letterTokens.findOwner(token, 'confirm-address');
    // The page then says that the link does not work any more.
    if (!owner) return fail(400, { error: undefined, wait: null });
    const refusal = await tryToSignIn(event, { email: owner.email, password, confirmToken: token });
    if (!refusal) redirect(303, '/desk');
    if ('wait' in refusal) return fail(429, { error: undefined, wait: refusal.wait });
    return fail(400, { error: 'This is not the password you chose.', wait: null });
  },
};
