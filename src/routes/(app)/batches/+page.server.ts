import * as batches from '$lib/server/batches';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

const PAGE_SIZE = 30;

export const load: PageServerLoad = async ({ locals, url }) => {
  const page = Math.max(1, Math.floor(Number(url.searchParams.get('page'))) || 1);
  return { ...(await batches.list(whoAsks(locals), page, PAGE_SIZE)), page, pageSize: PAGE_SIZE };
};
