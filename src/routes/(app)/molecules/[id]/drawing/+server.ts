/** The structure drawing with the places of its atoms and bonds, for choosing bonds. */
import { json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { draw } from '$lib/server/molecules';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
  json(await draw(whoAsks(locals), uuidParam(params.id)), {
    headers: { 'cache-control': 'private, max-age=86400, immutable' },
  });
