import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import { bundleResponse } from '$lib/server/bundle-response';
import { bundleMolecule } from '$lib/server/bundles';

export const GET = serve(operations.moleculeBundle, async ({ member, id }) =>
  bundleResponse(await bundleMolecule(member, id('id'))),
);
