import { bundleResponse } from '$lib/server/bundle-response';
import { exportTeam } from '$lib/server/team-export';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** All that the team has, streamed. */
export const GET: RequestHandler = async ({ locals }) =>
  bundleResponse(await exportTeam(whoAsks(locals)));
