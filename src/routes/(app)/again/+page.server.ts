import { fail, redirect } from '@sveltejs/kit';
import { proveAgainSchema } from '$lib/domain/second-factor';
import { nothing, readForm } from '$lib/server/forms';
import { isFresh } from '$lib/server/freshness';
import * as identities from '$lib/server/identities';
import { findProvider } from '$lib/server/identity-provider';
import { localPath } from '$lib/server/local-path';
import { hasPassword } from '$lib/server/prove-again';
import * as secondFactor from '$lib/server/second-factor';
import { whoIsSignedIn } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../auth';

const backOf = (url: URL) => localPath(url.searchParams.get('next'), '/account');

export const load: PageServerLoad = async ({ locals, url }) => {
  const { user } = whoIsSignedIn(locals);
  const wentWrong = url.searchParams.get('fault');
  if (isFresh(locals) && !wentWrong) redirect(303, backOf(url));
  return {
    next: backOf(url),
    hasPassword: await hasPassword(user.id),
    needsCode: await secondFactor.isOn(user.id),
    provider: (await identities.isBoundToProvider(user.id)) ? findProvider()!.name : null,
    isUntold: url.searchParams.has('tried'),
    wentWrong,
  };
};

const messages: Record<string, Record<string, string>> = {
  password: { password: 'This is not your password.' },
  code: { code: 'This code is not right, or it was used already.' },
};

export const actions: Actions = {
  default: async (event) => {
    const form = await readForm(event.request, proveAgainSchema);
    if (!form.data) return fail(400, { errors: form.faults.errors, wait: null });
    const refusal = await tryToSignIn(event, { kind: 'again', ...form.data });
    if (!refusal) redirect(303, backOf(event.url));
    if ('wait' in refusal) return fail(429, { errors: nothing, wait: refusal.wait });
    return fail(400, { errors: messages[refusal.fault] ?? nothing, wait: null });
  },
};
