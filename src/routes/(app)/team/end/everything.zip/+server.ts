import { bundleResponse } from '$lib/server/bundle-response';
import { requireFresh } from '$lib/server/freshness';
import { require } from '$lib/server/member';
import { exportTeam } from '$lib/server/team-export';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** All that the team has, streamed. */
export const GET: RequestHandler = async (event) => {
  const member = whoAsks(event.locals);
  require(member, 'export the team');
  requireFresh(event, '/team/end');
  return bundleResponse(await exportTeam(member));
};
