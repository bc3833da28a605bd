import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import { bundleResponse } from '$lib/server/bundle-response';
import { bundleBatch } from '$lib/server/bundles';

export const GET = serve(operations.batchBundle, async ({ member, id }) =>
  bundleResponse(await bundleBatch(member, id('id'))),
);
