/** The conjugated bonds of a batch as a table, in the order that was looked at. */
import { Readable } from 'node:stream';
import { safeName } from '$lib/domain/file-names';
import { uuidParam } from '$lib/domain/identifiers';
import * as series from '$lib/server/series';
import { whoAsks } from '$lib/server/teams';
import { readSeriesQuery } from '../series/query.server';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params, url }) => {
  const { name, lines } = await series.table(
    whoAsks(locals),
    uuidParam(params.id),
    readSeriesQuery(url),
  );
  return new Response(Readable.toWeb(Readable.from(lines)) as ReadableStream<Uint8Array>, {
    headers: {
      'content-type': 'text/csv; charset=utf-8',
      'content-disposition': `attachment; filename="${safeName(name, 'batch')}_conjugation.csv"`,
      'cache-control': 'no-store',
    },
  });
};
