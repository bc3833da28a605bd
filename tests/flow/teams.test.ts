/** Members, invitations and the record of a team, against a real database and mail catcher. */
import { eq, sql } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { describe, expect, inject, it } from 'vitest';
import { db } from '$lib/server/db';
import { events, invitations as invitationRows, memberships, teams } from '$lib/server/db/schema';
import * as invitations from '$lib/server/invitations';
import * as members from '$lib/server/memberships';
import { exportCsv, readPage } from '$lib/server/record';
import * as sessions from '$lib/server/sessions';
import * as users from '$lib/server/users';
import { tokenOf, waitForLetter } from '../support/letters';
import { newTeam } from '../support/people';

const { lettersUrl } = inject('mail');
const password = 'wet lantern over nine hills';
const newAddress = () => `${randomUUID().slice(0, 8)}@people.example`;

/** An invitation's address and the secret of its letter. */
async function invited(lead: Awaited<ReturnType<typeof newTeam>>['lead'], email = newAddress()) {
  expect(await invitations.invite(lead, { email, role: 'chemist' })).toBe(true);
  const [team] = await db.select().from(teams).where(eq(teams.id, lead.teamId));
  const letter = await waitForLetter(lettersUrl, email, `Join ${team!.name} on Windlass`);
  return { email, token: tokenOf(letter) };
}

const roleOf = async (userId: string, teamId: string) => {
  const rows = await db.select().from(memberships).where(eq(memberships.userId, userId));
  return rows.find((row) => row.teamId === teamId)?.role ?? null;
};

describe('an invitation', () => {
  it('makes its reader a confirmed member with the role it names, and only that', async () => {
    const { lead } = await newTeam();
    const { email, token } = await invited(lead);
    const teamId = await users.signUpByInvitation({ token, name: 'Ada', password }, '192.0.2.7');
    expect(teamId).toBe(lead.teamId);
    const outcome = await users.signIn({ email, password }, { address: '', userAgent: '' });
    if (!('sessionId' in outcome)) throw new Error(JSON.stringify(outcome));
    const found = await sessions.find(outcome.sessionId);
    expect(found?.memberships).toMatchObject([{ teamId, role: 'chemist' }]);
  });

  // OWASP ASVS 5.0, 6.4.1: activation codes end with their first use or after a short time.
  it('works once', async () => {
    const { lead } = await newTeam();
    const { token } = await invited(lead);
    await users.signUpByInvitation({ token, name: 'Ada', password }, '');
    expect(await invitations.find(token)).toBeNull();
    expect(await users.signUpByInvitation({ token, name: 'Eve', password }, '')).toBeNull();
  });

  it('is worth nothing to who has another address', async () => {
    const { lead, reader } = await newTeam();
    const { token } = await invited(lead);
    const other = await newTeam();
    const thief = { userId: other.reader.userId, email: newAddress() };
    expect(await invitations.accept(thief, token)).toBeNull();
    expect(await roleOf(other.reader.userId, reader.teamId)).toBeNull();
    expect(await invitations.find(token)).not.toBeNull();
  });

  it('stops working when it is withdrawn, replaced, or old', async () => {
    const { lead } = await newTeam();
    const first = await invited(lead);
    const [open] = await invitations.listOpen(lead);
    expect(await invitations.withdraw(lead, open!.id)).toBe(true);
    expect(await invitations.find(first.token)).toBeNull();

    const second = await invited(lead);
    await invitations.invite(lead, { email: second.email, role: 'reader' });
    expect(await invitations.find(second.token)).toBeNull();

    const third = await invited(lead);
    await db
      .update(invitationRows)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(invitationRows.email, third.email));
    expect(await invitations.find(third.token)).toBeNull();
  });

  it('is refused to members, and not sent by who may not', async () => {
    const { lead, modeler } = await newTeam();
    const [present] = await members.listMembers(lead);
    expect(await invitations.invite(lead, { email: present!.email, role: 'reader' })).toBe(false);
    await expect(
      invitations.invite(modeler, { email: newAddress(), role: 'reader' }),
    ).rejects.toMatchObject({ status: 403 });
  });

  it('of another team cannot be withdrawn', async () => {
    const [one, two] = [await newTeam(), await newTeam()];
    const { token } = await invited(one.lead);
    const [open] = await invitations.listOpen(one.lead);
    expect(await invitations.withdraw(two.lead, open!.id)).toBe(false);
    expect(await invitations.find(token)).not.toBeNull();
  });
});

describe('a team', () => {
  it('keeps its last lead, also when two leads leave at the same moment', async () => {
    const { lead, modeler } = await newTeam();
    expect(await members.leave(lead)).toBe('last lead');
    expect(await members.changeRole(lead, lead.userId, 'reader')).toBe('last lead');
    expect(await members.changeRole(lead, modeler.userId, 'lead')).toBe('done');
    const outcomes = await Promise.all([
      members.leave(lead),
      members.leave({ ...modeler, role: 'lead' }),
    ]);
    expect([...outcomes].sort()).toEqual(['done', 'last lead']);
  });

  it('is handed over in one step', async () => {
    const { lead, chemist } = await newTeam();
    await members.handOver(lead, chemist.userId);
    expect(await roleOf(chemist.userId, lead.teamId)).toBe('lead');
    expect(await roleOf(lead.userId, lead.teamId)).toBe('modeler');
  });

  it('tells a member who is taken out, and takes nobody out of another team', async () => {
    const [one, two] = [await newTeam(), await newTeam()];
    const all = await members.listMembers(one.lead);
    const { email } = all.find(({ id }) => id === one.reader.userId)!;
    expect(await members.remove(one.lead, one.reader.userId)).toBe('done');
    expect(await roleOf(one.reader.userId, one.lead.teamId)).toBeNull();
    await waitForLetter(
      lettersUrl,
      email,
      `You are no longer in ${(await db.select().from(teams).where(eq(teams.id, one.lead.teamId)))[0]!.name}`,
    );
    await expect(members.remove(one.lead, two.reader.userId)).rejects.toMatchObject({
      status: 404,
    });
  });

  it.each(['reader', 'chemist', 'modeler'] as const)('is not changed by a %s', async (role) => {
    const team = await newTeam();
    const asking = team[role];
    const target = team.lead.userId;
    await expect(members.changeRole(asking, target, 'reader')).rejects.toMatchObject({
      status: 403,
    });
    await expect(members.remove(asking, target)).rejects.toMatchObject({ status: 403 });
    await expect(members.handOver(asking, target)).rejects.toMatchObject({ status: 403 });
    await expect(readPage(asking, {})).rejects.toMatchObject({ status: 403 });
  });
});

describe('the record', () => {
  it('says who did what to what, from where, and is filtered by each of them', async () => {
    const { lead, chemist } = await newTeam();
    const asking = { ...lead, address: '192.0.2.9' };
    await members.changeRole(asking, chemist.userId, 'modeler');
    await members.renameTeam(asking, 'Another name');
    const { rows } = await readPage(lead, {});
    expect(rows.map(({ action }) => action)).toEqual(['rename team', 'change role']);
    expect(rows[1]).toMatchObject({
      actor: 'A lead',
      subject: `user:${chemist.userId}`,
      address: '192.0.2.9',
      details: { from: 'chemist', to: 'modeler' },
    });
    expect((await readPage(lead, { action: 'change role' })).rows).toHaveLength(1);
    expect((await readPage(lead, { actor: chemist.userId })).rows).toHaveLength(0);
    expect((await readPage(lead, { to: '2020-01-01' })).rows).toHaveLength(0);
    expect((await readPage((await newTeam()).lead, {})).rows).toHaveLength(0);
  });

  it('is exported whole, page by page, without formulas', async () => {
    const { lead } = await newTeam();
    await members.renameTeam(lead, '=1+1');
    await db.insert(events).values(
      Array.from({ length: 1200 }, (_, n) => ({
        teamId: lead.teamId,
        actorId: lead.userId,
        action: 'submit batch',
        subject: `=batch:${n}`,
      })),
    );
    const pieces: string[] = [];
    for await (const piece of exportCsv(lead, {})) pieces.push(piece);
    const lines = pieces.join('').trimEnd().split('\r\n');
    expect(lines).toHaveLength(1202);
    expect(lines[1]).toContain(`'=batch:1199`);
    expect(lines.at(-1)).toContain('rename team');
  });

  // OWASP ASVS 5.0, 16.4.2: logs are protected from modification.
  it('cannot be changed or shortened, but goes with its team', async () => {
    const { lead } = await newTeam();
    await members.renameTeam(lead, 'Soon gone');
    const ofTeam = eq(events.teamId, lead.teamId);
    const refused = expect.objectContaining({ cause: expect.objectContaining({ code: '23001' }) });
    await expect(db.update(events).set({ action: 'x' }).where(ofTeam)).rejects.toEqual(refused);
    await expect(db.delete(events).where(ofTeam)).rejects.toEqual(refused);
    await db.delete(teams).where(eq(teams.id, lead.teamId));
    expect(await db.$count(events, ofTeam)).toBe(0);
  });
});
