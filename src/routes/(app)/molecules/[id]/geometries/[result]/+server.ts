/** The geometries of an answer, for the 3-D view. */
import { json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { geometries } from '$lib/server/molecule-page';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
  json(await geometries(whoAsks(locals), uuidParam(params.id), uuidParam(params.result)), {
    // A stored answer never changes.
    headers: { 'cache-control': 'private, max-age=86400, immutable' },
  });
