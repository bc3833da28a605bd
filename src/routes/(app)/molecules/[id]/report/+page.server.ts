import { uuidParam } from '$lib/domain/identifiers';
import { load as loadReport } from '$lib/server/report';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  ...(await loadReport(whoAsks(locals), uuidParam(params.id))),
  printedAt: new Date(),
});
