import { error, fail } from '@sveltejs/kit';
import { partnerLinkSchema, revokeLinkSchema } from '$lib/domain/partner-links';
import { readForm } from '$lib/server/forms';
import * as partnerLinks from '$lib/server/partner-links';
import { whoAsks } from '$lib/server/teams';
import type { Member } from '$lib/server/member';
import type { Actions, PageServerLoad } from './$types';

/** A link as the list shows it, with the name of what it shows. */
async function withName(
  member: Member,
  link: Awaited<ReturnType<typeof partnerLinks.listOpen>>[number],
) {
  return { ...link, name: await partnerLinks.nameOf(member, link) };
}

/** What the address asks to share: "batch:…" or "molecule:…", by name. */
async function chosenSubject(member: Member, subject: string | null) {
  const parsed = partnerLinkSchema.shape.subject.safeParse(subject);
  if (!parsed.success) return null;
  const [kind, id] = parsed.data.split(':');
  const name = await partnerLinks.nameOf(member, {
    batchId: kind === 'batch' ? id : null,
    moleculeId: kind === 'molecule' ? id : null,
  });
  return { subject: parsed.data, kind, name };
}

export const load: PageServerLoad = async ({ locals, url }) => {
  const member = whoAsks(locals);
  const links = await partnerLinks.listOpen(member);
  return {
    links: await Promise.all(links.map((link) => withName(member, link))),
    chosen: await chosenSubject(member, url.searchParams.get('share')),
  };
};

export const actions: Actions = {
  create: async ({ locals, request, url }) => {
    const form = await readForm(request, partnerLinkSchema);
    if (!form.data) return fail(400, { errors: form.faults.errors, address: null, message: '' });
    const secret = await partnerLinks.create(whoAsks(locals), form.data);
    return { errors: {}, address: new URL(`/shared/${secret}`, url).href, message: '' };
  },

  revoke: async ({ locals, request }) => {
    const form = await readForm(request, revokeLinkSchema);
    if (!form.data) error(400, 'Name the link.');
    const isDone = await partnerLinks.revoke(whoAsks(locals), form.data.link);
    const message = isDone ? 'The link has ended.' : 'This link had ended already.';
    return { errors: {}, address: null, message };
  },
};
