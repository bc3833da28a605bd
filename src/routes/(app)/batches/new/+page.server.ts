import { fail, redirect } from '@sveltejs/kit';
import { draftQuerySchema } from '$lib/domain/submission';
import { readUpload } from '$lib/server/drafts';
import { roomOf } from '$lib/server/limits';
import { require } from '$lib/server/member';
import { limitRate } from '$lib/server/rate-limits';
import { UploadError } from '$lib/server/rows';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
  const member = whoAsks(locals);
  require(member, 'submit molecules');
  return { room: await roomOf(member) };
};

/** Without script a pasted list is sent as a form; with it the page streams and shows progress. */
export const actions: Actions = {
  default: async ({ request, locals }) => {
    const member = whoAsks(locals);
    const form = await request.formData();
    const text = String(form.get('text') ?? '');
    const query = draftQuerySchema.safeParse({
      name: form.get('name'),
      source: 'paste',
      format: 'smi',
    });
    if (!query.success) return fail(400, { text, fault: query.error.issues[0].message });
    const wait = await limitRate(['submit as a member', member.userId]);
    if (wait !== null) {
      return fail(429, { text, fault: `That was a lot of uploads. Wait ${wait} seconds.` });
    }
    let draftId: string;
    try {
      draftId = await readUpload(member, query.data, bytesOf(text), () => undefined);
    } catch (error) {
      if (!(error instanceof UploadError)) throw error;
      return fail(400, { text, fault: error.message });
    }
    redirect(303, `/batches/${draftId}/preview`);
  },
};

async function* bytesOf(text: string): AsyncGenerator<Uint8Array> {
  yield new TextEncoder().encode(text);
}
