import { fail, redirect } from '@sveltejs/kit';
import { codeFormSchema } from '$lib/domain/second-factor';
import { readForm } from '$lib/server/forms';
import { localPath } from '$lib/server/local-path';
import * as signInSteps from '$lib/server/sign-in-steps';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../../auth';

const TOO_LATE = '/sign-in?late';

export const load: PageServerLoad = async ({ locals, url }) => {
  if (locals.user) redirect(303, localPath(url.searchParams.get('next'), '/desk'));
  if (!locals.stepId || !(await signInSteps.findOwner(locals.stepId))) redirect(303, TOO_LATE);
};

export const actions: Actions = {
  default: async (event) => {
    const form = await readForm(event.request, codeFormSchema);
    if (!form.data) return fail(400, { error: form.faults.errors['code'], wait: null });
    const refusal = await tryToSignIn(event, { kind: 'code', code: form.data.code });
    if (!refusal) redirect(303, localPath(event.url.searchParams.get('next'), '/desk'));
    if ('wait' in refusal) return fail(429, { error: undefined, wait: refusal.wait });
    if (refusal.fault === 'late') redirect(303, TOO_LATE);
    return fail(400, { error: 'This code is not right, or it was used already.', wait: null });
  },
};
