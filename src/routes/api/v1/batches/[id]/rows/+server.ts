import { operations } from '$lib/domain/api';
import { readCursor, serve, writeCursor } from '$lib/server/api';
import * as lists from '$lib/server/batch-lists';

export const GET = serve(operations.listRows, async ({ member, id, query }) => {
  const after = Number(readCursor(query.cursor)?.[0] ?? 0) || 0;
  const rows = await lists.listEntriesAfter(member, id('id'), after, query.limit + 1);
  const items = rows.slice(0, query.limit);
  const last = items.at(-1);
  return {
    items,
    next: last && rows.length > query.limit ? writeCursor(String(last.position), last.id) : null,
  };
});
