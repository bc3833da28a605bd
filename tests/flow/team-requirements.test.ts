/** What a team requires of its members' sign-ins and tokens. */
import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { findMissing } from '$lib/domain/sign-in-strength';
import * as apiTokens from '$lib/server/api-tokens';
import { db } from '$lib/server/db';
import { secondFactors, teams } from '$lib/server/db/schema';
import * as sessions from '$lib/server/sessions';
import { listReadiness, setRequirements } from '$lib/server/team-requirements';
import { client } from '../support/accounts';
import { newTeam } from '../support/people';

const byPassword = { method: 'password', withSecondFactor: false } as const;
const withFactor = { method: 'password', withSecondFactor: true } as const;
const byProvider = { method: 'single sign-on', withSecondFactor: false } as const;
const byProviderWithFactors = { method: 'single sign-on', withSecondFactor: true } as const;
const nothing = { secondFactor: false, singleSignOn: false };
const token = { name: 'nightly', scope: 'read', days: 7 } as const;

const requireOf = (teamId: string, secondFactor: boolean, singleSignOn: boolean) =>
  db
    .update(teams)
    .set({ requiresSecondFactor: secondFactor, requiresSingleSignOn: singleSignOn })
    .where(eq(teams.id, teamId));

const switchOn = (userId: string, confirmedAt: Date | null) =>
  db.insert(secondFactors).values({ userId, secret: 'sealed', confirmedAt });

describe('a sign-in', () => {
  it.each([
    [nothing, byPassword, null],
    [{ ...nothing, secondFactor: true }, byPassword, 'second factor'],
    [{ ...nothing, secondFactor: true }, withFactor, null],
    [{ ...nothing, secondFactor: true }, byProvider, 'second factor'],
    [{ ...nothing, secondFactor: true }, byProviderWithFactors, null],
    [{ ...nothing, singleSignOn: true }, withFactor, 'single sign-on'],
    [{ ...nothing, singleSignOn: true }, byProvider, null],
    [{ secondFactor: true, singleSignOn: true }, byProvider, 'second factor'],
  ] as const)('where %j is required, %j lacks %j', (requires, shown, missing) => {
    expect(findMissing(requires, shown)).toBe(missing);
  });

  it('learns at the next request what its team requires', async () => {
    const { chemist } = await newTeam();
    const sessionId = await sessions.begin(chemist.userId, client);
    await requireOf(chemist.teamId, true, false);
    const found = await sessions.find(sessionId);
    expect(found?.memberships[0]?.requires).toEqual({ secondFactor: true, singleSignOn: false });
  });
});

describe('a lead', () => {
  it('sets what is required only as far as their own sign-in would pass', async () => {
    const { lead } = await newTeam();
    const both = { secondFactor: true, singleSignOn: true };
    expect(await setRequirements(lead, both, byProvider)).toBe('second factor');
    expect(await setRequirements(lead, both, withFactor)).toBe('single sign-on');
    expect(await setRequirements(lead, both, byProviderWithFactors)).toBeNull();
    const [team] = await db.select().from(teams).where(eq(teams.id, lead.teamId));
    expect(team).toMatchObject({ requiresSecondFactor: true, requiresSingleSignOn: true });
    expect(await setRequirements(lead, nothing, byProviderWithFactors)).toBeNull();
  });

  it('sees who has a second factor; nobody else sees or sets anything', async () => {
    const { lead, reader, modeler } = await newTeam();
    await switchOn(reader.userId, new Date());
    await switchOn(modeler.userId, null);
    const ready = (await listReadiness(lead)).filter((one) => one.hasSecondFactor);
    expect(ready.map(({ id }) => id)).toEqual([reader.userId]);
    expect(() => listReadiness(modeler)).toThrow();
    await expect(setRequirements(modeler, nothing, withFactor)).rejects.toMatchObject({
      status: 403,
    });
  });
});

describe('a token', () => {
  it('is held to what its team requires of a second factor at this moment', async () => {
    const { chemist } = await newTeam();
    const text = await apiTokens.create(chemist, token, withFactor);
    const missing = async () => (await apiTokens.findBearer(text, ''))?.missing;
    expect(await missing()).toBeNull();
    await requireOf(chemist.teamId, true, false);
    expect(await missing()).toBe('second factor');
    await switchOn(chemist.userId, null);
    expect(await missing()).toBe('second factor');
    await db
      .update(secondFactors)
      .set({ confirmedAt: new Date() })
      .where(eq(secondFactors.userId, chemist.userId));
    expect(await missing()).toBeNull();
  });

  it('made after a password does not pass where single sign-on is required', async () => {
    const { chemist } = await newTeam();
    const old = await apiTokens.create(chemist, token);
    const own = await apiTokens.create(chemist, token, byProviderWithFactors);
    await requireOf(chemist.teamId, true, true);
    expect((await apiTokens.findBearer(old, ''))?.missing).toBe('single sign-on');
    expect((await apiTokens.findBearer(own, ''))?.missing).toBeNull();
  });
});
