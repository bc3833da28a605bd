import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import * as webhooks from '$lib/server/webhooks';

export const POST = serve(operations.testWebhook, async ({ member, id }) => ({
  delivery: await webhooks.sendTest(member, id('id')),
}));
