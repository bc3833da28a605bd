import { operations, type Operation } from '$lib/domain/api';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = ({ url }) => ({
  address: `${url.origin}/api/v1`,
  operations: Object.values(operations).map(({ method, path, summary, scope }: Operation) => ({
    method: method.toUpperCase(),
    path,
    summary,
    scope,
  })),
});
