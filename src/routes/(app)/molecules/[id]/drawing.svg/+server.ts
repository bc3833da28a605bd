/** The structure drawing as an image for lists; it brings its own colors for light and dark. */
import { svgDocument } from '$lib/domain/drawings';
import { draw } from '$lib/server/molecules';
import { whoAsks } from '$lib/server/teams';
import { uuidParam } from '$lib/domain/identifiers';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
  const drawing = await draw(whoAsks(locals), uuidParam(params.id));
  return new Response(svgDocument(drawing), {
    headers: {
      'content-type': 'image/svg+xml',
      // A structure never changes under its id; the answer is the team's own.
      'cache-control': 'private, max-age=86400, immutable',
    },
  });
};
