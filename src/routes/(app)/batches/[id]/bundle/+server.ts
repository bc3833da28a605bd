import { uuidParam } from '$lib/domain/identifiers';
import { bundleResponse } from '$lib/server/bundle-response';
import { bundleBatch } from '$lib/server/bundles';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** The bundle of a batch; `row` may name single rows, as often as needed. */
export const GET: RequestHandler = async ({ locals, params, url }) =>
  bundleResponse(
    await bundleBatch(
      whoAsks(locals),
      uuidParam(params.id),
      url.searchParams.getAll('row').map(uuidParam),
    ),
  );
