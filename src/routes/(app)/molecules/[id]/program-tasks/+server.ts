/** What external programs still do for a molecule, for a page that waits for it. */
import { json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { open } from '$lib/server/program-tasks';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
  json(await open(whoAsks(locals), uuidParam(params.id)));
