import { fail } from '@sveltejs/kit';
import { newTokenSchema, revokeTokenSchema } from '$lib/domain/api';
import * as apiTokens from '$lib/server/api-tokens';
import { nothing, readForm } from '$lib/server/forms';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => ({
  tokens: await apiTokens.list(whoAsks(locals)),
});

export const actions: Actions = {
  create: async ({ locals, request }) => {
    const form = await readForm(request, newTokenSchema);
    if (!form.data) return fail(400, { errors: form.faults.errors, token: null });
    return { errors: nothing, token: await apiTokens.create(whoAsks(locals), form.data) };
  },

  revoke: async ({ locals, request }) => {
    const form = await readForm(request, revokeTokenSchema);
    if (!form.data || !(await apiTokens.revoke(whoAsks(locals), form.data.token))) {
      return fail(404, { errors: { token: 'This token had ended already.' }, token: null });
    }
    return { errors: nothing, token: null };
  },
};
