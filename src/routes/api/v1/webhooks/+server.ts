import { error } from '@sveltejs/kit';
import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import { AddressRefused } from '$lib/server/webhook-addresses';
import * as webhooks from '$lib/server/webhooks';

export const GET = serve(operations.listWebhooks, async ({ member }) => {
  const rows = await webhooks.list(member);
  return {
    items: rows.map(({ id, name, url, isOn, failingSince, givenUpAt, createdAt }) => ({
      id,
      name,
      url,
      on: isOn,
      failingSince: failingSince?.toISOString() ?? null,
      givenUpAt: givenUpAt?.toISOString() ?? null,
      createdAt: createdAt.toISOString(),
    })),
  };
});

export const POST = serve(operations.createWebhook, ({ member, body }) =>
  webhooks.create(member, body).catch((cause: unknown) => {
    if (cause instanceof AddressRefused) error(422, cause.message);
    throw cause;
  }),
);
