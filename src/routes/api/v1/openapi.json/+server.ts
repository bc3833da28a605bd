import { json } from '@sveltejs/kit';
import { apiDocument } from '$lib/domain/api-document';
import type { RequestHandler } from './$types';

/** The OpenAPI document, for everybody: it tells nothing of any team. */
export const GET: RequestHandler = ({ url }) => json(apiDocument(url.origin));
