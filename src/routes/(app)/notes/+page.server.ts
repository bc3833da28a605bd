import { list, noteLists } from '$lib/server/note-board';
import { whoAsks } from '$lib/server/teams';
import { z } from 'zod';
import type { PageServerLoad } from './$types';

const PAGE_SIZE = 20;

const querySchema = z.object({
  show: z.enum(noteLists).catch('mentions'),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});

export const load: PageServerLoad = async ({ locals, url }) => {
  const query = querySchema.parse(Object.fromEntries(url.searchParams));
  const listed = await list(whoAsks(locals), query.show, query.page, PAGE_SIZE);
  return { ...listed, ...query, pageSize: PAGE_SIZE };
};
