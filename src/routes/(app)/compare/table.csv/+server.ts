/** The differences between compared profiles as a table. */
import { compareProfiles, readComparison } from '$lib/domain/comparison';
import { comparisonTable } from '$lib/domain/comparison-table';
import { loadProfiles } from '$lib/server/comparison';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, url }) => {
  const view = readComparison(url.searchParams);
  const ids = view.picks.map(({ profile }) => profile);
  const rows = compareProfiles(await loadProfiles(whoAsks(locals), ids), view);
  return new Response(comparisonTable(rows, view), {
    headers: {
      'content-type': 'text/csv; charset=utf-8',
      'content-disposition': 'attachment; filename="comparison.csv"',
    },
  });
};
