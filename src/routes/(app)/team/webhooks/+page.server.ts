import { fail } from '@sveltejs/kit';
import { newWebhookSchema, switchWebhookSchema, webhookSchema } from '$lib/domain/webhooks';
import { faultOf, nothing, readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import { require } from '$lib/server/member';
import { whoAsks } from '$lib/server/teams';
import { AddressRefused } from '$lib/server/webhook-addresses';
import * as webhooks from '$lib/server/webhooks';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => ({
  webhooks: await webhooks.list(whoAsks(locals)),
});

/** What every form here answers. */
const answer = (given: {
  readonly made?: webhooks.MadeWebhook;
  readonly message?: string;
  readonly errors?: Record<string, string>;
  readonly values?: Record<string, string>;
}) => ({ made: null, message: '', errors: nothing, values: nothing, ...given });

const GONE = 'This webhook is not there any more.';

export const actions: Actions = {
  create: async (event) => {
    const { locals, request } = event;
    require(whoAsks(locals), 'manage webhooks');
    requireFresh(event);
    const form = await readForm(request, newWebhookSchema);
    if (!form.data) return fail(400, answer(form.faults));
    try {
      return answer({ made: await webhooks.create(whoAsks(locals), form.data) });
    } catch (error) {
      if (!(error instanceof AddressRefused)) throw error;
      return fail(400, answer({ errors: faultOf('url', error.message), values: form.values }));
    }
  },

  renew: async (event) => {
    const { locals, request } = event;
    require(whoAsks(locals), 'manage webhooks');
    requireFresh(event);
    const form = await readForm(request, webhookSchema);
    if (!form.data) return fail(404, answer({ message: GONE }));
    return answer({ made: await webhooks.renewSecret(whoAsks(locals), form.data.webhook) });
  },

  switch: async ({ locals, request }) => {
    const form = await readForm(request, switchWebhookSchema);
    if (!form.data) return fail(404, answer({ message: GONE }));
    const isOn = form.data.on === 'yes';
    await webhooks.switchTo(whoAsks(locals), form.data.webhook, isOn);
    return answer({
      message: isOn
        ? 'The webhook is on: it hears of the next finished batch.'
        : 'The webhook is off; what waited for it is given up.',
    });
  },

  remove: async ({ locals, request }) => {
    const form = await readForm(request, webhookSchema);
    if (!form.data) return fail(404, answer({ message: GONE }));
    await webhooks.remove(whoAsks(locals), form.data.webhook);
    return answer({ message: 'The webhook and its log are removed.' });
  },
};
