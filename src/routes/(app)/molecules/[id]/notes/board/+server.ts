/** The notes of a molecule for a page that shows them already and heard of news. */
import { json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { board } from '$lib/server/note-board';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
  json(await board(whoAsks(locals), uuidParam(params.id)));
