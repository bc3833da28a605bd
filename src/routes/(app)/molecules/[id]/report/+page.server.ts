import { uuidParam } from '$lib/domain/identifiers';
import { load as loadReport } from '$lib/server/report';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, parent }) => {
  const { energyUnit } = await parent();
  return {
    ...(await loadReport(whoAsks(locals), uuidParam(params.id), energyUnit)),
    printedAt: new Date(),
  };
};
