/** Metrics in the text format of Prometheus; who may not read them finds nothing here. */
import { error } from '@sveltejs/kit';
import { mayReadMetrics } from '$lib/server/metrics-access';
import { METRICS_CONTENT_TYPE, readMetrics } from '$lib/server/metrics-page';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ request, getClientAddress }) => {
  if (!mayReadMetrics(request.headers, getClientAddress())) {
    error(404, 'There is no page at this address.');
  }
  return new Response(await readMetrics(), {
    headers: { 'content-type': METRICS_CONTENT_TYPE, 'cache-control': 'no-store' },
  });
};
