/** The geometries of a scan as packed numbers, for turning it in the browser: one request for each scan. */
import { uuidParam } from '$lib/domain/identifiers';
import { packedGeometries } from '$lib/server/molecule-page';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params, request }) => {
  const resultId = uuidParam(params.result);
  const packed = await packedGeometries(whoAsks(locals), uuidParam(params.id), resultId);
  // A stored answer never changes, so its id says all about its content.
  const headers = {
    etag: `"${resultId}"`,
    'cache-control': 'private, max-age=31536000, immutable',
  };
  if (request.headers.get('if-none-match') === headers.etag) {
    return new Response(null, { status: 304, headers });
  }
  return new Response(packed, {
    headers: { ...headers, 'content-type': 'application/octet-stream' },
  });
};
