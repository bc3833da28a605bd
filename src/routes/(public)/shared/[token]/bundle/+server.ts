import { error } from '@sveltejs/kit';
import { bundleResponse } from '$lib/server/bundle-response';
import { openLink } from '$lib/server/partner-access';
import { download } from '$lib/server/partner-links';
import type { RequestHandler } from './$types';

/** The bundle behind a partner's link. */
export const GET: RequestHandler = async (event) => {
  const { link, isUnlocked } = await openLink(event);
  if (!isUnlocked) error(403, 'Open the link and give its password first.');
  return bundleResponse(await download(link, event.getClientAddress()));
};
