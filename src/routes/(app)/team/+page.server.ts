import { fail, redirect } from '@sveltejs/kit';
import { may } from '$lib/domain/roles';
import {
  changeRoleSchema,
  invitationSchema,
  inviteSchema,
  memberSchema,
  teamNameSchema,
} from '$lib/domain/team-forms';
import { nothing, readForm, type FormFaults } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import * as invitations from '$lib/server/invitations';
import { limitLetters } from '$lib/server/letter-limits';
import * as memberships from '$lib/server/memberships';
import { rememberTeam, whoAsks, whoIsSignedIn } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

type FormName = 'invite' | 'members' | 'rename' | 'open';

/** What a form on this page answers: which form it was, and what was wrong or done. */
const refusal = (form: FormName, message: string, values = nothing) => ({ form, message, values });
const done = (form: FormName, message: string) => ({ form, message, values: nothing });

const LAST_LEAD =
  'A team needs a lead. Make somebody else a lead first, or hand the team over to them.';

export const load: PageServerLoad = async ({ locals }) => {
  const member = whoAsks(locals);
  return {
    ownId: member.userId,
    members: await memberships.listMembers(member),
    invitations: may(member.role, 'manage members') ? await invitations.listOpen(member) : [],
  };
};

const badForm = (form: FormName, { values, errors }: FormFaults) =>
  fail(400, refusal(form, Object.values(errors)[0] ?? '', values));

export const actions: Actions = {
  invite: async (event) => {
    const member = whoAsks(event.locals);
    const form = await readForm(event.request, inviteSchema);
    if (!form.data) return badForm('invite', form.faults);
    const { email } = form.data;
    const wait = await limitLetters(event, email);
    if (wait !== null) {
      return fail(429, refusal('invite', `Too many letters. Wait ${wait} seconds.`, { email }));
    }
    if (!(await invitations.invite(member, form.data))) {
      return fail(400, refusal('invite', `${email} is in the team already.`, { email }));
    }
    return done('invite', `An invitation is on its way to ${email}.`);
  },

  withdraw: async (event) => {
    const form = await readForm(event.request, invitationSchema);
    const isDone =
      form.data && (await invitations.withdraw(whoAsks(event.locals), form.data.invitation));
    if (!isDone) return fail(404, refusal('invite', 'This invitation is not open any more.'));
    return done('invite', 'The invitation is taken back.');
  },

  changeRole: async (event) => {
    requireFresh(event);
    const form = await readForm(event.request, changeRoleSchema);
    if (!form.data) return badForm('members', form.faults);
    const { member, role } = form.data;
    const outcome = await memberships.changeRole(whoAsks(event.locals), member, role);
    if (outcome === 'last lead') return fail(409, refusal('members', LAST_LEAD));
    return done('members', 'The role is changed.');
  },

  remove: async (event) => {
    requireFresh(event);
    const form = await readForm(event.request, memberSchema);
    if (!form.data) return badForm('members', form.faults);
    const outcome = await memberships.remove(whoAsks(event.locals), form.data.member);
    if (outcome === 'last lead') return fail(409, refusal('members', LAST_LEAD));
    return done('members', 'They are no longer in the team.');
  },

  handOver: async (event) => {
    requireFresh(event);
    const form = await readForm(event.request, memberSchema);
    if (!form.data) return badForm('members', form.faults);
    await memberships.handOver(whoAsks(event.locals), form.data.member);
    return done('members', 'The team is handed over; you are a modeler in it now.');
  },

  leave: async (event) => {
    const outcome = await memberships.leave(whoAsks(event.locals));
    if (outcome === 'last lead') return fail(409, refusal('members', LAST_LEAD));
    redirect(303, '/account');
  },

  rename: async (event) => {
    const form = await readForm(event.request, teamNameSchema);
    if (!form.data) return badForm('rename', form.faults);
    await memberships.renameTeam(whoAsks(event.locals), form.data.name);
    return done('rename', 'The team has its new name.');
  },

  open: async (event) => {
    const { user } = whoIsSignedIn(event.locals);
    const form = await readForm(event.request, teamNameSchema);
    if (!form.data) return badForm('open', form.faults);
    const person = { userId: user.id, address: event.getClientAddress() };
    rememberTeam(event, await memberships.openTeam(person, form.data.name));
    redirect(303, '/team');
  },
};
