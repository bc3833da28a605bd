import { fail, redirect } from '@sveltejs/kit';
import { linkPasswordSchema } from '$lib/domain/partner-links';
import { readForm } from '$lib/server/forms';
import { keepProof, openLink } from '$lib/server/partner-access';
import { describe, unlock } from '$lib/server/partner-links';
import { limitRate } from '$lib/server/rate-limits';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
  event.setHeaders({ 'cache-control': 'no-store', 'x-robots-tag': 'noindex' });
  const { link, isUnlocked } = await openLink(event);
  return { shared: isUnlocked ? await describe(link) : null };
};

export const actions: Actions = {
  default: async (event) => {
    const { link } = await openLink(event);
    const form = await readForm(event.request, linkPasswordSchema);
    if (!form.data) return fail(400, { message: 'Write the password.' });
    const wait = await limitRate(['password of a partner link', link.id]);
    if (wait !== null) return fail(429, { message: `Too many tries. Wait ${wait} seconds.` });
    const proof = await unlock(link, form.data.password);
    if (proof === null) return fail(400, { message: 'This is not the password of the link.' });
    keepProof(event, proof);
    redirect(303, event.url.pathname);
  },
};
