import { fail, isHttpError, redirect } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { deliverySchema } from '$lib/domain/webhooks';
import { readCursor, writeCursor } from '$lib/server/api';
import { readForm } from '$lib/server/forms';
import { whoAsks } from '$lib/server/teams';
import * as webhookLog from '$lib/server/webhook-log';
import * as webhooks from '$lib/server/webhooks';
import type { Actions, PageServerLoad } from './$types';

const PAGE_SIZE = 50;

export const load: PageServerLoad = async ({ locals, params, url, depends }) => {
  depends('windlass:deliveries');
  const member = whoAsks(locals);
  const webhook = await webhooks.get(member, uuidParam(params.id));
  const after = readCursor(url.searchParams.get('after') ?? undefined);
  const rows = await webhookLog.listDeliveries(member, webhook.id, after, PAGE_SIZE + 1);
  const deliveries = rows.slice(0, PAGE_SIZE);
  const last = deliveries.at(-1);
  return {
    webhook,
    deliveries,
    next: last && rows.length > PAGE_SIZE ? writeCursor(last.place, last.id) : null,
  };
};

export const actions: Actions = {
  test: async ({ locals, params }) => {
    await webhooks.sendTest(whoAsks(locals), uuidParam(params.id));
    redirect(303, `/team/webhooks/${params.id}`);
  },

  again: async ({ locals, request }) => {
    const form = await readForm(request, deliverySchema);
    if (!form.data) return fail(404, { message: 'This delivery is not in the log any more.' });
    try {
      await webhookLog.redeliver(whoAsks(locals), form.data.delivery);
      return { message: 'It is being sent again.' };
    } catch (error) {
      if (!isHttpError(error, 409)) throw error;
      return fail(409, { message: error.body.message });
    }
  },
};
