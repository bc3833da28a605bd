import { fail, redirect } from '@sveltejs/kit';
import { addressFormSchema, signInSchema } from '$lib/domain/accounts';
import { nothing, readForm } from '$lib/server/forms';
import { limitLetters } from '$lib/server/letter-limits';
import { localPath } from '$lib/server/local-path';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../auth';

export const load: PageServerLoad = ({ locals, url }) => {
  if (locals.user) redirect(303, localPath(url.searchParams.get('next'), '/desk'));
  return { isReset: url.searchParams.has('reset') };
};

export const actions: Actions = {
  signIn: async (event) => {
    const form = await readForm(event.request, signInSchema);
    if (!form.data) return fail(400, { ...form.faults, refusal: null, isResent: false });
    const refusal = await tryToSignIn(event, form.data);
    if (refusal) {
      const status = 'wait' in refusal ? 429 : 400;
      return fail(status, { values: form.values, errors: nothing, refusal, isResent: false });
    }
    redirect(303, localPath(event.url.searchParams.get('next'), '/desk'));
  },

  resend: async (event) => {
    const form = await readForm(event.request, addressFormSchema);
    if (!form.data) return fail(400, { ...form.faults, refusal: null, isResent: false });
    const wait = await limitLetters(event, form.data.email);
    if (wait !== null) {
      return fail(429, {
        values: form.values,
        errors: nothing,
        refusal: { wait },
        isResent: false,
      });
    }
    users.resendConfirmation(form.data.email);
    return { values: form.values, errors: nothing, refusal: null, isResent: true };
  },
};
