import { fail, redirect } from '@sveltejs/kit';
import { joinSchema } from '$lib/domain/accounts';
import { findPasswordFault } from '$lib/domain/passwords';
import { faultOf, nothing, readForm } from '$lib/server/forms';
import { findProvider } from '$lib/server/identity-provider';
import * as invitations from '$lib/server/invitations';
import { limitTries } from '$lib/server/letter-limits';
import { rememberTeam, whoIsSignedIn } from '$lib/server/teams';
import * as users from '$lib/server/users';
import type { Actions, PageServerLoad } from './$types';
import { tryToSignIn } from '../../../auth';

/** Opening the link changes nothing, because mail programs open links as well. */
export const load: PageServerLoad = async (event) => {
  const token = event.url.searchParams.get('token') ?? '';
  const wait = await limitTries(event);
  const invitation = wait === null ? await invitations.find(token) : null;
  const provider = findProvider()?.name ?? null;
  if (!invitation) return { token, invitation: null, hasAccount: false, provider };
  const { teamName, email, role, invitedBy } = invitation;
  return {
    token,
    invitation: { teamName, email, role, invitedBy },
    hasAccount: await users.hasAccount(email),
    provider,
  };
};

/** The page then says that the link does not work any more. */
const refuse = (name = '') => fail(400, { values: { name }, errors: nothing });

export const actions: Actions = {
  /** A person with an account joins. */
  accept: async (event) => {
    const { user } = whoIsSignedIn(event.locals);
    const token = event.url.searchParams.get('token') ?? '';
    const person = { userId: user.id, email: user.email, address: event.getClientAddress() };
    const teamId = await invitations.accept(person, token);
    if (teamId === null) return refuse();
    rememberTeam(event, teamId);
    redirect(303, '/desk');
  },

  /** A person without an account opens one and joins. */
  join: async (event) => {
    const form = await readForm(event.request, joinSchema);
    if (!form.data) return fail(400, form.faults);
    const { token, name, password } = form.data;
    const invitation = await invitations.find(token);
    if (!invitation) return refuse(name);
    const fault = findPasswordFault(password, [name, invitation.email]);
    if (fault) return fail(400, { values: form.values, errors: faultOf('password', fault) });
    const teamId = await users.signUpByInvitation(form.data, event.getClientAddress());
    if (teamId === null) return refuse(name);
    await tryToSignIn(event, { email: invitation.email, password });
    rememberTeam(event, teamId);
    redirect(303, '/desk');
  },
};
