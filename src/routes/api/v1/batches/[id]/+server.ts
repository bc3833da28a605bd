import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import * as batches from '$lib/server/batches';
import { notFound } from '$lib/server/member';

export const GET = serve(operations.getBatch, async ({ member, id }) => {
  const { submittedAt, name, maker, plan, reading, ...batch } = await batches.get(member, id('id'));
  if (!submittedAt) notFound('batch');
  const { counts, share } = await batches.progress(member, batch.id);
  const at = submittedAt.toISOString();
  return { id: batch.id, name, submittedAt: at, maker, counts, share, plan, reading };
});
