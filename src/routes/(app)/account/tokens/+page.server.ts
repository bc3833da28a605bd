import { fail } from '@sveltejs/kit';
import { newTokenSchema, revokeTokenSchema } from '$lib/domain/api';
import * as apiTokens from '$lib/server/api-tokens';
import { nothing, readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => ({
  tokens: await apiTokens.list(whoAsks(locals)),
  /** What was filled in before the page asked who is there. */
  begun: {
    name: url.searchParams.get('name') ?? '',
    scope: url.searchParams.get('scope') ?? 'read',
    days: Number(url.searchParams.get('days') ?? 90),
  },
});

export const actions: Actions = {
  create: async (event) => {
    const member = whoAsks(event.locals);
    const form = await readForm(event.request, newTokenSchema);
    if (!form.data) return fail(400, { errors: form.faults.errors, token: null });
    requireFresh(event, `${event.url.pathname}?${new URLSearchParams(form.values)}`);
    const strength = event.locals.proof!;
    return { errors: nothing, token: await apiTokens.create(member, form.data, strength) };
  },

  revoke: async ({ locals, request }) => {
    const form = await readForm(request, revokeTokenSchema);
    if (!form.data || !(await apiTokens.revoke(whoAsks(locals), form.data.token))) {
      return fail(404, { errors: { token: 'This token had ended already.' }, token: null });
    }
    return { errors: nothing, token: null };
  },
};
