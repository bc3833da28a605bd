/** Chosen conformers of an answer as an SDF file. */
import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { uuidParam } from '$lib/domain/identifiers';
import { conformersFile } from '$lib/server/conformers-file';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** Conformers by their numbers as people read them, from 1; none means all. */
const ranksSchema = z.array(z.coerce.number().int().min(1).max(1000)).max(1000);

export const GET: RequestHandler = async ({ locals, params, url }) => {
  const ranks = ranksSchema.safeParse(url.searchParams.getAll('rank'));
  if (!ranks.success) error(400, 'A rank is a whole number from 1, the lowest conformer.');
  const { fileName, content } = await conformersFile(
    whoAsks(locals),
    uuidParam(params.id),
    uuidParam(url.searchParams.get('result') ?? ''),
    ranks.data.map((rank) => rank - 1),
  );
  return new Response(content, {
    headers: {
      'content-type': 'chemical/x-mdl-sdfile',
      'content-disposition': `attachment; filename="${fileName}"`,
      'cache-control': 'no-store',
    },
  });
};
