import { listMembers } from '$lib/server/memberships';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => ({
  members: await listMembers(whoAsks(locals)),
});
