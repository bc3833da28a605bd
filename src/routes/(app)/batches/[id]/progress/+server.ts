/** The progress of a batch, for pages whose event stream does not come through. */
import { json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import * as batches from '$lib/server/batches';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
  const member = whoAsks(locals);
  const batch = await batches.get(member, uuidParam(params.id));
  return json(await batches.progress(member, batch.id));
};
