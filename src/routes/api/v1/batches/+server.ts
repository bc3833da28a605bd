import { operations } from '$lib/domain/api';
import { readCursor, serve, writeCursor } from '$lib/server/api';
import { submitRequest } from '$lib/server/api-submission';
import * as lists from '$lib/server/batch-lists';
import { once } from '$lib/server/idempotency';

export const GET = serve(operations.listBatches, async ({ member, query }) => {
  const rows = await lists.listAfter(member, readCursor(query.cursor), query.limit + 1);
  const items = rows.slice(0, query.limit);
  const last = items.at(-1);
  return {
    items: items.map(({ place: _place, submittedAt, ...row }) => ({
      ...row,
      submittedAt: submittedAt.toISOString(),
    })),
    next: last && rows.length > query.limit ? writeCursor(last.place, last.id) : null,
  };
});

export const POST = serve(operations.submitBatch, ({ member, body, text, event }) =>
  once(member, event.request.headers.get('idempotency-key'), text, () =>
    submitRequest(member, body),
  ),
);
