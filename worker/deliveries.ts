/** Delivers to webhooks, beside the tasks. */
import { countDelivery } from '../src/lib/server/metrics';
import { deliver } from '../src/lib/server/webhook-delivery';
import { workOnDeliveries } from '../src/lib/server/webhook-queue';

/** Begins to deliver; answers the way to stop, which waits for what is being sent. */
export function deliverWebhooks(): Promise<() => Promise<void>> {
  return workOnDeliveries(async (job) => {
    const outcome = await deliver(job);
    if (outcome !== 'none') countDelivery(outcome);
  });
}
