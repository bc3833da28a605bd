import { queueOf } from '$lib/server/team-queue';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals, depends }) => {
  depends('windlass:queue');
  return queueOf(whoAsks(locals));
};
