import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import * as tasks from '$lib/server/tasks';

export const POST = serve(operations.rerunBatch, async ({ member, id }) => ({
  tasks: await tasks.rerun(member, { batchId: id('id') }),
}));
