import { fail } from '@sveltejs/kit';
import { changePasswordSchema, renameSchema, sessionSchema } from '$lib/domain/accounts';
import { batchLettersSchema } from '$lib/domain/batch-letters';
import { describeUserAgent } from '$lib/domain/user-agents';
import { batchLettersOf, chooseBatchLetters } from '$lib/server/batch-letters';
import { readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import * as identities from '$lib/server/identities';
import { findProvider } from '$lib/server/identity-provider';
import { hasPassword } from '$lib/server/prove-again';
import { limitRate } from '$lib/server/rate-limits';
import * as secondFactor from '$lib/server/second-factor';
import * as sessions from '$lib/server/sessions';
import { whoIsSignedIn } from '$lib/server/teams';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';

/** What a form on this page answers: which form it was, what was wrong, or that it is done. */
const answer = (
  form: 'name' | 'password' | 'letters' | 'sessions',
  errors: Record<string, string> = {},
) => ({
  form,
  errors,
});

export const load: PageServerLoad = async ({ locals }) => {
  const { user, sessionId } = whoIsSignedIn(locals);
  const list = await sessions.list(user.id);
  return {
    hasPassword: await hasPassword(user.id),
    hasSecondFactor: await secondFactor.isOn(user.id),
    provider: findProvider()?.name ?? null,
    isBound: await identities.isBoundToProvider(user.id),
    batchLetters: await batchLettersOf(user.id),
    sessions: list.map(({ userAgent, ...session }) => ({
      ...session,
      program: describeUserAgent(userAgent),
      isPresent: session.id === sessionId,
    })),
  };
};

export const actions: Actions = {
  rename: async ({ request, locals }) => {
    const { user } = whoIsSignedIn(locals);
    const form = await readForm(request, renameSchema);
    if (!form.data) return fail(400, answer('name', form.faults.errors));
    await users.rename(user.id, form.data.name);
    return answer('name');
  },

  changePassword: async (event) => {
    const { request, locals } = event;
    const { user, sessionId } = whoIsSignedIn(locals);
    requireFresh(event);
    const form = await readForm(request, changePasswordSchema);
    if (!form.data) return fail(400, answer('password', form.faults.errors));
    const wait = await limitRate(['sign in to an address', user.email]);
    if (wait !== null) {
      return fail(429, answer('password', { current: `Too many tries. Wait ${wait} seconds.` }));
    }
    const fault = await users.changePassword({ userId: user.id, sessionId }, form.data);
    if (fault) return fail(400, answer('password', { [fault.field]: fault.message }));
    return answer('password');
  },

  chooseLetters: async ({ request, locals }) => {
    const { user } = whoIsSignedIn(locals);
    const form = await readForm(request, batchLettersSchema);
    if (!form.data) return fail(400, answer('letters', form.faults.errors));
    await chooseBatchLetters(user.id, form.data.choice);
    return answer('letters');
  },

  revoke: async ({ request, locals }) => {
    const { user } = whoIsSignedIn(locals);
    const form = await readForm(request, sessionSchema);
    if (!form.data || !(await sessions.revoke(user.id, form.data.session))) {
      return fail(404, answer('sessions', { session: 'This sign-in has ended already.' }));
    }
    return answer('sessions');
  },

  revokeOthers: async ({ locals }) => {
    const { user, sessionId } = whoIsSignedIn(locals);
    await sessions.revokeOthers(user.id, sessionId);
    return answer('sessions');
  },
};
