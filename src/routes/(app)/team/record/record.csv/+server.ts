import { Readable } from 'node:stream';
import { exportCsv, recordFilterSchema } from '$lib/server/record';
import { require } from '$lib/server/member';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** The record as CSV, streamed, narrowed down as the page is. */
export const GET: RequestHandler = ({ locals, url }) => {
  const member = whoAsks(locals);
  // Before the first byte: a refusal in mid-stream could not be told.
  require(member, 'read the record');
  const filter = recordFilterSchema.parse(Object.fromEntries(url.searchParams));
  const lines = Readable.from(exportCsv(member, filter), { objectMode: false });
  return new Response(Readable.toWeb(lines) as ReadableStream<Uint8Array>, {
    headers: {
      'content-type': 'text/csv; charset=utf-8',
      'content-disposition': 'attachment; filename="record.csv"',
      'cache-control': 'no-store',
    },
  });
};
