import { error } from '@sveltejs/kit';
import { z } from 'zod';
import * as desk from '$lib/server/desk';
import { discardDraft } from '$lib/server/drafts';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, depends }) => {
  depends('windlass:desk');
  // Whoever left their last team still has a desk; it says what to do.
  return { desk: locals.membership ? await desk.load(locals.membership) : null };
};

export const actions: Actions = {
  discard: async ({ locals, request }) => {
    const draft = z.uuid().safeParse((await request.formData()).get('draft'));
    if (!draft.success) error(400, 'There is no such draft.');
    await discardDraft(whoAsks(locals), draft.data);
  },
};
