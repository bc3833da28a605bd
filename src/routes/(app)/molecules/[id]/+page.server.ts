import { uuidParam } from '$lib/domain/identifiers';
import { load as loadMolecule } from '$lib/server/molecule-page';
import { board } from '$lib/server/note-board';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  molecule: await loadMolecule(whoAsks(locals), uuidParam(params.id)),
  notes: await board(whoAsks(locals), uuidParam(params.id)),
});
