import { problemResponse } from '$lib/server/api';
import type { RequestHandler } from './$types';

/** What is not in the interface. */
export const fallback: RequestHandler = () =>
  problemResponse(
    404,
    'There is nothing at this address; /api/v1/openapi.json lists what there is.',
  );
