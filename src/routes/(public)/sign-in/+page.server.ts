import { fail, redirect } from '@sveltejs/kit';
import { addressFormSchema, signInSchema } from '$lib/domain/accounts';
import { nothing, readForm } from '$lib/server/forms';
import { findProvider } from '$lib/server/identity-provider';
import { limitLetters } from '$lib/server/letter-limits';
import { localPath } from '$lib/server/local-path';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../auth';

export const load: PageServerLoad = ({ locals, url }) => {
  const wentWrong = url.searchParams.get('fault') ?? url.searchParams.get('error');
  if (locals.user) {
    const next = localPath(url.searchParams.get('next'), '/desk');
    redirect(303, wentWrong ? `/again?fault=${encodeURIComponent(wentWrong)}` : next);
  }
  return {
    isReset: url.searchParams.has('reset'),
    isLate: url.searchParams.has('late'),
    provider: findProvider()?.name ?? null,
    wentWrong,
  };
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
    const next = localPath(event.url.searchParams.get('next'), '/desk');
    redirect(303, event.locals.stepId ? `/sign-in/code?next=${encodeURIComponent(next)}` : next);
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
