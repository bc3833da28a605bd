import { uuidParam } from '$lib/domain/identifiers';
import { bundleResponse } from '$lib/server/bundle-response';
import { bundleMolecule } from '$lib/server/bundles';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** The bundle of one molecule with all answers the team has for it. */
export const GET: RequestHandler = async ({ locals, params }) =>
  bundleResponse(await bundleMolecule(whoAsks(locals), uuidParam(params.id)));
