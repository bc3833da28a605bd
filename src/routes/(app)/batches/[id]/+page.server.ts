import { fail, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { uuidParam } from '$lib/domain/identifiers';
import * as batches from '$lib/server/batches';
import { pin, unpin } from '$lib/server/pins';
import { LimitError } from '$lib/server/refusals';
import * as tasks from '$lib/server/tasks';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

const PAGE_SIZE = 50;

/** What the address says of the list; anything odd falls back to the whole list in its own order. */
const querySchema = z.object({
  state: z
    .enum(['queued', 'running', 'done', 'failed', 'cancelled', 'error', 'warning'])
    .nullable()
    .catch(null),
  sort: z.enum(batches.entrySorts).catch('position'),
  descending: z.stringbool().catch(false),
  page: z.coerce.number().int().min(1).catch(1),
});

export const load: PageServerLoad = async ({ locals, params, url, depends }) => {
  depends('windlass:batch');
  const member = whoAsks(locals);
  const id = uuidParam(params.id);
  const query = querySchema.parse(
    Object.fromEntries(
      ['state', 'sort', 'descending', 'page'].map((name) => [name, url.searchParams.get(name)]),
    ),
  );
  const listed = await batches.listEntries(member, id, { ...query, pageSize: PAGE_SIZE });
  if (!listed.batch.submittedAt) redirect(303, `/batches/${id}/preview`);
  return {
    ...listed,
    query,
    pageSize: PAGE_SIZE,
    progress: await batches.progress(member, id),
    removed: await batches.countRemoved(id),
  };
};

/** The tasks that a form means: those of the named rows, or all of the batch. */
async function choiceOf(batchId: string, request: Request): Promise<tasks.TaskChoice> {
  const rows = (await request.formData()).getAll('row');
  const batch = { batchId: uuidParam(batchId) };
  return rows.length === 0 ? batch : { ...batch, rows: rows.map((row) => uuidParam(String(row))) };
}

export const actions: Actions = {
  pin: ({ locals, params }) => pin(whoAsks(locals), uuidParam(params.id)),
  unpin: ({ locals, params }) => unpin(whoAsks(locals), uuidParam(params.id)),

  cancel: async ({ locals, params, request }) => {
    const member = whoAsks(locals);
    const choice = await choiceOf(params.id, request);
    if ((await tasks.cancel(member, choice)) === 0) {
      return fail(409, { fault: 'Everything here has ended already; there is nothing to cancel.' });
    }
  },

  rerun: async ({ locals, params, request }) => {
    const member = whoAsks(locals);
    const choice = await choiceOf(params.id, request);
    try {
      if ((await tasks.rerun(member, choice)) === 0) {
        return fail(409, { fault: 'Nothing here has failed, was cancelled or was removed.' });
      }
    } catch (cause) {
      if (!(cause instanceof LimitError)) throw cause;
      return fail(403, { fault: cause.message });
    }
  },
};
