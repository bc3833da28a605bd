import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import * as webhooks from '$lib/server/webhooks';

export const DELETE = serve(operations.deleteWebhook, async ({ member, id }) => {
  await webhooks.remove(member, id('id'));
  return new Response(null, { status: 204 });
});
