import { uuidParam } from '$lib/domain/identifiers';
import * as series from '$lib/server/series';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';
import { readSeriesQuery } from './query.server';

const PAGE_SIZE = 50;

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const query = readSeriesQuery(url);
  const listed = await series.list(whoAsks(locals), uuidParam(params.id), {
    ...query,
    pageSize: PAGE_SIZE,
  });
  return { ...listed, query, pageSize: PAGE_SIZE };
};
