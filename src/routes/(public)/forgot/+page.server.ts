import { fail } from '@sveltejs/kit';
import { addressFormSchema } from '$lib/domain/accounts';
import { nothing, readForm } from '$lib/server/forms';
import { limitLetters } from '$lib/server/letter-limits';
import * as users from '$lib/server/users';
import type { Actions } from './$types';

export const actions: Actions = {
  default: async (event) => {
    const form = await readForm(event.request, addressFormSchema);
    if (!form.data) return fail(400, { ...form.faults, wait: null, sentTo: null });
    const wait = await limitLetters(event, form.data.email);
    if (wait !== null)
      return fail(429, { values: form.values, errors: nothing, wait, sentTo: null });
    users.forgotPassword(form.data.email);
    return { values: nothing, errors: nothing, wait: null, sentTo: form.data.email };
  },
};
