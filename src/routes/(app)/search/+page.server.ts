import { readSearch } from '$lib/domain/search';
import { listBatchNames, search, SearchFault, type SearchAnswer } from '$lib/server/search';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

const PAGE_SIZE = 30;
/** Most batches to choose from; older ones are found by name. */
const BATCHES = 200;

const nothing: SearchAnswer = { rows: [], total: 0, candidates: 0, compared: 0, next: null };

export const load: PageServerLoad = async ({ locals, url }) => {
  const member = whoAsks(locals);
  const query = readSearch(url.searchParams);
  const rest = { query, pageSize: PAGE_SIZE, batches: await listBatchNames(member, BATCHES) };
  try {
    return { ...rest, fault: null, answer: await search(member, query, PAGE_SIZE) };
  } catch (error) {
    if (!(error instanceof SearchFault)) throw error;
    return { ...rest, fault: { field: error.field, message: error.message }, answer: nothing };
  }
};
