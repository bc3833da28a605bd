import { listMembers } from '$lib/server/memberships';
import { listActions, readPage, recordFilterSchema } from '$lib/server/record';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const member = whoAsks(locals);
  const filter = recordFilterSchema.parse(Object.fromEntries(url.searchParams));
  const { rows, next } = await readPage(member, filter);
  return {
    rows,
    next,
    filter,
    actions: await listActions(member),
    people: (await listMembers(member)).map(({ id, name }) => ({ id, name })),
  };
};
