import { operations } from '$lib/domain/api';
import { readCursor, serve, writeCursor } from '$lib/server/api';
import { listDeliveries } from '$lib/server/webhook-log';

export const GET = serve(operations.listDeliveries, async ({ member, id, query }) => {
  const after = readCursor(query.cursor);
  const rows = await listDeliveries(member, id('id'), after, query.limit + 1);
  const items = rows.slice(0, query.limit);
  const last = items.at(-1);
  return {
    items: items.map(
      ({ place: _place, isUnderWay: _isUnderWay, createdAt, attemptedAt, nextAt, ...row }) => ({
        ...row,
        createdAt: createdAt.toISOString(),
        attemptedAt: attemptedAt?.toISOString() ?? null,
        nextAt: nextAt?.toISOString() ?? null,
      }),
    ),
    next: last && rows.length > query.limit ? writeCursor(last.place, last.id) : null,
  };
});
